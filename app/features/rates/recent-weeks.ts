import { group, min } from "d3-array";
import { addDays, weekStart } from "~/platform/clock";
import { type Estimate, exceedance, incidenceRate, uChart } from "~/statistics";
import { type Coverage, coverageOf, percent, stableFrom } from "./coverage";
import { expectedIn, standardOf } from "./expected";
import type { RateUnit } from "./filters";
import { cusumThreshold, restartingCusum } from "./recent-weeks-cusum";
import type { Counts, Selection } from "./selection";
import { type ReportedWeeks, reportedWeeks } from "./silence";

/** Whether something is wrong now: the last weeks against all that went before. Pure. */

/** Days of "the last four weeks". */
export const recentDays = 28;
/** Weeks that the charts show. */
export const chartWeeks = 40;
/** Limits of a chart need about so many weeks; a baseline too. */
export const fewestWeeks = 8;

export type RecentSpan = { from: string; to: string };

/** The last four weeks up to yesterday, or up to the last day of a season that is over. */
export function recentSpan(seasonTo: string, today: string): RecentSpan {
  const yesterday = addDays(today, -1);
  const to = min([seasonTo, yesterday]) ?? yesterday;
  return { from: addDays(to, 1 - recentDays), to };
}

export type Surprise = {
  /** Null: not reported on in these weeks. */
  observed: number | null;
  exposure: number;
  /** Expected at the rates by session kind of all earlier weeks, with the limits of those rates; null without them. */
  expected: Estimate | null;
  /** Chance of the observed injuries or more, the expected ones taken as known. */
  probability: number | null;
  /** The same at the upper limit of what is expected. */
  probabilityAtUpper: number | null;
  baseline: { injuries: number; weeks: number };
  reported: ReportedWeeks;
  /** Why nothing is expected, in words. */
  reason: string | null;
};

type Material = { counts: Counts; selection: Selection; unit: RateUnit };

const isIn =
  ({ from, to }: RecentSpan) =>
  ({ day }: { day: string }) =>
    from <= day && day <= to;

function ofTeam({ counts, selection, unit }: Material, teamId: string): Material {
  const isOwn = (row: { teamId: string | null }) => row.teamId === teamId;
  return {
    unit,
    counts: {
      ...counts,
      injuries: counts.injuries.filter(isOwn),
      confirmedWeeks: counts.confirmedWeeks.filter(isOwn),
    },
    selection: {
      ...selection,
      cells: selection.cells.filter(isOwn),
      silent: selection.silent.filter(isOwn),
      counted: selection.counted.filter(isOwn),
      sessions: selection.sessions.filter(isOwn),
    },
  };
}

const withheldWords = ({ share }: Coverage) =>
  `withheld: only ${percent(share ?? 0)} of held sessions recorded`;

function noBaseline(injuries: number, weeks: number, coverage: Coverage): string | null {
  if (coverage.state === "withheld") return `the earlier weeks are ${withheldWords(coverage)}`;
  if (injuries < stableFrom)
    return `too little baseline: ${injuries === 0 ? "no injury" : injuries === 1 ? "one injury" : `${injuries} injuries`} before these weeks`;
  return weeks < fewestWeeks
    ? `too little baseline: ${weeks === 1 ? "one week" : `${weeks} weeks`} before these`
    : null;
}

/** The last four weeks of all that is looked at, against everything before them. */
export function surpriseOf({ counts, selection, unit }: Material, span: RecentSpan): Surprise {
  const recent = isIn(span);
  const earlier = ({ day }: { day: string }) => day < span.from;
  const cells = selection.cells.filter(recent);
  const reported = reportedWeeks(
    [...cells, ...selection.silent.filter(recent)],
    counts.injuries,
    counts.confirmedWeeks,
  );
  const past = {
    cells: selection.cells.filter(earlier),
    counted: selection.counted.filter(earlier),
  };
  const baseline = {
    injuries: past.counted.length,
    weeks: new Set(past.cells.map(({ day }) => weekStart(day))).size,
  };
  const exposure = cells.reduce((sum, cell) => sum + cell[unit], 0);
  const count = selection.counted.filter(recent).length;
  const none = (reason: string, observed: number | null = count): Surprise => ({
    ...{ observed, exposure, baseline, reported, reason },
    ...{ expected: null, probability: null, probabilityAtUpper: null },
  });
  if (reported.all > 0 && reported.reported === 0) return none("not reported", null);
  if (exposure <= 0) return none("no exposure in these weeks", count === 0 ? null : count);
  const now = coverageOf(selection.sessions.filter(recent));
  if (now.state === "withheld") return none(withheldWords(now));
  const lacking = noBaseline(
    baseline.injuries,
    baseline.weeks,
    coverageOf(selection.sessions.filter(earlier)),
  );
  if (lacking) return none(lacking);
  const expected = expectedIn(standardOf(past, "kind", counts.bands, unit), cells);
  if (!expected) return none("no exposure before these weeks");
  return {
    ...{ observed: count, exposure, baseline, reported, expected, reason: null },
    probability: exceedance(count, expected.estimate),
    probabilityAtUpper: exceedance(count, expected.upper),
  };
}

export type TeamSurprise = Surprise & { teamId: string; name: string };

/** Each team against its own past, the largest surprise first. Teams without any exposure drop out. */
export function surprisesByTeam(material: Material, span: RecentSpan): TeamSurprise[] {
  const { counts, selection } = material;
  const exposed = new Set([...selection.cells, ...selection.silent].map(({ teamId }) => teamId));
  return counts.teams
    .filter(({ id }) => exposed.has(id))
    .map(({ id, name }) => ({ teamId: id, name, ...surpriseOf(ofTeam(material, id), span) }))
    .sort((a, b) => (a.probability ?? 2) - (b.probability ?? 2));
}

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

function sumWeeks(
  { counts, selection, unit }: Material,
  mondays: readonly string[],
  span: RecentSpan,
): Sum[] {
  const upToEnd = ({ day }: { day: string }) => day <= span.to;
  const byWeek = <T extends { day: string }>(rows: readonly T[]) =>
    group(rows.filter(upToEnd), ({ day }) => weekStart(day));
  const cells = byWeek(selection.cells);
  const injuries = byWeek(selection.counted);
  const sessions = byWeek(selection.sessions);
  const isSingle = new Set(selection.cells.map(({ teamId }) => teamId)).size === 1;
  const past = {
    cells: selection.cells.filter(({ day }) => day < span.from),
    counted: selection.counted.filter(({ day }) => day < span.from),
  };
  const standard = past.counted.length < stableFrom ? null : standardOf(past, "kind", counts.bands, unit);
  return mondays.map((week) => {
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
  const mondays = Array.from({ length: chartWeeks }, (_, index) =>
    addDays(last, -7 * (chartWeeks - 1 - index)),
  ).filter((week) => week >= first);
  const sums = sumWeeks(material, mondays, span);
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
  const shown = ({ day }: { day: string }) => day >= (mondays[0] ?? last) && day <= span.to;
  return {
    weeks: mondays.map((week, index): Week => {
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
