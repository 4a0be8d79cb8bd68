import { dayWords } from "../periods";
import { type Cell, figure, type TableColumn, type TableData } from "../tables";
import type { Prevalence, PrevalencePart, PrevalenceParts, PrevalenceWeek } from "./prevalence";
import { athletesIn } from "./prevalence-words";

/** The tables of prevalence. Pure. */

const ofRoster = "% of the day's roster";

const text = (id: string, header: string): TableColumn => ({ id, header, kind: "text" });
const percent = (id: string, header: string, bar = false): TableColumn => ({
  ...{ id, header: `${header}, %`, kind: "figure", form: "rate", unit: ofRoster, bar },
});
const mean = (id: string, header: string): TableColumn => ({ id, header, kind: "number", decimals: 1 });

const roster = mean("roster", "Roster, average day");

const limitedColumns: TableColumn[] = [
  roster,
  { id: "affected", header: "Different athletes", kind: "count" },
  percent("limited", "Not fully available", true),
];

const share = (row: Prevalence, part: PrevalencePart): Cell => figure(row.shares[part], row.unstable);

const limitedCells = (row: Prevalence): Record<string, Cell> => ({
  roster: row.roster,
  affected: row.affected,
  limited: share(row, "limited"),
});

const weekName = ({ week, finished }: PrevalenceWeek) =>
  finished ? dayWords(week, true) : `${dayWords(week, true)}, not finished`;

const empty = "Nobody on a roster in this season yet.";
/** The case definition of injuries is not that of prevalence: its files say so. */
const counts = "athletes not fully available on a day, of every cause";

const partWords = {
  unavailable: "Unavailable",
  modified: "Modified",
  injury: "Injury",
  illness: "Illness",
  other: "Other",
} as const;
type SplitPart = keyof typeof partWords;
const states = ["unavailable", "modified"] as const;
const causes = ["injury", "illness", "other"] as const;

type Line = { key: string; name: string; row: Prevalence; href?: string; total?: boolean };

/** The lines of one table of athletes not fully available. */
const limitedTable = (id: string, caption: string, first: string, lines: readonly Line[]): TableData => ({
  ...{ id, caption, empty, counts },
  columns: [text("name", first), ...limitedColumns],
  rows: lines.map(({ name, row, ...rest }) => ({ ...rest, cells: { name, ...limitedCells(row) } })),
});

/** The same lines by state or by cause. */
const splitTable = (
  id: string,
  caption: string,
  first: string,
  parts: readonly SplitPart[],
  lines: readonly Line[],
): TableData => ({
  ...{ id, caption, empty, counts },
  columns: [text("name", first), roster, ...parts.map((part) => percent(part, partWords[part]))],
  rows: lines.map(({ name, row, ...rest }) => ({
    ...rest,
    cells: {
      ...{ name, roster: row.roster },
      ...Object.fromEntries(parts.map((part) => [part, share(row, part)])),
    },
  })),
});

const splitLine = (whole: Prevalence, part: SplitPart) => ({
  key: part,
  cells: { part: partWords[part], athletes: athletesIn(whole, part), share: share(whole, part) },
});

const splitOfSeason = (whole: Prevalence | null): TableData => ({
  id: "split",
  caption: "By state and by cause, over the season; an athlete with two causes on a day counts in both",
  columns: [
    text("part", "State or cause"),
    mean("athletes", "Athletes, average day"),
    percent("share", "Share", true),
  ],
  rows: whole
    ? [
        ...[...states, ...causes].map((part) => splitLine(whole, part)),
        {
          key: "limited",
          cells: { part: "Not fully available", athletes: whole.limited, share: share(whole, "limited") },
          total: true,
        },
      ]
    : [],
  empty,
  counts,
});

const tableNames = ["weeks", "groups", "groupStates", "split", "weekStates", "weekCauses"] as const;
export type PrevalenceTables = Record<(typeof tableNames)[number], TableData>;

/**
 * Every table of the view.
 * @param hrefOf the same view of one group alone, where a view can be narrowed to it
 */
export function prevalenceTables(
  { whole, weeks, groups }: PrevalenceParts,
  hrefOf: (key: string) => string | undefined,
): PrevalenceTables {
  const ofWeeks = weeks.map((row): Line => ({ key: row.week, name: weekName(row), row }));
  const ofGroups = groups.map((row): Line => {
    const href = hrefOf(row.group.key);
    return { key: row.group.key, name: row.group.label, row, ...(href ? { href } : {}) };
  });
  const total: Line[] = whole ? [{ key: "total", name: "All together", row: whole, total: true }] : [];
  const all = [...ofGroups, ...total];
  return {
    weeks: limitedTable("weeks", "Athletes not fully available, by week", "Week from", ofWeeks),
    groups: limitedTable("groups", "Athletes not fully available, over the season", "Group", all),
    groupStates: splitTable("groups-by-state", "Unavailable and modified, by group", "Group", states, all),
    split: splitOfSeason(whole),
    weekStates: splitTable(
      "weeks-by-state",
      "Unavailable and modified, by week",
      "Week from",
      states,
      ofWeeks,
    ),
    weekCauses: splitTable("weeks-by-cause", "Causes, by week", "Week from", causes, ofWeeks),
  };
}
