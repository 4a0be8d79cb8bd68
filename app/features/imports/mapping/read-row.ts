import type { Parsed } from "../values/parsed";
import type { ColumnDefinition, ColumnMapping } from "./map-headers";

/** One thing wrong with a row, with the cell it stands in. `column` is the column's label. */
export type RowRejection = { column: string; cell: string; code: string; reason: string; mend: string };
/** Something to look at in a row that is imported all the same. */
export type RowWarning = { column: string; cell: string; warning: string };
export type RowResult<Value> =
  | { ok: true; value: Value; warnings: RowWarning[] }
  | { ok: false; rejected: RowRejection[]; warnings: RowWarning[] };

/** Reads the cells of one row by a mapping and gathers everything wrong with it, not only the first. */
export class RowReader<Key extends string> {
  readonly rejected: RowRejection[] = [];
  readonly warnings: RowWarning[] = [];
  private readonly cells: readonly string[];
  private readonly mapping: ColumnMapping<Key>;
  private readonly labels: ReadonlyMap<string, string>;

  constructor(cells: readonly string[], mapping: ColumnMapping<Key>, labels: ReadonlyMap<string, string>) {
    this.cells = cells;
    this.mapping = mapping;
    this.labels = labels;
  }

  /** The cell as it stands; undefined when the file has no such column. */
  cell(key: Key): string | undefined {
    const index = this.mapping[key];
    return index === undefined ? undefined : (this.cells[index] ?? "");
  }

  /** The value of a cell: undefined without the column, null for an empty cell or a rejected one. */
  read<T>(key: Key, parse: (text: string) => Parsed<T>): T | null | undefined {
    const cell = this.cell(key);
    if (cell === undefined) return undefined;
    if (cell.trim() === "") return null;
    return this.take(key, parse(cell));
  }

  /** The same where the row is worth nothing without it: an empty or missing cell rejects the row. */
  require<T>(key: Key, parse: (text: string) => Parsed<T>): T | null {
    const value = this.read(key, parse);
    if (value !== null && value !== undefined) return value;
    const cell = this.cell(key) ?? "";
    if (cell.trim() !== "") return null;
    const label = this.label(key);
    const name = label.toLowerCase();
    this.reject(key, `${key}.missing`, `The ${name} is missing.`, `Fill in the ${name}.`);
    return null;
  }

  /** Notes the outcome of a parser and gives its value, or null when it refused. */
  take<T>(key: Key, parsed: Parsed<T>): T | null {
    if (!parsed.ok) {
      this.reject(key, parsed.code, parsed.reason, parsed.mend);
      return null;
    }
    if (parsed.warning !== undefined) this.warn(key, parsed.warning);
    return parsed.value;
  }

  reject(key: Key, code: string, reason: string, mend: string) {
    this.rejected.push({ column: this.label(key), cell: this.cell(key) ?? "", code, reason, mend });
  }

  warn(key: Key, warning: string) {
    this.warnings.push({ column: this.label(key), cell: this.cell(key) ?? "", warning });
  }

  private label(key: Key) {
    return this.labels.get(key) ?? key;
  }
}

/** The labels of a definition's columns, once per import and not once per row. */
export function labelColumns(columns: readonly ColumnDefinition[]): ReadonlyMap<string, string> {
  return new Map(columns.map(({ key, label }) => [key, label]));
}
