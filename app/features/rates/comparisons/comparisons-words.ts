import { decimalsFor, formatCount, formatRate, formatRatio } from "../figures";
import { countedInWords } from "../filter-words";
import type { RatesFilters, RateUnit } from "../filters";
import type { RateRow } from "../rates";
import { type Part, readRatio, unitWords } from "../sentence";
import { attention, chanceWords, interval, listWords, plain, ratioLimits, strong } from "../wording";
import type { Pair, Robust } from "./comparisons";
import type { Dimension, Held } from "./comparisons-strata";

/** What a comparison says in words. */

export const dimensionWords: Record<Dimension, string> = {
  sex: "sex",
  sport: "sport",
  age: "age band",
  team: "team",
  kind: "session kind",
  season: "season",
};

const capital = (words: string) => words.charAt(0).toUpperCase() + words.slice(1);

/** A group as it stands in a sentence: "girls and women", "athletes aged 13 to 14", "season 2025/26". */
export function groupWords({ key, label }: Pick<RateRow, "key" | "label">, dimension: Dimension): string {
  if (dimension === "team") return label;
  if (dimension === "season") return `season ${label}`;
  const words = label.charAt(0).toLowerCase() + label.slice(1);
  if (dimension !== "age") return words;
  return key === "unknown" ? "athletes of unknown age" : `athletes aged ${words}`;
}

const exposureWords: Record<RateUnit, [one: string, many: string]> = {
  aes: ["exposure", "exposures"],
  hours: ["hour", "hours"],
};

const several = (amount: number, unit: RateUnit) =>
  `${formatCount(amount)} ${exposureWords[unit][Math.round(amount) === 1 ? 0 : 1]}`;

/** Counts, rate and interval of one side; the second is said without naming the injuries again. */
function sideParts(row: RateRow, subject: string, counts: string, decimals: number): Part[] {
  if (!row.rate) return [plain(`${subject} had `), strong(counts)];
  const [estimate, lower, upper] = [row.rate.estimate, row.rate.lower, row.rate.upper].map((value) =>
    formatRate(value, decimals),
  );
  return [
    plain(`${subject} had `),
    strong(counts),
    plain(", "),
    strong(`${estimate} per 1000`),
    plain(" "),
    interval(`(${lower} to ${upper})`),
  ];
}

const arePeople = (dimension: Dimension) => dimension === "sex" || dimension === "age";

/** "Girls and women were injured 1.6 times as often (1.1 to 2.4)". */
function ratioParts({ first, second, ratio, dimension }: Pair): Part[] {
  const [a, b] = [groupWords(first, dimension), groupWords(second, dimension)];
  if (!ratio) return [plain(" So there is nothing to compare yet.")];
  if (ratio.estimate === Infinity)
    return [plain(` The ratio has no upper limit and could be as low as ${formatRatio(ratio.lower)}.`)];
  const times = strong(`${formatRatio(ratio.estimate)} times`);
  const start = arePeople(dimension)
    ? [plain(` ${capital(a)} were injured `), times, plain(` as often as ${b} `)]
    : [plain(` The rate of ${a} is `), times, plain(` that of ${b} `)];
  return [...start, interval(ratioLimits(ratio)), plain(".")];
}

const heldNames: Record<Held, string> = { age: "the same ages", kind: "the same share of matches" };

function adjustedParts({ adjusted, held: names }: Pair): Part[] {
  const held = names.map((name) => heldNames[name]).join(" and ");
  if (!adjusted || !held) return [];
  const { ratio } = adjusted;
  if (ratio.estimate === Infinity) return [plain(` Held against ${held} it has no upper limit either.`)];
  return [
    plain(` Held against ${held} it is `),
    strong(`${formatRatio(ratio.estimate)}`),
    plain(" "),
    interval(ratioLimits(ratio)),
    plain("."),
  ];
}

/** "it includes no difference", after the interval was named. */
const readIt = (limits: { lower: number; upper: number }) =>
  readRatio(limits).replace("the whole interval lies", "all of it lies").replace("the interval", "it");

/** What allowing for teams does to the interval, and what the interval then says. */
function teamParts({ ratio, robust, adjusted }: Pair): Part[] {
  if (!ratio) return [];
  const shown = adjusted?.robust.ratio ?? robust.ratio;
  if (!shown) return [plain(` Here ${readRatio(ratio)}.`)];
  const before = adjusted?.robust.ratio ? adjusted.ratio : ratio;
  // Limits on the log scale can come out narrower than mid-P ones; teams never make anything more certain.
  if (shown.lower >= before.lower && shown.upper <= before.upper)
    return [
      plain(
        ` Athletes of one team share their risks; allowing for that does not widen the interval here, and ${readIt(before)}.`,
      ),
    ];
  return [
    plain(
      ` Athletes of one team share their risks: allowing for that, ${adjusted?.robust.ratio ? "the last interval" : "the interval"} is `,
    ),
    strong(ratioLimits(shown).slice(1, -1)),
    plain(`, and ${readIt(shown)}.`),
  ];
}

/** The answer to the page's question. */
export function pairSentence(pair: Pair, filters: RatesFilters): Part[] {
  const { first, second, dimension } = pair;
  const decimals = decimalsFor([first, second].flatMap(({ rate }) => rate?.estimate ?? []));
  const thin = pair.ratio && (first.unstable || second.unstable);
  const own = `${countedInWords(first.injuries ?? 0, filters)} in ${several(first.denominator ?? 0, filters.per)}`;
  const others = `${second.injuries ? formatCount(second.injuries) : "none"} in ${formatCount(second.denominator ?? 0)}`;
  return [
    ...sideParts(first, capital(groupWords(first, dimension)), own, decimals),
    plain("; "),
    ...sideParts(second, groupWords(second, dimension), others, decimals),
    plain("."),
    ...ratioParts(pair),
    ...adjustedParts(pair),
    ...teamParts(pair),
    ...(thin ? [plain(" "), attention("This is thin evidence: a side has fewer than 5 injuries.")] : []),
  ];
}

/** Whether the ratio is the same everywhere, as far as that can be told. */
export function heterogeneityWords({ adjusted, held }: Pair): string {
  if (!adjusted) return "";
  const places = held.map((name) => (name === "age" ? "ages" : "session kinds")).join(" and ");
  const { df, pValue } = adjusted.ratio.heterogeneity;
  if (df === 0)
    return `Too few ${places} have injuries on both sides to tell whether the ratio is the same in all of them.`;
  const p = pValue < 0.001 ? "below 0.001" : `${chanceWords(pValue)}`;
  return pValue < 0.05
    ? `The ratio differs between ${places} by more than luck would often make (heterogeneity, p ${p}): one figure hides that, so read it by stratum in the table.`
    : `Nothing shows that the ratio differs between ${places} (heterogeneity, p ${p}), though only large differences would show with these numbers.`;
}

const sumWords = ({ events, exposure }: { events: number; exposure: number }, unit: RateUnit) => {
  const parts = [
    ...(events > 0 ? [`${formatCount(events)} ${events === 1 ? "injury" : "injuries"}`] : []),
    ...(exposure > 0 ? [`${several(exposure, unit)}`] : []),
  ];
  return parts.join(" and ");
};

/** What the adjusted figures leave out because it stands on one side only, or cannot be placed. */
export function setAsideWords({ setAside, adjusted }: Pair, unit: RateUnit): string {
  if (!adjusted) return "";
  const why = {
    oneSide: "at an age or in a kind of session that only one side has",
    noKind: "of gradual onset tied to no session",
    noAge: "of athletes whose age is not known",
    noExposure: "where neither side has exposure",
  } as const;
  const parts = (Object.keys(why) as (keyof typeof why)[]).flatMap((name) => {
    const words = sumWords(setAside[name], unit);
    return words ? [`${words} ${why[name]}`] : [];
  });
  return parts.length === 0 ? "" : `The adjusted figures leave out ${listWords(parts)}.`;
}

/** How far the interval that allows for teams can be trusted. */
export function teamsWords({ ratio, reason, dropped }: Robust): string {
  const out =
    dropped > 0
      ? ` ${dropped === 1 ? "One injury" : `${dropped} injuries`} of a team without exposure on that side cannot enter it.`
      : "";
  if (!ratio) return `No interval allows for teams: ${reason}.${out}`;
  if (!ratio.fewClusters) return `The interval rests on ${ratio.clusters} teams.${out}`;
  const small = ratio.smallSample;
  const corrected = small
    ? ` Corrected for so few teams it is ${ratioLimits(small).slice(1, -1)}.`
    : " A correction for so few teams cannot be made.";
  return `With ${ratio.clusters} teams, fewer than 40, even the interval that allows for teams is optimistic.${corrected}${out}`;
}

/** What no adjustment mends. */
const notByLot =
  "This is not a randomised comparison: the two differ in other ways as well, and that may explain a difference or hide one.";

/** The smaller lines under the sentence. */
export function pairNote(pair: Pair, filters: RatesFilters): Part[] {
  const { difference, adjusted, notAdjusted, robust } = pair;
  const decimals = difference ? decimalsFor([Math.abs(difference.estimate), difference.upper]) : 1;
  const signed = (value: number) => formatRate(value, decimals).replace("-", "−");
  const texts = [
    difference && pair.ratio
      ? `The rates differ by ${signed(difference.estimate)} per ${unitWords[filters.per]} (${signed(difference.lower)} to ${signed(difference.upper)}).`
      : "",
    notAdjusted && pair.ratio ? `The ratio is not adjusted: ${notAdjusted}.` : "",
    heterogeneityWords(pair),
    setAsideWords(pair, filters.per),
    pair.ratio ? teamsWords(adjusted?.robust.ratio ? adjusted.robust : robust) : "",
    pair.ratio ? notByLot : "",
  ];
  return texts.filter(Boolean).map((text, index) => plain(index === 0 ? text : ` ${text}`));
}
