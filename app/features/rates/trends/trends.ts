import { group } from "d3-array";
import { addDays, addMonths } from "~/platform/clock";
import { coefficientRatio, type Estimate, poissonRegression, type RateTrend, rateTrend } from "~/statistics";
import { attempt } from "../attempt";
import type { ExposureCell } from "../counting";
import type { RateUnit } from "../filters";
import { monthsOf, monthWords } from "../periods";
import { type RateRow, tabulate } from "../rates";
import type { Counts, Selection } from "../selection";

/** Rates over the months of all seasons, and their trend. Pure. */

export type MonthRow = {
  /** "2026-09" */
  month: string;
  label: string;
  row: RateRow | null;
  /** The month that the last day looked at falls in, before its end. */
  unfinished: boolean;
};

export type Trend = {
  /** Rate ratio from one month to the next, and from one year to the next. */
  perMonth: RateTrend;
  perYear: Estimate;
  months: number;
  first: string;
  last: string;
};

export type KindTrend = { perMonth: Estimate; perYear: Estimate; withoutKind: number };

export type TrendMaterial = { counts: Counts; selection: Selection; unit: RateUnit };

const endOfMonth = (month: string) => addDays(addMonths(`${month}-01`, 1), -1);

/** Every month from the first to the last day; null where no session had exposure and nobody was injured. */
export function monthRows({ counts, selection, unit }: TrendMaterial): MonthRow[] {
  const rows = new Map(tabulate("month", counts, selection, unit).map((row) => [row.key, row]));
  const runsOn = counts.seasons.some(({ startsOn, endsOn }) => startsOn <= counts.to && counts.to < endsOn);
  return monthsOf(counts.from, counts.to).map((month) => ({
    month,
    label: monthWords(month),
    row: rows.get(month) ?? null,
    // The last day counted is today, which is not over either.
    unfinished: runsOn && counts.to <= endOfMonth(month),
  }));
}

/** Months that a trend can rest on: finished, with exposure, and not withheld. */
const usable = (months: readonly MonthRow[]) =>
  months.flatMap(({ month, label, row, unfinished }, period) =>
    row?.rate && !unfinished
      ? [{ month, label, period, events: row.injuries ?? 0, exposure: row.denominator ?? 0 }]
      : [],
  );

/** The same ratio over twelve months. */
const overYear = ({ estimate, lower, upper, level, method }: Estimate): Estimate => ({
  estimate: estimate ** 12,
  lower: lower ** 12,
  upper: upper ** 12,
  level,
  method,
});

/** Why no trend is computed, in words. */
export type NoTrend = { reason: string };

/** The trend over the finished months, by calendar months, so that a gap counts as the time it is. */
export function trendOf(months: readonly MonthRow[]): Trend | NoTrend {
  const rows = usable(months);
  const [first, last] = [rows[0], rows.at(-1)];
  if (!first || !last || rows.length < 3)
    return {
      reason: `a trend needs at least three finished months with exposure, and there are ${rows.length}`,
    };
  if (!rows.some(({ events }) => events > 0)) return { reason: "no injury falls in these months" };
  const perMonth = attempt(() => rateTrend(rows));
  if (!perMonth) return { reason: "too few injuries fall in these months to determine one" };
  return { perMonth, perYear: overYear(perMonth), months: rows.length, first: first.label, last: last.label };
}

/**
 * The trend with the share of matches held equal: months by session kind, with a term for matches. Gradual injuries
 * tied to no session have no kind and stay out.
 */
export function trendWithinKinds(months: readonly MonthRow[], { cells, counted }: Selection, unit: RateUnit) {
  const periods = new Map(usable(months).map(({ month, period }) => [month, period]));
  const exposure = group(cells, ({ day, kind }) => `${day.slice(0, 7)} ${kind}`);
  const injuries = group(counted, ({ day, sessionKind }) => `${day.slice(0, 7)} ${sessionKind}`);
  const rows = [...periods].flatMap(([month, period]) =>
    (["training", "match"] as const).map((kind, isMatch) => ({
      events: injuries.get(`${month} ${kind}`)?.length ?? 0,
      exposure: sumOf(exposure.get(`${month} ${kind}`) ?? [], unit),
      x: [period, isMatch],
    })),
  );
  const exposed = rows.filter((row) => row.exposure > 0);
  const hasEvents = (isMatch: number) => exposed.some(({ x, events }) => x[1] === isMatch && events > 0);
  if (!hasEvents(0) || !hasEvents(1) || periods.size < 3) return null;
  const model = attempt(() => poissonRegression({ rows: exposed, names: ["month", "match"] }));
  const slope = model?.coefficients[1];
  if (!slope) return null;
  const perMonth = coefficientRatio(slope, { standardError: "quasi" });
  const withoutKind = counted.filter(
    ({ day, sessionKind }) => sessionKind === null && periods.has(day.slice(0, 7)),
  ).length;
  return { perMonth, perYear: overYear(perMonth), withoutKind } satisfies KindTrend;
}

/** Exposure of some cells in one unit. */
export const sumOf = (cells: readonly ExposureCell[], unit: RateUnit) =>
  cells.reduce((sum, cell) => sum + cell[unit], 0);
