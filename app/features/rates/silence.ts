import { weekStart } from "~/platform/clock";
import type { ExposureCell, InjuryRow } from "./counting";

/**
 * Silent teams. A team that has entered no injury in a season may have had none, or may not report at all: its
 * exposure counts only in the weeks in which somebody confirmed that nobody was newly hurt. A team with an injury
 * reports, and all its exposure counts: to keep only its weeks with an injury or a confirmation would choose the
 * exposure by the outcome and make every rate too high.
 */
export type ConfirmedWeek = { teamId: string /** Monday, ISO. */; week: string };

/** What an injury says of its team's reporting. */
type Entered = Pick<InjuryRow, "teamId" | "withdrawn">;

/** Splits the exposure of one season into what was reported on and what silent teams had. */
export function splitSilent(
  cells: readonly ExposureCell[],
  injuries: readonly Entered[],
  confirmed: readonly ConfirmedWeek[],
): { cells: ExposureCell[]; silent: ExposureCell[] } {
  const reporting = new Set(injuries.filter(({ withdrawn }) => !withdrawn).map(({ teamId }) => teamId));
  const weeks = new Set(confirmed.map(({ teamId, week }) => `${teamId} ${week}`));
  const split: { cells: ExposureCell[]; silent: ExposureCell[] } = { cells: [], silent: [] };
  for (const cell of cells) {
    const reported = reporting.has(cell.teamId) || weeks.has(`${cell.teamId} ${weekStart(cell.day)}`);
    split[reported ? "cells" : "silent"].push(cell);
  }
  return split;
}

export type ReportedWeeks = { reported: number; all: number };

/**
 * How many team-weeks with exposure have an injury or a confirmation that there was none. The others read "not
 * reported" wherever a single week of a team is shown, never 0.
 */
export function reportedWeeks(
  cells: readonly ExposureCell[],
  injuries: readonly InjuryRow[],
  confirmed: readonly ConfirmedWeek[],
): ReportedWeeks {
  const key = (teamId: string | null, week: string) => `${teamId} ${week}`;
  const known = new Set([
    ...confirmed.map(({ teamId, week }) => key(teamId, week)),
    ...injuries.filter(({ withdrawn }) => !withdrawn).map(({ teamId, day }) => key(teamId, weekStart(day))),
  ]);
  const all = new Set(cells.map(({ teamId, day }) => key(teamId, weekStart(day))));
  return { reported: [...all].filter((week) => known.has(week)).length, all: all.size };
}
