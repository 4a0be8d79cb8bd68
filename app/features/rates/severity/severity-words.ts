import type { SeverityBand } from "~/statistics";
import { stableFrom } from "../coverage";
import { decimalsFor, formatCount, formatRate } from "../figures";
import { countedInWords, peopleInWords } from "../filter-words";
import type { RatesFilters } from "../filters";
import { dayWords } from "../periods";
import { type Part, sessionsNote } from "../sentence";
import { attention, chanceWords, interval, plain, strong } from "../wording";
import type { ReturnComparison, ReturnCurve, Severity, SeverityRow } from "./severity";

/** The words of severity and burden: the sentence of the page, its note, and what its pictures say. Pure. */

export const bandWords: Record<SeverityBand, string> = {
  "0": "no day",
  "1-7": "1 to 7 days",
  "8-28": "8 to 28 days",
  ">28": "more than 28 days",
};

const several = (count: number, one: string, many: string) =>
  `${formatCount(count)} ${count === 1 ? one : many}`;
export const injuriesOf = (count: number) => several(count, "injury", "injuries");
const daysOf = (count: number) => several(count, "day", "days");

/** "(7 to 12)"; "(7, no upper limit)" where the curve of the upper limits does not come down to one half. */
function medianLimits({ lower, upper }: ReturnCurve["median"]) {
  if (lower === null) return "";
  return upper === null ? `(${lower}, no upper limit)` : `(${lower} to ${upper})`;
}

/** How soon half are back, as the end of a sentence about `who`. */
function medianParts(who: string, { median }: ReturnCurve): Part[] {
  if (median.estimate === null) return [plain(`fewer than half of ${who} are back so far`)];
  if (median.estimate === 0) return [plain(`half of ${who} or more cost no day at all`)];
  return [
    plain(`half of ${who} were back within `),
    strong(daysOf(median.estimate)),
    plain(" "),
    interval(medianLimits(median)),
  ];
}

function burdenParts({ burden, daysLost, injuries }: SeverityRow): Part[] {
  if (!burden) return [];
  const decimals = decimalsFor([burden.estimate]);
  const [lower, upper] = [burden.lower, burden.upper].map((limit) => formatRate(limit ?? 0, decimals));
  return [
    plain(injuries === 0 || daysLost === 0 ? "" : ": "),
    strong(`${formatRate(burden.estimate, decimals)} days per 1000 hours`),
    plain(" "),
    interval(`(${lower} to ${upper})`),
  ];
}

/** A single injury that makes up more than half of the days has to be said, wherever there are others beside it. */
const isDominated = ({ largestShare, injuries }: SeverityRow) => largestShare > 0.5 && (injuries ?? 0) > 1;

/** Of a few injuries one is often more than half of the days; those groups are marked unstable as it is. */
const isDominatedGroup = (row: SeverityRow) => isDominated(row) && !row.unstable;

/** What a team that is silent may mean. */
export const unreportedWords =
  "no injury is entered and no week confirmed as without one, which is not the same as none";

const whyNoBurden = (isWithheld: boolean) =>
  isWithheld ? "too little of the exposure is recorded" : "there is no exposure in hours";

const shareWords = (share: number) => `${Math.round(share * 100)} %`;

/**
 * The sentence: what injuries cost, and how soon half of the injured were back.
 * @param scope who is looked at, as the sentence begins: "The club", "Girls U15 Soccer"
 */
export function severitySentence(
  { total, coverage, unreported }: Severity,
  filters: RatesFilters,
  scope: string,
): Part[] {
  const injuries = total.injuries ?? 0;
  const who = peopleInWords(filters);
  const subject = who ? `${scope}, ${who},` : scope;
  const counted = countedInWords(injuries, filters);
  if (coverage.state === "none")
    return [plain(`${scope} has no session in this season that was held, so there is no burden yet.`)];
  if (injuries === 0 && unreported) return [plain(`${subject} has not reported: ${unreportedWords}.`)];
  if (injuries === 0 && (total.denominator ?? 0) <= 0)
    return [plain(`${subject} had ${counted} and no exposure in hours, so there is no burden yet.`)];
  if (injuries === 0)
    return [
      plain(`${subject} had `),
      strong(counted),
      plain(` in ${several(Math.round(total.denominator ?? 0), "hour", "hours")}, so no days were lost.`),
    ];
  if (total.daysLost === 0)
    return [plain(`${subject} had `), strong(counted), plain(", and none of them cost a day.")];
  const lost = [
    plain(`${subject} lost `),
    strong(daysOf(total.daysLost)),
    plain(" to "),
    strong(counted),
    plain(filters.by === "season" ? " over all seasons" : ""),
  ];
  const half = total.curve && injuries > 1 ? [plain("; "), ...medianParts("those injured", total.curve)] : [];
  return [
    ...lost,
    ...burdenParts(total),
    ...half,
    plain("."),
    ...(total.burden
      ? []
      : [plain(` Per 1000 hours nothing can be said: ${whyNoBurden(coverage.state === "withheld")}.`)]),
    ...(isDominated(total)
      ? [plain(" "), attention(`One injury makes up ${shareWords(total.largestShare)} of the days.`)]
      : []),
    ...(total.unstable ? [plain(" "), attention("This is thin evidence.")] : []),
  ];
}

const definitionNote: Record<RatesFilters["injuries"], string> = {
  "time-loss": "Time loss of a day or more",
  "medical-attention": "Every injury that needed attention, also those that cost no day",
};

/** The smaller line: to which day, what is still open, which groups hang on one injury. */
export function severityNote({ total, rows }: Severity, filters: RatesFilters, asOf: string): Part[] {
  const dominated = rows.filter(isDominatedGroup).map(({ label }) => label);
  const unstable = rows.filter((row) => row.unstable).length;
  const open =
    total.ongoing === 0
      ? "None is ongoing. "
      : `${total.ongoing === 1 ? "One is" : `${formatCount(total.ongoing)} are`} ongoing and counted for as long as ${
          total.ongoing === 1 ? "it has" : "they have"
        } lasted, never as finished. `;
  return [
    plain(`Days are counted to ${dayWords(asOf, true)}. `),
    ...((total.injuries ?? 0) > 0 ? [plain(open)] : []),
    ...(dominated.length > 0
      ? [
          attention(
            `${dominated.length === 1 ? "In one group" : `In each of ${dominated.length} groups`} a single injury makes up more than half of the days`,
          ),
          plain(`, and the burden rests on it: ${dominated.join("; ")}. `),
        ]
      : []),
    ...(unstable > 0
      ? [
          plain(
            `${several(unstable, "group is", "groups are")} unstable: fewer than ${stableFrom} injuries. `,
          ),
        ]
      : []),
    plain(`${definitionNote[filters.injuries]}, ${sessionsNote[filters.sessions]}.`),
  ];
}

/** What the test of two curves says, as how often chance alone would part them so far. */
function testWords(pValue: number) {
  if (pValue < 0.001) return "with a probability below 0.001";
  return `with a probability of ${chanceWords(pValue)}`;
}

/** What the curves by group show, and how much of it chance could do. */
export function returnWords({ groups, pValue }: ReturnComparison): Part[] {
  const each = groups.flatMap(({ group, curve, injuries }, index) => [
    plain(`${index === 0 ? "" : ". "}${group.label}, ${injuriesOf(injuries)}: `),
    ...medianParts("them", curve),
  ]);
  const test =
    groups.length > 2
      ? " Three curves are shown without a test; narrow the view to two of them to have it."
      : pValue === null
        ? " No time tells the two apart."
        : ` If both returned alike, curves at least this far apart would come about ${testWords(pValue)} (log-rank test). It takes every injury as one of its own; those of one athlete or team resemble each other, so the evidence is somewhat weaker than that.`;
  return [...each, plain("."), plain(test)];
}
