import { max } from "d3-array";
import { addDays, weekStart } from "~/platform/clock";
import { type Estimate, exceedance } from "~/statistics";
import { type Coverage, coverageOf, percent, stableFrom } from "../coverage";
import { expectedIn, standardOf } from "../expected";
import type { RateUnit } from "../filters";
import type { Counts, Selection } from "../selection";
import { type ReportedWeeks, reportedWeeks } from "../silence";

/** Whether something is wrong now: the last weeks against all that went before. Pure. */

/** Days of "the last four weeks". */
export const recentDays = 28;
/** Limits of a chart need about so many weeks; a baseline too. */
export const fewestWeeks = 8;

const mondays = new Map<string, string>();

/** Monday of a day, each worked out once: there are many cells a day, and few days. */
export function weekOf(day: string): string {
  const known = mondays.get(day) ?? weekStart(day);
  mondays.set(day, known);
  return known;
}

export type RecentSpan = { from: string; to: string };

/**
 * The last four weeks up to yesterday; of a season that is over, up to its last day with exposure.
 * @param seasonTo the last day of the season that may be looked at
 */
export function recentSpan(
  seasonTo: string,
  today: string,
  cells: readonly { day: string }[] = [],
): RecentSpan {
  const yesterday = addDays(today, -1);
  const last = max(cells, ({ day }) => (day <= seasonTo ? day : undefined));
  const to = seasonTo < yesterday ? (last ?? seasonTo) : yesterday;
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

export type Material = { counts: Counts; selection: Selection; unit: RateUnit };

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
    weeks: new Set(past.cells.map(({ day }) => weekOf(day))).size,
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
