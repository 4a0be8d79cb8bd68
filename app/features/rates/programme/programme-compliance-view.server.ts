import { complianceOf, isCompliant } from "~/features/warm-ups/compliance";
import { complianceByTeam, type TallySession } from "~/features/warm-ups/warm-ups.server";
import type { Tx } from "~db/client.server";
import { kindsOf } from "../counting";
import { weeksOf } from "../coverage/coverage-view.server";
import type { RatesFilters } from "../filters";
import { dayWords, monthWords } from "../periods";
import type { RatesView } from "../view.server";
import { byWeek, fromStartOn, leastRecorded, skippingOf } from "./programme-compliance";
import { measuresTable, skippedTable, teamWeeksTable, weeksTable } from "./programme-compliance-tables";

/** Fewer recorded sessions in a week than this are marked as unstable on the line. */
const stableSessions = 5;

/** Warm-up compliance of the viewed teams from the start of each team's programme. */
export async function complianceViewOf(
  tx: Tx,
  view: RatesView,
  filters: RatesFilters,
  starts: ReadonlyMap<string, string>,
) {
  const { from, to } = view.period;
  const all = await complianceByTeam(tx, { from, to, teamIds: view.teamIds });
  const ofSport = all.filter(({ sport }) => filters.sport === "any" || sport === filters.sport);
  const teams = fromStartOn(ofSport, starts, kindsOf[filters.sessions]);
  const sessions = teams.flatMap((team) => team.sessions);
  const weeks = weeksOf(from, to);
  const weekly = byWeek(sessions, weeks);
  const together = complianceOf(sessions);
  const skipping = skippingOf(teams);
  return {
    skipping,
    least: leastRecorded(teams),
    together: { notRecorded: together.notRecorded, held: together.sessions },
    periods: weeks.map((week) => ({
      short: monthWords(week.slice(0, 7)).slice(0, 3),
      long: `week from ${dayWords(week)}`,
    })),
    line: {
      periods: weeks.map((week) => dayWords(week)),
      points: weekly.map(({ compliance }) => linePoint(compliance)),
    },
    grid: teams
      .filter(({ sessions: own }) => own.length > 0)
      .map(({ teamId, name, sessions: own }) => ({
        teamId,
        label: name,
        cells: weeks.map((week) => gridCell(own.filter((session) => session.week === week))),
      })),
    tables: {
      skipped: skippedTable(teams, skipping),
      measures: measuresTable(teams, together),
      weeks: weeksTable(weekly),
    },
    /** In the file alone: too long for the page, which shows it as the grid. */
    teamWeeks: teamWeeksTable(teams, weeks),
  };
}

/** Session compliance of recorded sessions in per cent, for the line. */
function linePoint(compliance: ReturnType<typeof byWeek>[number]["compliance"]) {
  const share = compliance?.ofRecorded.estimate;
  if (!share) return null;
  return {
    estimate: share.estimate * 100,
    lower: share.lower * 100,
    upper: share.upper * 100,
    unstable: compliance.recorded < stableSessions,
  };
}

/** A team's week: of the sessions with a record, those with the target share of blocks. Null: nothing recorded. */
function gridCell(sessions: readonly TallySession[]) {
  const recorded = sessions.filter(({ warmUp }) => warmUp !== null);
  if (recorded.length === 0) return null;
  const done = recorded.filter(isCompliant).length;
  const skipped = recorded.filter(({ warmUp }) => warmUp?.outcome === "skipped").length;
  const parts = [
    `${done} of ${recorded.length} recorded done`,
    ...(skipped > 0 ? [`${skipped} skipped`] : []),
    ...(sessions.length > recorded.length ? [`${sessions.length - recorded.length} not recorded`] : []),
  ];
  return { share: done / recorded.length, text: parts.join(", ") };
}
