import { type CsvValue, writeCsv } from "~/platform/csv";
import type { Estimate } from "~/statistics";
import type { SeriesNumber } from "~/ui/series";
import type { RatesFilters } from "./filters";

/**
 * The table beside every picture of the rates, as data: the page draws it, the CSV writes the same numbers unrounded.
 * Everything in it can be sent to the browser; a limit that does not exist is null or Infinity, never NaN.
 */
export type Figure = Omit<Estimate, "lower" | "upper"> & {
  lower: number | null;
  upper: number | null;
  unstable?: boolean;
};

/** Null is a dash; `reason` says why there is no figure. */
export type Cell = string | number | null | Figure | { reason: string };

export type FigureForm = "rate" | "ratio" | "share" | "difference";

export type TableColumn =
  | { id: string; header: string; kind: "text" }
  | { id: string; header: string; kind: "count" }
  /** A plain number that no interval goes with, such as a quartile of days. */
  | { id: string; header: string; kind: "number"; decimals: number }
  /**
   * A share of a whole that was counted, not sampled (0 to 1): it has no interval. `down`: rounded down, so that what
   * is not complete never reads 100 %.
   */
  | { id: string; header: string; kind: "percent"; down?: boolean }
  /**
   * An estimate with its interval; `bar` draws it on the column's own axis. `unit`: "per 1000 hours". `decimals`: on
   * the page, where its form would write fewer than the figure can bear.
   */
  | {
      id: string;
      header: string;
      kind: "figure";
      form: FigureForm;
      unit: string;
      bar?: boolean;
      decimals?: number;
    };

export type TableRow = {
  key: string;
  /** By column id. The first column names the row. */
  cells: Record<string, Cell>;
  /** The records behind the row. */
  href?: string;
  /** Stays below the others in any order. */
  total?: boolean;
  series?: SeriesNumber;
};

export type TableData = {
  /** Part of the CSV's address. */
  id: string;
  caption: string;
  columns: TableColumn[];
  rows: TableRow[];
  empty?: string;
  /** Where the view's case definition and sessions are not those of the table: what is counted instead. */
  counts?: string;
};

export const isFigure = (cell: Cell | undefined): cell is Figure =>
  typeof cell === "object" && cell !== null && "estimate" in cell;
export const reasonOf = (cell: Cell | undefined) =>
  typeof cell === "object" && cell !== null && "reason" in cell ? cell.reason : null;

/** A figure of a table from an estimate of the statistics. */
export const figure = (estimate: Omit<Figure, "unstable">, unstable = false): Figure => {
  const { estimate: value, lower, upper, level, method } = estimate;
  return { estimate: value, lower, upper, level, method, ...(unstable ? { unstable } : {}) };
};

/** What every row of a file says of itself, so that a figure cut out of it still carries its definition. */
export type TableContext = {
  organisation: string;
  season: string;
  from: string;
  to: string;
  team: string;
  filters: RatesFilters;
  coverage: { recorded: number; held: number };
};

const definitions: Record<RatesFilters["injuries"], string> = {
  "time-loss": "time loss of 1 day or more",
  "medical-attention": "medical attention",
};

/** The narrowing of a view in one cell: "sex=female; contact=without"; "none" when nothing is narrowed. */
export function narrowingText({ sex, sport, age, area, side, contact, onset, occurrence }: RatesFilters) {
  const parts = Object.entries({ sex, sport, age, area, side, contact, onset, occurrence }).filter(
    ([, value]) => value !== "any" && value !== "all",
  );
  return parts.length === 0 ? "none" : parts.map(([name, value]) => `${name}=${value}`).join("; ");
}

const csvName = (id: string) => id.replaceAll("-", "_");

function headOf(column: TableColumn): string[] {
  const name = csvName(column.id);
  if (column.kind !== "figure") return [name];
  return [
    name,
    ...["lower", "upper", "level", "method", "unit", "unstable"].map((part) => `${name}_${part}`),
  ];
}

const finite = (value: number | null) => (value !== null && Number.isFinite(value) ? value : null);

function valuesOf(column: TableColumn, cell: Cell | undefined): CsvValue[] {
  if (column.kind !== "figure")
    return [cell === undefined || typeof cell === "object" ? reasonOf(cell) : cell];
  if (!isFigure(cell)) return [reasonOf(cell), null, null, null, null, null, null];
  return [
    // Without an upper limit the file has none either; the method says which.
    finite(cell.estimate),
    finite(cell.lower),
    finite(cell.upper),
    cell.level,
    cell.method,
    column.unit,
    cell.unstable ? "unstable" : "no",
  ];
}

/** The table as a file: every row with its context, figures unrounded with limits, level, method and unit. */
export function writeTableCsv({ columns, rows, counts }: TableData, context: TableContext): string {
  const { filters, coverage } = context;
  const before = [
    "organisation",
    "view_season",
    "view_from",
    "view_to",
    "view_team",
    "case_definition",
    "sessions",
    "narrowed_to",
    "held_sessions_with_recorded_exposure",
    "held_sessions",
  ];
  const own = [
    context.organisation,
    context.season,
    context.from,
    context.to,
    context.team,
    counts ?? definitions[filters.injuries],
    counts ? "do not apply" : filters.sessions,
    narrowingText(filters),
    coverage.recorded,
    coverage.held,
  ];
  return writeCsv(
    [
      [...before, ...columns.flatMap(headOf)],
      ...rows.map((row) => [...own, ...columns.flatMap((column) => valuesOf(column, row.cells[column.id]))]),
    ],
    { bom: true },
  );
}
