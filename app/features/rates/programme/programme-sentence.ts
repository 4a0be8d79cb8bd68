import type { Counted } from "~/statistics";
import { incidenceRate } from "~/statistics";
import { stableFrom } from "../coverage";
import { decimalsFor, formatCount, formatRate, formatRatio } from "../figures";
import { type Part, readRatio } from "../sentence";
import { attention, interval, plain, ratioLimits, strong } from "../wording";
import { type Contrast, power, type Smallest, type Unplaced } from "./programme";
import type { leastRecorded, Skipping, SkipShare } from "./programme-compliance";

/** The sentences of the programme, computed; never more certain than the counts. */

const injuries = (events: number) =>
  events === 0 ? "no injuries" : `${formatCount(events)} ${events === 1 ? "injury" : "injuries"}`;
const exposures = (aes: number) => `${formatCount(aes)} athlete-exposure${Math.round(aes) === 1 ? "" : "s"}`;
const whole = (share: number) => `${Math.round(share * 100)} %`;

/** Who is compared: how a clause about each begins, and what the ratio is held against. */
export type ContrastWords = { a: string; b: string; against: string };

export const warmUpWords: ContrastWords = {
  a: "After a warm-up",
  b: "without one",
  against: "the rate without a warm-up",
};
export const thirdsWords: ContrastWords = {
  a: "Athletes in the highest third of compliance",
  b: "those in the lowest third",
  against: "the lowest third's rate",
};

function ratePart({ events, exposure }: Counted, decimals: number): Part[] {
  if (exposure === 0) return [strong(`${injuries(events)} in no athlete-exposure`)];
  const { estimate, lower, upper } = incidenceRate({ events, exposure });
  const [rate, from, to] = [estimate, lower, upper].map((value) => formatRate(value, decimals));
  return [
    strong(`${injuries(events)} in ${exposures(exposure)}`),
    plain(", "),
    strong(`${rate} per 1000`),
    plain(" "),
    interval(`(${from} to ${to})`),
  ];
}

function ratioParts({ robust, reason }: Contrast, against: string): Part[] {
  if (!robust) return [plain(` No ratio can be made: ${reason}.`)];
  if (robust.estimate === Infinity)
    return [plain(` The ratio has no upper limit and could be as low as ${formatRatio(robust.lower)}.`)];
  return [
    plain(" Within session kind that is "),
    strong(`${formatRatio(robust.estimate)} times`),
    plain(` ${against} `),
    interval(ratioLimits(robust)),
    plain(`; ${readRatio(robust)}.`),
  ];
}

/** The two groups with their rates, and the ratio within session kind. */
export function contrastSentence(contrast: Contrast, words: ContrastWords): Part[] {
  const { a, b } = contrast;
  const rateOf = ({ events, exposure }: Counted) => (exposure > 0 ? (1000 * events) / exposure : 0);
  const decimals = decimalsFor([rateOf(a), rateOf(b)]);
  const verb = words.a.startsWith("Athletes") ? "had" : a.events === 1 ? "there was" : "there were";
  const isThin = Math.min(a.events, b.events) < stableFrom;
  return [
    plain(`${words.a} ${verb} `),
    ...ratePart(a, decimals),
    plain(`; ${words.b} `),
    ...ratePart(b, decimals),
    plain("."),
    ...ratioParts(contrast, words.against),
    ...(isThin ? [plain(" "), attention("This is thin evidence.")] : []),
  ];
}

/** Sensitivity: what the ratio becomes when every injury is placed by its session's record, as its exposure is. */
export function recordSentence(differing: number, byRecord: Contrast | null): Part[] {
  if (!byRecord) return [];
  const many = differing === 1 ? "One injury's own record says" : `${differing} injuries' own records say`;
  const lead = plain(
    `${many} something else of the athlete's warm-up than the session's record. The injury's own answer counts above, while exposure follows the session's record. `,
  );
  const { robust } = byRecord;
  if (!robust) return [lead, plain("With every injury placed by the session's record no ratio can be made.")];
  if (robust.estimate === Infinity)
    return [lead, plain("With every injury placed by the session's record there is none to compare with.")];
  return [
    lead,
    plain("With every injury placed by the session's record it would be "),
    strong(`${formatRatio(robust.estimate)} times`),
    plain(" "),
    interval(ratioLimits(robust)),
    plain(": the less the two agree, the less either can be leaned on."),
  ];
}

/** How far the interval can be trusted, given how few teams there are. */
export function clusterNote({ robust }: Contrast): string {
  if (!robust) return "";
  const optimistic = "With fewer than 40 teams even that is optimistic.";
  if (robust.varianceInflation === null)
    return "Too few injuries or teams to account for teams: the interval takes athletes as independent and is too narrow.";
  const base =
    robust.varianceInflation < 1
      ? `The ${robust.clusters} teams differed no more than chance would have it, so the interval is the one for independent athletes, the wider.`
      : `The interval accounts for the ${robust.clusters} teams as clusters.`;
  if (!robust.fewClusters) return base;
  const { smallSample } = robust;
  const corrected = smallSample
    ? `Corrected for few teams it is ${ratioLimits(smallSample).slice(1, -1)}.`
    : "A correction for so few teams cannot be made.";
  return `${base} ${optimistic} ${corrected}`;
}

const reduction = (ratio: number) => `${Math.floor((1 - ratio) * 100)} %`;

/** What this exposure could have shown, in words. */
export function smallestSentence(smallest: Smallest | null, { a, b }: Contrast, names: [string, string]) {
  if (!smallest)
    return [
      plain("Without an injury of this kind, or without exposure on one side, nothing can be said of it."),
    ];
  const { ratio, rate, designEffect } = smallest;
  const with_ = `With ${exposures(a.exposure)} ${names[0]}, ${formatCount(b.exposure)} ${names[1]} and ${formatRate(rate.estimate, decimalsFor([rate.estimate]))} injuries per 1000 of both together`;
  const teams =
    designEffect > 1
      ? `The variance was taken ${formatRatio(designEffect)} times as wide, as it was for teams.`
      : "No widening for teams could be seen or made here; with one, the effect would have to be larger still.";
  if (ratio === null)
    return [
      plain(`${with_}, `),
      strong("no reduction, however large"),
      plain(`, would have been likely to show. ${teams}`),
    ];
  return [
    plain(`${with_}, an effect would have been shown ${power * 5} times in 5 only if the rate were `),
    strong(`${formatRatio(ratio)} times as high or less`),
    plain(`, a reduction of ${reduction(ratio)} or more. ${teams}`),
  ];
}

const shareLimits = ({ lower, upper }: SkipShare["share"]) =>
  interval(`(${Math.round(lower * 100)} to ${Math.round(upper * 100)})`);

const skipWords = ({ name, skipped, recorded, share }: SkipShare): Part[] => [
  strong(name),
  plain(
    ` skipped ${formatCount(skipped)} of ${formatCount(recorded)} recorded warm-ups, ${whole(share.estimate)} `,
  ),
  shareLimits(share),
];

/** Which team skips its warm-up, against the others; and that a session without a record is none skipped. */
export function skipSentence({ teams, standingOut, others }: Skipping): Part[] {
  const [first] = teams;
  if (!first) return [plain("No team has five sessions with a warm-up record since its programme began.")];
  const named = standingOut.length > 0 ? standingOut.slice(0, 3) : [first];
  const list = named.flatMap((team, index) => [
    ...(index === 0 ? [] : [plain(index === named.length - 1 ? " and " : ", ")]),
    ...skipWords(team),
  ]);
  const rest = others
    ? [plain(`; the other teams ${whole(others.share.estimate)} `), shareLimits(others.share)]
    : [];
  if (first.skipped === 0) return [plain("No team has a recorded warm-up that was skipped.")];
  if (standingOut.length > 3) {
    return [...list, plain(`, and ${standingOut.length - 3} more stand out`), ...rest, plain(".")];
  }
  if (standingOut.length > 0) return [...list, ...rest, plain(".")];
  const only = teams.length === 1 ? "." : `. No team clearly skips more than the others.`;
  return [...list, ...rest, plain(only)];
}

/** Sessions that nobody recorded are no skipped ones. */
export function unrecordedNote(least: ReturnType<typeof leastRecorded>, notRecorded: number, held: number) {
  if (held === 0) return "";
  if (notRecorded === 0) return "Every held session has a warm-up record.";
  const most = least ? `, most of all by ${least.name} (${least.notRecorded} of ${least.sessions})` : "";
  return `In ${formatCount(notRecorded)} of ${formatCount(held)} held sessions nobody recorded whether there was a warm-up${most}. Not recorded is not the same as skipped, and is in neither count.`;
}

/** Injuries and exposure that the comparison leaves out, each with its reason. */
export function leftOutLines(
  unplaced: Unplaced,
  { beforeStart, noProgramme }: { beforeStart: number; noProgramme: number },
  withoutExposure: number,
): string[] {
  const some = (events: number, rest: string) => (events > 0 ? [`${injuries(events)} ${rest}`] : []);
  const aes = (amount: number, rest: string) => (amount > 0 ? [`${exposures(amount)} ${rest}`] : []);
  return [
    ...aes(beforeStart, "of teams before the day their programme began"),
    ...aes(noProgramme, "of teams that follow no programme"),
    ...some(unplaced.outside, "of teams before that day or without a programme"),
    ...some(unplaced.noSession, "tied to no training or match, so to no warm-up"),
    ...some(
      unplaced.noParticipations,
      "from sessions whose participations are not recorded, so that nobody knows who was warmed up",
    ),
    ...some(withoutExposure, "of teams without any exposure of that group and session kind: in no ratio"),
  ];
}
