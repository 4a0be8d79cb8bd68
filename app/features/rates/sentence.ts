import { stableFrom } from "./coverage";
import { decimalsFor, formatCount, formatRate, formatRatio } from "./figures";
import { countedInWords, peopleInWords } from "./filter-words";
import { defaultFilters, type RatesFilters, type RateUnit } from "./filters";
import type { Comparison, RateRow, Rates } from "./rates";
import type { ReportedWeeks } from "./silence";

/** The sentence that answers the page's question, in parts that the page sets in type and a test can read. */
export type Part = { text: string; as: "plain" | "strong" | "interval" | "attention" };

const plain = (text: string): Part => ({ text, as: "plain" });
const strong = (text: string): Part => ({ text, as: "strong" });
const interval = (text: string): Part => ({ text, as: "interval" });
const attention = (text: string): Part => ({ text, as: "attention" });

export const textOf = (parts: readonly Part[]) => parts.map(({ text }) => text).join("");

/** "exposures" in the sentence, as one says it; the table's heads name the unit in full. */
const exposureWords: Record<RateUnit, [one: string, many: string]> = {
  aes: ["exposure", "exposures"],
  hours: ["hour", "hours"],
};
export const unitWords: Record<RateUnit, string> = {
  aes: "1000 athlete-exposures",
  hours: "1000 hours",
};

const several = (count: number, one: string, many: string) =>
  `${formatCount(count)} ${Math.round(count) === 1 ? one : many}`;

/** "girls" belongs to somebody: "the girls' rate"; "women": "the women's rate"; matches: "the rate of matches". */
function ownerOf({ label, sex }: RateRow) {
  const words = label.toLowerCase();
  if (sex === null || words.includes(" and ")) return { before: "the rate of ", after: words };
  return { before: "the ", after: `${words}${words.endsWith("s") ? "'" : "'s"} rate` };
}

function ratePart(row: RateRow, decimals: number): Part[] {
  if (!row.rate) return [];
  const [estimate, lower, upper] = [row.rate.estimate, row.rate.lower, row.rate.upper].map((value) =>
    formatRate(value, decimals),
  );
  return [strong(`${estimate} per 1000`), plain(" "), interval(`(${lower} to ${upper})`)];
}

function clause(subject: string, row: RateRow, filters: RatesFilters, decimals: number): Part[] {
  const [one, many] = exposureWords[filters.per];
  const counts = `${countedInWords(row.injuries ?? 0, filters)} in ${several(row.denominator ?? 0, one, many)}`;
  return [plain(`${subject} had `), strong(counts), plain(", "), ...ratePart(row, decimals)];
}

type Interval = { lower: number; upper: number };

/** Both intervals together: a difference has to stand in each of them. */
const wider = (ratio: Interval, robust: Interval | null): Interval =>
  robust ? { lower: Math.min(ratio.lower, robust.lower), upper: Math.max(ratio.upper, robust.upper) } : ratio;

/** What the interval of a ratio says about no difference. */
export function readRatio({ lower, upper }: Interval) {
  if (lower <= 1 && upper >= 1) return "the interval includes no difference";
  return lower > 1
    ? "the whole interval lies above no difference"
    : "the whole interval lies below no difference";
}

/** What both intervals say; where they differ, which of them says it. */
function readBoth(ratio: Interval, robust: Interval | null) {
  const words = readRatio(wider(ratio, robust));
  const agree = !robust || readRatio(ratio) === readRatio(robust);
  return agree ? words : words.replace("the interval", "the wider interval");
}

/** The interval of a ratio, and beside it the one that allows for teams. */
function ratioInterval(ratio: Interval, robust: Interval | null) {
  const limits = ({ lower, upper }: Interval) => `${formatRatio(lower)} to ${formatRatio(upper)}`;
  if (!robust) return interval(`(${limits(ratio)})`);
  if (limits(ratio) === limits(robust)) return interval(`(${limits(ratio)}, allowing for teams as well)`);
  return interval(`(${limits(ratio)}; allowing for teams ${limits(robust)})`);
}

function comparisonParts(
  { first, second, ratio, robust }: Comparison,
  filters: RatesFilters,
  decimals: number,
): Part[] {
  const who = peopleInWords({ ...filters, sex: "any" });
  const parts = clause(who ? `${first.label} ${who}` : first.label, first, filters, decimals);
  if (!ratio) return [...parts, plain(`. ${second.label} had none either.`)];
  if (ratio.estimate === Infinity) {
    return [
      ...parts,
      plain(". "),
      ...clause(second.label, second, filters, decimals),
      plain(`; the ratio has no upper limit and could be as low as ${formatRatio(ratio.lower)}.`),
    ];
  }
  const { before, after } = ownerOf(second);
  return [
    ...parts,
    plain(". That is "),
    strong(`${formatRatio(ratio.estimate)} times`),
    plain(` ${before}${after} `),
    ratioInterval(ratio, robust),
    plain(`; ${readBoth(ratio, robust)}.`),
  ];
}

/** Whether a comparison stands on too few injuries to lean on. */
const isThin = ({ first, second }: Comparison) => first.unstable || second.unstable;

/**
 * The sentence: the two groups compared where there are two, else the whole.
 * @param scope who is looked at, as the sentence begins: "The club", "Girls U15 Soccer"
 */
export function writeSentence(rates: Rates, filters: RatesFilters, scope: string): Part[] {
  const { total, comparison, coverage } = rates;
  const who = peopleInWords(filters);
  const subject = who ? `${scope}, ${who},` : scope;
  const counted = countedInWords(total.injuries ?? 0, filters);
  const shown = [total, ...rates.rows].flatMap(({ rate }) => rate?.estimate ?? []);
  const decimals = decimalsFor(shown);
  if (coverage.state === "none")
    return [plain(`${scope} has no session in this season that was held, so there is no rate yet.`)];
  if (coverage.state === "withheld")
    return [
      plain(`${subject} had `),
      strong(counted),
      plain(", but too little of the exposure is recorded to show a rate that could be trusted."),
    ];
  if (!total.rate) return [plain(`${subject} had ${counted} and no exposure of this unit.`)];
  if (comparison) {
    const thin = isThin(comparison) ? [plain(" "), attention("This is thin evidence.")] : [];
    return [...comparisonParts(comparison, filters, decimals), ...thin];
  }
  const thin = total.unstable ? [plain(" "), attention("This is thin evidence.")] : [];
  return [...clause(subject, total, filters, decimals), plain("."), ...thin];
}

/** The season so far, for a page that shows no more of the rates. */
export function writeSoFar(row: RateRow, season: string): Part[] {
  const counted = `${countedInWords(row.injuries ?? 0, defaultFilters)} with time loss in ${several(row.denominator ?? 0, "athlete-exposure", "athlete-exposures")}`;
  if (!row.rate) return [plain(`Season ${season} so far: ${counted}; ${row.reason}.`)];
  const decimals = decimalsFor([row.rate.estimate]);
  const thin = row.unstable ? [plain(" "), attention("This is thin evidence.")] : [];
  return [
    plain(`Season ${season} so far: `),
    strong(counted),
    plain(", "),
    ...ratePart(row, decimals),
    plain("."),
    ...thin,
  ];
}

const definitionNote: Record<RatesFilters["injuries"], string> = {
  "time-loss": "Time loss of a day or more",
  "medical-attention": "Every injury that needed attention, with time loss or without",
};
export const sessionsNote: Record<RatesFilters["sessions"], string> = {
  "training-and-matches": "training and matches",
  training: "training only",
  match: "matches only",
};

const countWords = ["No", "One", "Two", "Three", "Four", "Five", "Six", "Seven", "Eight", "Nine", "Ten"];

/** The smaller line under the sentence: coverage, what is unstable, the definition. */
export function writeNote(rates: Rates, filters: RatesFilters, weeks?: ReportedWeeks): Part[] {
  const { coverage, rows } = rates;
  const share = coverage.share === null ? null : `${Math.floor(coverage.share * 100)} %`;
  const unstable = rows.filter(({ unstable: few }) => few).length;
  const words = countWords[unstable] ?? String(unstable);
  return [
    ...(share ? [plain(`${share} of held sessions have recorded exposure. `)] : []),
    ...(weeks && weeks.all > 0
      ? [
          plain(
            `In ${formatCount(weeks.reported)} of ${formatCount(weeks.all)} team-weeks an injury was entered or it was confirmed that there was none. `,
          ),
        ]
      : []),
    ...(unstable > 0
      ? [
          attention(unstable === 1 ? "One group is unstable" : `${words} groups are unstable`),
          plain(`: fewer than ${stableFrom} injuries. `),
        ]
      : []),
    plain(`${definitionNote[filters.injuries]}, ${sessionsNote[filters.sessions]}.`),
    ...(filters.by === "team" && rows.length > 5
      ? [plain(` Among ${rows.length} teams one or two stand out by luck alone.`)]
      : []),
  ];
}
