import { group, min } from "d3-array";
import { addDays, addMonths, daysBetween } from "~/platform/clock";
import {
  type ClusterRobustRateRatio,
  clusterRobustRateRatio,
  coefficientRatio,
  type Estimate,
  poissonRegression,
  type RateRatio,
  type RateTrend,
  rateRatio,
  rateTrend,
} from "~/statistics";
import { attempt } from "./attempt";
import { type ExposureCell, type InjuryRow, sumExposure } from "./counting";
import { coverageOf } from "./coverage";
import type { RateUnit } from "./filters";
import { monthsOf, monthWords, type SeasonDays } from "./periods";
import { type RateRow, rateRow, tabulate } from "./rates";
import type { Counts, Selection } from "./selection";

/** Rates over months and seasons, their trend, and a season so far against the same days of earlier ones. Pure. */

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

export type SeasonRow = { season: SeasonDays; row: RateRow; matchShare: number | null };

export type SoFarRow = {
  season: SeasonDays;
  from: string;
  to: string;
  days: number;
  row: RateRow;
  /** The season looked at over this earlier one; null for itself and where either has no rate or no injury at all. */
  ratio: RateRatio | null;
  robust: ClusterRobustRateRatio | null;
};

type Material = { counts: Counts; selection: Selection; unit: RateUnit };

const endOfMonth = (month: string) => addDays(addMonths(`${month}-01`, 1), -1);

/** Every month from the first to the last day; null where no session had exposure and nobody was injured. */
export function monthRows({ counts, selection, unit }: Material): MonthRow[] {
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

const sumOf = (cells: readonly ExposureCell[], unit: RateUnit) =>
  cells.reduce((sum, cell) => sum + cell[unit], 0);

/** Each season's rate, and how much of its exposure matches make up. */
export function seasonRows({ counts, selection, unit }: Material): SeasonRow[] {
  return tabulate("season", counts, selection, unit).flatMap((row) => {
    const season = counts.seasons.find(({ id }) => id === row.key);
    if (!season) return [];
    const own = selection.cells.filter(({ day }) => season.startsOn <= day && day <= season.endsOn);
    const all = sumOf(own, unit);
    const matches = sumOf(
      own.filter(({ kind }) => kind === "match"),
      unit,
    );
    return [{ season, row, matchShare: all > 0 ? matches / all : null }];
  });
}

const within =
  (from: string, to: string) =>
  ({ day }: { day: string }) =>
    from <= day && day <= to;

function countDays({ selection, unit }: Material, season: SeasonDays, from: string, to: string) {
  const isIn = within(from, to);
  return {
    row: rateRow({
      group: { key: season.id, label: season.name, sex: null, band: null, teamId: null },
      events: selection.counted.filter(isIn).length,
      exposure: sumExposure(selection.cells.filter(isIn)),
      unit,
      coverage: coverageOf(selection.sessions.filter(isIn)),
    }),
    cells: selection.cells.filter(isIn),
    injuries: selection.counted.filter(isIn),
  };
}

type Days = ReturnType<typeof countDays>;

/** The two spans of days with their teams as clusters; null where that cannot be had. */
function allowForTeams(now: Days, then: Days, unit: RateUnit): ClusterRobustRateRatio | null {
  const side = ({ cells, injuries }: Days, name: "a" | "b") => {
    const teams = [...new Set(cells.map(({ teamId }) => teamId))];
    return teams.map((cluster) => ({
      group: name,
      cluster,
      events: injuries.filter((injury: InjuryRow) => injury.teamId === cluster).length,
      exposure: sumOf(
        cells.filter(({ teamId }) => teamId === cluster),
        unit,
      ),
    }));
  };
  const rows = [...side(now, "a"), ...side(then, "b")].filter(({ exposure }) => exposure > 0);
  const ratio = attempt(() => clusterRobustRateRatio(rows));
  return ratio && ratio.varianceInflation !== null ? ratio : null;
}

/**
 * A season from its first day to `to`, and as many days from the first of each earlier season.
 * @param current id of the season looked at
 * @param to the last of its days looked at, ISO
 */
export function seasonsSoFar(material: Material, current: string, to: string): SoFarRow[] {
  const { seasons } = material.counts;
  const season = seasons.find(({ id }) => id === current);
  if (!season) return [];
  const length = daysBetween(season.startsOn, to);
  const now = countDays(material, season, season.startsOn, to);
  const earlier = seasons.filter(({ startsOn }) => startsOn < season.startsOn).reverse();
  const rows = earlier.map((other): SoFarRow => {
    const last = addDays(other.startsOn, length);
    const until = min([last, other.endsOn]) ?? last;
    const then = countDays(material, other, other.startsOn, until);
    const [a, b] = [now.row, then.row];
    const isRated = a.rate && b.rate && (a.injuries ?? 0) + (b.injuries ?? 0) > 0;
    return {
      ...{ season: other, from: other.startsOn, to: until, row: b },
      days: daysBetween(other.startsOn, until) + 1,
      ratio: isRated
        ? rateRatio(
            { events: a.injuries ?? 0, exposure: a.denominator ?? 0 },
            { events: b.injuries ?? 0, exposure: b.denominator ?? 0 },
          )
        : null,
      robust: isRated ? allowForTeams(now, then, material.unit) : null,
    };
  });
  const own = {
    season,
    from: season.startsOn,
    to,
    days: length + 1,
    row: now.row,
    ratio: null,
    robust: null,
  };
  return [own, ...rows];
}
