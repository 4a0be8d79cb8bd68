import { group, min } from "d3-array";
import { addDays, weekStart } from "~/platform/clock";
import { type Estimate, incidenceRate, uChart } from "~/statistics";
import { coverageOf, stableFrom } from "../coverage";
import { expectedIn, standardOf } from "../expected";
import type { Selection } from "../selection";
import { type ReportedWeeks, reportedWeeks } from "../silence";
import { fewestWeeks, type Material, type RecentSpan, weekOf } from "./recent-weeks";
import { cusumThreshold, restartingCusum } from "./recent-weeks-cusum";

/** The last weeks one by one: against limits for their exposure, and as a running sum. Pure. */

/** Weeks that the charts show. */
export const chartWeeks = 40;
export type Week = {
  /** Monday, ISO. */
  week: string;
  /** It runs on after the last day that is counted. */
  unfinished: boolean;
  /** Null where the week is a gap. */
  events: number | null;
  exposure: number;
  rate: Estimate | null;
  expected: number | null;
  limits: { lower: number; upper: number; signal: boolean } | null;
  gap: string | null;
  cusum: number | null;
  crossed: boolean;
};

export type WeekCharts = {
  weeks: Week[];
  /** The u-chart's centre, per 1000; null when there are too few weeks or injuries for limits. */
  centre: number | null;
  threshold: number;
  /** Injuries in a usual week. */
  usual: number | null;
  reported: ReportedWeeks;
};

type Sum = {
  cells: Selection["cells"];
  events: number;
  exposure: number;
  expected: number | null;
  gap: string | null;
};

function sumWeeks({ counts, selection, unit }: Material, weeks: readonly string[], span: RecentSpan): Sum[] {
  const upToEnd = ({ day }: { day: string }) => day <= span.to;
  const byWeek = <T extends { day: string }>(rows: readonly T[]) =>
    group(rows.filter(upToEnd), ({ day }) => weekOf(day));
  const cells = byWeek(selection.cells);
  const injuries = byWeek(selection.counted);
  const sessions = byWeek(selection.sessions);
  const isSingle = new Set(selection.cells.map(({ teamId }) => teamId)).size === 1;
  const past = {
    cells: selection.cells.filter(({ day }) => day < span.from),
    counted: selection.counted.filter(({ day }) => day < span.from),
  };
  const standard = past.counted.length < stableFrom ? null : standardOf(past, "kind", counts.bands, unit);
  return weeks.map((week) => {
    const own = cells.get(week) ?? [];
    const exposure = own.reduce((sum, cell) => sum + cell[unit], 0);
    const { reported } = reportedWeeks(own, counts.injuries, counts.confirmedWeeks);
    const isWithheld = coverageOf(sessions.get(week) ?? []).state === "withheld";
    const gap =
      exposure <= 0
        ? "no exposure"
        : isWithheld
          ? "withheld"
          : isSingle && reported === 0
            ? "not reported"
            : null;
    return {
      ...{ cells: own, exposure, gap },
      events: injuries.get(week)?.length ?? 0,
      expected: (standard && expectedIn(standard, own)?.estimate) ?? null,
    };
  });
}

/**
 * The weeks of the charts. Limits and centre are those of all exposure, as the rates count it; a week of a single team
 * that nobody reported on is a gap in the picture.
 */
export function weekCharts(material: Material, span: RecentSpan): WeekCharts {
  const { counts, selection } = material;
  const last = weekStart(span.to);
  const first = weekStart(min([counts.from, span.to]) ?? span.to);
  const shownWeeks = Array.from({ length: chartWeeks }, (_, index) =>
    addDays(last, -7 * (chartWeeks - 1 - index)),
  ).filter((week) => week >= first);
  const sums = sumWeeks(material, shownWeeks, span);
  const counted = sums
    .map((sum, index) => ({ ...sum, index }))
    .filter(({ gap }) => gap === null || gap === "not reported");
  const events = counted.reduce((sum, week) => sum + week.events, 0);
  const chart = counted.length >= fewestWeeks && events >= stableFrom ? uChart(counted) : null;
  const points = new Map(counted.map(({ index }, place) => [index, chart?.points[place]]));
  const threshold = cusumThreshold();
  const { sums: path, crossings } = restartingCusum(
    sums.map(({ gap, events: count, expected }) =>
      expected === null || gap === "no exposure" || gap === "withheld" ? null : { events: count, expected },
    ),
    threshold,
  );
  const usual = sums
    .flatMap(({ expected, gap }) => (gap === null && expected ? [expected] : []))
    .sort((a, b) => a - b);
  const shown = ({ day }: { day: string }) => day >= (shownWeeks[0] ?? last) && day <= span.to;
  return {
    weeks: shownWeeks.map((week, index): Week => {
      const sum = sums[index] as Sum;
      const point = points.get(index);
      return {
        week,
        unfinished: addDays(week, 6) > span.to,
        events: sum.gap === null ? sum.events : null,
        exposure: sum.exposure,
        rate: sum.gap === null ? incidenceRate({ events: sum.events, exposure: sum.exposure }) : null,
        expected: sum.expected,
        limits:
          sum.gap === null && point
            ? { lower: point.lower * 1000, upper: point.upper * 1000, signal: point.signal }
            : null,
        gap: sum.gap,
        cusum: sum.gap === null ? (path[index] ?? null) : null,
        crossed: crossings.includes(index),
      };
    }),
    centre: chart ? chart.centre * 1000 : null,
    threshold,
    usual: usual[Math.floor(usual.length / 2)] ?? null,
    reported: reportedWeeks(
      [...selection.cells.filter(shown), ...selection.silent.filter(shown)],
      counts.injuries,
      counts.confirmedWeeks,
    ),
  };
}
