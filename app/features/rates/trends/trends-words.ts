import { percent } from "../coverage";
import { decimalsFor, formatCount, formatRate, formatRatio } from "../figures";
import { countedInWords } from "../filter-words";
import type { RatesFilters } from "../filters";
import type { Part } from "../sentence";
import { attention, chanceWords, interval, plain, ratioLimits, strong } from "../wording";
import type { KindTrend, MonthRow, NoTrend, Trend } from "./trends";
import type { SeasonRow, SoFarRow } from "./trends-seasons";

/** What the trends say in words. */

const readChange = ({ lower, upper }: { lower: number; upper: number }) => {
  if (lower <= 1 && upper >= 1) return "the interval includes no change";
  return lower > 1 ? "the whole interval lies above no change" : "the whole interval lies below no change";
};

/** Two decimals tell a trend's ratio from 1 better than two figures do. */
const factor = (value: number) => (value >= 10 ? formatRatio(value) : value.toFixed(2));
const factorLimits = ({ lower, upper }: { lower: number; upper: number }) =>
  `(${factor(lower)} to ${factor(upper)})`;

/** "rose by 15 % a year", "more than doubled each year": for a trend whose whole interval lies off no change. */
export function changeWords(ratio: number, period: string): string {
  if (ratio >= 2) return `rose ${formatRatio(ratio)}-fold each ${period}`;
  const share = Math.round(Math.abs(ratio - 1) * 100);
  if (share === 0) return "hardly moved";
  return `${ratio > 1 ? "rose" : "fell"} by ${share} % a ${period}`;
}

const isClear = ({ lower, upper }: { lower: number; upper: number }) => lower > 1 || upper < 1;

export function trendSentence(trend: Trend | NoTrend, kinds: KindTrend | null, scope: string): Part[] {
  if ("reason" in trend) return [plain(`${scope} has no trend yet: ${trend.reason}.`)];
  const { perYear, months, first, last } = trend;
  const start = plain(
    `Over ${months} finished months with exposure, ${first} to ${last}, ${isClear(perYear) ? "the rate " : "the rate shows "}`,
  );
  return [
    start,
    strong(isClear(perYear) ? changeWords(perYear.estimate, "year") : "no clear trend"),
    plain(": "),
    strong(`${factor(perYear.estimate)} times a year`),
    plain(" "),
    interval(factorLimits(perYear)),
    plain(`; ${readChange(perYear)}.`),
    ...(kinds
      ? [
          plain(" With the share of matches held equal it is "),
          strong(factor(kinds.perYear.estimate)),
          plain(" "),
          interval(factorLimits(kinds.perYear)),
          plain(
            readChange(kinds.perYear) === readChange(perYear) ? "." : `; there ${readChange(kinds.perYear)}.`,
          ),
        ]
      : []),
  ];
}

function matchesWords(seasons: readonly SeasonRow[]): string {
  const known = seasons.filter(({ matchShare }) => matchShare !== null);
  const [first, last] = [known[0], known.at(-1)];
  if (!first || !last || first === last) return "";
  return ` Matches made up ${percent(first.matchShare ?? 0)} of the exposure in ${first.season.name} and ${percent(last.matchShare ?? 0)} in ${last.season.name}.`;
}

/** The smaller lines: per month, widening, what a trend of months cannot tell. */
export function trendNote(
  trend: Trend | NoTrend,
  kinds: KindTrend | null,
  seasons: readonly SeasonRow[],
  months: readonly MonthRow[],
): Part[] {
  const unfinished = months.filter((month) => month.unfinished && month.row);
  const without = unfinished.map(({ label }) => `${label} is not finished and not in the trend.`).join(" ");
  if ("reason" in trend) return without ? [plain(without)] : [];
  const { perMonth, months: used } = trend;
  const spread =
    perMonth.dispersion > 1
      ? `The months scatter more than chance alone would make them (dispersion ${perMonth.dispersion.toFixed(1)}), and the interval is widened for that.`
      : `The months scatter no more than chance would make them (dispersion ${perMonth.dispersion.toFixed(1)}), so the interval is not widened.`;
  const season =
    used < 24 ? " With fewer than two years of months a trend cannot be told from the time of the year." : "";
  const left =
    kinds && kinds.withoutKind > 0
      ? ` ${countedInWords(kinds.withoutKind, anyNarrowing)} tied to no session ${kinds.withoutKind === 1 ? "is" : "are"} not in the figure with matches held equal.`
      : "";
  return [
    plain(
      `Per month the ratio is ${perMonth.estimate.toFixed(3)} (${perMonth.lower.toFixed(3)} to ${perMonth.upper.toFixed(3)}), p ${chanceWords(perMonth.pValue)}. ${spread}`,
    ),
    ...(season ? [attention(season)] : []),
    plain(`${matchesWords(seasons)}${left} ${without}`.trimEnd()),
  ];
}

const anyNarrowing: Parameters<typeof countedInWords>[1] = {
  ...{ sex: "any", sport: "any", age: "any", area: "any", side: "any" },
  ...{ contact: "any", onset: "gradual", occurrence: "all" },
};

const exposureWords = { aes: ["exposure", "exposures"], hours: ["hour", "hours"] } as const;

/** The season so far against the same days of the season before it, in words. */
export function soFarSentence(rows: readonly SoFarRow[], filters: RatesFilters): Part[] {
  const [own, before] = rows;
  if (!own) return [];
  const { row } = own;
  const decimals = decimalsFor(rows.flatMap((each) => each.row.rate?.estimate ?? []));
  const counts = `${countedInWords(row.injuries ?? 0, filters)} in ${formatCount(row.denominator ?? 0)} ${exposureWords[filters.per][Math.round(row.denominator ?? 0) === 1 ? 0 : 1]}`;
  const start = [plain(`In its first ${own.days} days season ${own.season.name} had `), strong(counts)];
  if (!row.rate) return [...start, plain(`: ${row.reason}.`)];
  const [rate, lower, upper] = [row.rate.estimate, row.rate.lower, row.rate.upper].map((value) =>
    formatRate(value, decimals),
  );
  const own0 = [
    ...start,
    plain(", "),
    strong(`${rate} per 1000`),
    plain(" "),
    interval(`(${lower} to ${upper})`),
  ];
  if (!before) return [...own0, plain(". There is no earlier season to hold it against.")];
  const ratio = before.robust ?? before.ratio;
  if (!ratio || ratio.estimate === Infinity || !before.row.rate)
    return [
      ...own0,
      plain(`. Season ${before.season.name} gives no rate for the same days to compare with.`),
    ];
  const teams = before.robust ? ", allowing for athletes of one team sharing their risks" : "";
  return [
    ...own0,
    plain(`. Against the same days of ${before.season.name}, with `),
    strong(`${formatCount(before.row.injuries ?? 0)} in ${formatCount(before.row.denominator ?? 0)}`),
    plain(", that is "),
    strong(`${formatRatio(ratio.estimate)} times`),
    plain(" "),
    interval(ratioLimits(ratio)),
    plain(`${teams}; ${readChange(ratio).replace("no change", "no difference")}.`),
  ];
}
