import { type Compliance, isCompliant } from "~/features/warm-ups/compliance";
import { doseWords, shareWords } from "~/features/warm-ups/compliance-words";
import type { Estimate } from "~/statistics";
import { dayWords } from "../periods";
import { type Cell, figure, isFigure, type TableColumn, type TableData } from "../tables";
import type { ProgrammeTeam, Skipping } from "./programme-compliance";

/** The tables of compliance, as data for the page and for their files. */

/** Columns that only the file has, for want of room on the page. */
const fileOnly: Record<string, readonly string[]> = { skipped: ["full", "part", "held"], weeks: ["ofHeld"] };

/** An interval stays on one line; before it a line may break. */
const unbroken = (words: string) => words.replace(/\(.*\)/, (limits) => limits.replaceAll(" ", "\u00a0"));

/**
 * A table as the page shows it: without what only its file has, and with each estimate and its interval in one cell,
 * where five measures stand side by side.
 */
export function compact(table: TableData): TableData {
  const columns = table.columns.filter(({ id }) => !fileOnly[table.id]?.includes(id));
  const joined = columns.filter((column) => column.kind === "figure" && !column.bar);
  const words = (cell: Cell | undefined, column: TableColumn): Cell => {
    if (!isFigure(cell) || column.kind !== "figure" || cell.lower === null || cell.upper === null)
      return cell ?? null;
    return column.form === "share"
      ? unbroken(shareWords({ ...cell, lower: cell.lower, upper: cell.upper }))
      : unbroken(doseWords({ ...cell, lower: cell.lower, upper: cell.upper }));
  };
  return {
    ...table,
    columns: columns.map((column) =>
      joined.includes(column) ? { id: column.id, header: column.header, kind: "text" } : column,
    ),
    rows: table.rows.map((row) => ({
      ...row,
      cells: {
        ...row.cells,
        ...(typeof row.cells.start === "string" ? { start: row.cells.start.replaceAll(" ", "\u00a0") } : {}),
        ...Object.fromEntries(joined.map((column) => [column.id, words(row.cells[column.id], column)])),
      },
    })),
  };
}

const text = (id: string, header: string): TableColumn => ({ id, header, kind: "text" });
const count = (id: string, header: string): TableColumn => ({ id, header, kind: "count" });
const share = (id: string, header: string, unit: string, bar = false): TableColumn => ({
  ...{ id, header, unit, bar },
  kind: "figure",
  form: "share",
});

const measureColumns: TableColumn[] = [
  share("ofRecorded", "Session compliance, of recorded", "per cent of sessions with a record"),
  share("ofHeld", "Session compliance, of held", "per cent of held sessions"),
  { id: "dose", header: "Weekly dose", kind: "figure", form: "rate", unit: "warm-ups per team-week" },
  share("completeness", "Completeness", "per cent of the blocks of a warm-up"),
  share("athleteDose", "Athlete dose", "per cent of participations"),
];

const part = (estimate: Estimate | null, reason: string): Cell => (estimate ? figure(estimate) : { reason });

/** The four measures of some sessions, each with why it is missing. */
function measures({ ofRecorded, ofHeld, weeklyDose, completeness, athleteDose }: Compliance) {
  return {
    ofRecorded: part(ofRecorded.estimate, "nothing recorded"),
    ofHeld: part(ofHeld.estimate, "no session held"),
    dose: part(weeklyDose.estimate, "no session held"),
    completeness: part(completeness.estimate, "no warm-up done"),
    athleteDose: part(athleteDose.estimate, "no attendance recorded"),
  };
}

const notStarted = ({ startsOn }: ProgrammeTeam) =>
  startsOn === null ? "follows no programme" : "no session since its start";

/** Done, skipped and not recorded by team: the largest share of skipped warm-ups first. */
export function skippedTable(teams: readonly ProgrammeTeam[], { teams: ranked }: Skipping): TableData {
  const rank = new Map(ranked.map(({ teamId }, index) => [teamId, index]));
  const place = ({ teamId }: ProgrammeTeam) => rank.get(teamId) ?? ranked.length;
  const shareOf = new Map(ranked.map((team) => [team.teamId, team.share]));
  const rows = [...teams].sort((a, b) => place(a) - place(b));
  return {
    id: "skipped",
    caption: "Warm-ups done, skipped and not recorded, by team",
    columns: [
      text("team", "Team"),
      share("skippedShare", "Skipped share", "per cent of sessions with a record", true),
      count("skipped", "Skipped"),
      count("done", "Done"),
      count("full", "Done in full"),
      count("part", "Done in part"),
      count("notRecorded", "Not recorded"),
      count("held", "Held"),
      text("start", "From"),
    ],
    rows: rows.map((team) => {
      const { compliance, startsOn } = team;
      const own = shareOf.get(team.teamId);
      return {
        key: team.teamId,
        cells: {
          team: team.name,
          start: startsOn === null ? { reason: "none" } : dayWords(startsOn, true),
          held: compliance.sessions,
          done: compliance.full + compliance.part,
          full: compliance.full,
          part: compliance.part,
          skipped: compliance.skipped,
          notRecorded: compliance.notRecorded,
          skippedShare: own
            ? figure(own)
            : { reason: compliance.sessions === 0 ? notStarted(team) : "fewer than 5 with a record" },
        },
      };
    }),
    empty: "No team yet.",
  };
}

/** The four measures by team. */
export const measuresTable = (teams: readonly ProgrammeTeam[], together: Compliance): TableData => ({
  id: "measures",
  caption: "The four measures of compliance, by team",
  columns: [text("team", "Team"), ...measureColumns],
  rows: [
    ...teams.flatMap(({ teamId, name, compliance }) =>
      compliance.sessions === 0 ? [] : [{ key: teamId, cells: { team: name, ...measures(compliance) } }],
    ),
    { key: "total", total: true, cells: { team: "All together", ...measures(together) } },
  ],
});

type Week = { week: string; compliance: Compliance | null };

/** The four measures by week, all teams together; weeks without a session stay out. */
export const weeksTable = (weeks: readonly Week[]): TableData => ({
  id: "weeks",
  caption: "The four measures of compliance, by week",
  columns: [
    text("week", "Week from"),
    count("held", "Held"),
    count("recorded", "Recorded"),
    count("skipped", "Skipped"),
    ...measureColumns,
  ],
  rows: weeks.flatMap(({ week, compliance }) => {
    if (!compliance) return [];
    const { sessions: held, recorded, skipped } = compliance;
    return [
      { key: week, cells: { week: dayWords(week, true), held, recorded, skipped, ...measures(compliance) } },
    ];
  }),
  empty: "No session held yet.",
});

/** Every team's weeks: what the grid shows, one row per stroke. */
export function teamWeeksTable(teams: readonly ProgrammeTeam[], weeks: readonly string[]): TableData {
  return {
    id: "team-weeks",
    caption: "Warm-ups by team and week",
    columns: [
      text("team", "Team"),
      text("week", "Week from"),
      count("held", "Held"),
      count("compliant", "With the target share of blocks"),
      count("skipped", "Skipped"),
      count("notRecorded", "Not recorded"),
    ],
    rows: teams.flatMap(({ teamId, name, sessions }) =>
      weeks.flatMap((week) => {
        const own = sessions.filter((session) => session.week === week);
        if (own.length === 0) return [];
        return [
          {
            key: `${teamId} ${week}`,
            cells: {
              team: name,
              week: dayWords(week, true),
              held: own.length,
              compliant: own.filter(isCompliant).length,
              skipped: own.filter(({ warmUp }) => warmUp?.outcome === "skipped").length,
              notRecorded: own.filter(({ warmUp }) => warmUp === null).length,
            },
          },
        ];
      }),
    ),
  };
}
