import { group } from "d3-array";
import { addDays, weekStart } from "~/platform/clock";
import type { Tx } from "~db/client.server";
import { type Coverage, coverageOf, type SessionTally } from "../coverage";
import { dayWords } from "../periods";
import { type Counts, select } from "../selection";
import { type ReportedWeeks, reportedWeeks } from "../silence";
import type { Cell, TableColumn, TableData } from "../tables";
import { countView, type RatesView } from "../view.server";

/** How much of the exposure is recorded, by team and week, and how much of the time was reported on. */

type WeekCell = { share: number; held: number; recorded: number };
export type CoverageRow = {
  teamId: string;
  name: string;
  coverage: Coverage;
  reported: ReportedWeeks;
  sums: Record<"headcount" | "estimated" | "withoutExposure" | "unconfirmed" | "cancelled", number>;
  /** One entry per week of the view; null where no session was held. */
  weeks: (WeekCell | null)[];
};

const sumNames = ["headcount", "estimated", "withoutExposure", "unconfirmed", "cancelled"] as const;

function sumsOf(tallies: readonly SessionTally[]) {
  const sum = (name: (typeof sumNames)[number]) => tallies.reduce((all, row) => all + row[name], 0);
  return Object.fromEntries(sumNames.map((name) => [name, sum(name)])) as CoverageRow["sums"];
}

/** Mondays from the week of the first day to that of the last. */
export function weeksOf(from: string, to: string): string[] {
  const weeks: string[] = [];
  for (let week = weekStart(from); week <= to; week = addDays(week, 7)) weeks.push(week);
  return weeks;
}

function weekCell(tallies: readonly SessionTally[] | undefined): WeekCell | null {
  const { held, recorded, share } = coverageOf(tallies ?? []);
  return share === null ? null : { share, held, recorded };
}

/** One row per team that had sessions, in the order of their names. */
export function coverageRows(counts: Counts, sessions: readonly SessionTally[]): CoverageRow[] {
  const weeks = weeksOf(counts.from, counts.to);
  const byTeam = group(sessions, ({ teamId }) => teamId);
  const cells = [...counts.cells, ...counts.silent];
  return counts.teams.flatMap(({ id, name }) => {
    const own = byTeam.get(id);
    if (!own) return [];
    const byWeek = group(own, ({ day }) => weekStart(day));
    const isOwn = ({ teamId }: { teamId: string | null }) => teamId === id;
    return {
      teamId: id,
      name,
      coverage: coverageOf(own),
      reported: reportedWeeks(
        cells.filter(isOwn),
        counts.injuries.filter(isOwn),
        counts.confirmedWeeks.filter(isOwn),
      ),
      sums: sumsOf(own),
      weeks: weeks.map((week) => weekCell(byWeek.get(week))),
    };
  });
}

const shareColumn: TableColumn = { id: "share", header: "Recorded share", kind: "percent", down: true };

const shareCell = ({ share }: Coverage): Cell => share ?? { reason: "no session held" };

function teamTable(rows: readonly CoverageRow[]): TableData {
  const count = (id: string, header: string): TableColumn => ({ id, header, kind: "count" });
  return {
    id: "teams",
    caption: "Held sessions with recorded exposure, by team",
    columns: [
      { id: "team", header: "Team", kind: "text" },
      count("held", "Held"),
      count("recorded", "Recorded"),
      count("headcount", "Headcount"),
      count("estimated", "Estimated"),
      count("withoutExposure", "Nothing entered"),
      count("unconfirmed", "Not confirmed"),
      shareColumn,
      { id: "reported", header: "Team-weeks reported on", kind: "text" },
    ],
    rows: rows.map(({ teamId, name, coverage, reported, sums }) => ({
      key: teamId,
      cells: {
        team: name,
        held: coverage.held,
        recorded: coverage.recorded,
        ...sums,
        share: shareCell(coverage),
        reported: `${reported.reported} of ${reported.all}`,
      },
    })),
    empty: "No session in this season yet.",
  };
}

function weekTable(counts: Counts, sessions: readonly SessionTally[]): TableData {
  const byWeek = group(sessions, ({ day }) => weekStart(day));
  return {
    id: "weeks",
    caption: "Held sessions with recorded exposure, by week",
    columns: [
      { id: "week", header: "Week from", kind: "text" },
      { id: "held", header: "Held", kind: "count" },
      { id: "recorded", header: "Recorded", kind: "count" },
      shareColumn,
    ],
    rows: weeksOf(counts.from, counts.to).flatMap((week) => {
      const coverage = coverageOf(byWeek.get(week) ?? []);
      const { held, recorded } = coverage;
      const cells = { week: dayWords(week, true), held, recorded, share: shareCell(coverage) };
      return held > 0 ? [{ key: week, cells }] : [];
    }),
  };
}

/** Coverage of a view: the whole, by team and week, and its tables. */
export async function coverageViewOf(tx: Tx, view: RatesView) {
  const counts = await countView(tx, view);
  const { sessions, coverage, cells, silent } = select(counts, view.filters);
  const rows = coverageRows(counts, sessions);
  return {
    coverage,
    rows,
    weeks: weeksOf(counts.from, counts.to),
    reported: reportedWeeks([...cells, ...silent], counts.injuries, counts.confirmedWeeks),
    tables: [teamTable(rows), weekTable(counts, sessions)],
  };
}

export type CoverageView = Awaited<ReturnType<typeof coverageViewOf>>;
