import { FileRefusal } from "../refusal";
import type { Dialect } from "./detect-dialect";
import { emptyFile } from "./detect-text";
import { type ReadingLimits, readingLimits } from "./limits";
import { isBlank, parseCells, trimTrailing } from "./parse-cells";
import { RecordSplitter, type SplitRecord } from "./split-records";
import { isTotalsRow } from "./totals";

export type ReadRow =
  /** The header, always first. */
  | { kind: "header"; lineNumber: number; cells: string[] }
  /** A row with exactly as many cells as the header; `padded` counts the missing ones filled as empty. */
  | { kind: "row"; lineNumber: number; cells: string[]; padded: number }
  /** A row that cannot be read safely: it is rejected, the others go on. */
  | {
      kind: "problem";
      lineNumber: number;
      cells: string[];
      code: "too-many-cells" | "stray-quote";
      reason: string;
      mend: string;
    }
  /** A row left out on purpose, with a note for the report. */
  | { kind: "skipped"; lineNumber: number; cells: string[]; note: string };

type ReadingDialect = Pick<Dialect, "delimiter" | "headerLine">;

/**
 * Reads decoded text as a table, row by row, in memory that does not grow with the file. Blank rows and what
 * stands above the header are passed over; totals below the table are skipped with a note.
 * Throws `FileRefusal` when the file as a whole cannot be read: empty, header only, binary, an open quotation
 * mark, or past a limit.
 */
export async function* readRows(
  chunks: AsyncIterable<string>,
  dialect: ReadingDialect,
  limits: ReadingLimits = readingLimits,
): AsyncGenerator<ReadRow> {
  for await (const batch of readRowBatches(chunks, dialect, limits)) yield* batch;
}

/** The same rows in one array per chunk of text: quicker for large files. */
export async function* readRowBatches(
  chunks: AsyncIterable<string>,
  dialect: ReadingDialect,
  limits: ReadingLimits = readingLimits,
): AsyncGenerator<ReadRow[]> {
  const splitter = new RecordSplitter(dialect.delimiter, limits);
  const table = new TableReader(dialect, limits);
  for await (const chunk of chunks) {
    const rows = table.read(splitter.push(chunk));
    if (rows.length > 0) yield rows;
  }
  const rows = table.read(splitter.end());
  if (rows.length > 0) yield rows;
  table.finish();
}

class TableReader {
  private width = 0;
  private count = 0;
  private readonly dialect: ReadingDialect;
  private readonly limits: ReadingLimits;

  constructor(dialect: ReadingDialect, limits: ReadingLimits) {
    this.dialect = dialect;
    this.limits = limits;
  }

  read(records: SplitRecord[]): ReadRow[] {
    const below = records.filter((record) => record.lineNumber >= this.dialect.headerLine);
    const table = parseCells(below, this.dialect.delimiter);
    const rows: ReadRow[] = [];
    below.forEach((record, index) => {
      const cells = table[index] ?? [];
      if (!isBlank(cells)) rows.push(this.toRow(record, cells));
    });
    return rows;
  }

  finish() {
    if (this.width === 0) throw emptyFile();
    if (this.count > 0) return;
    throw new FileRefusal(
      "header-only",
      "The file holds a header row and nothing below it.",
      "Add the rows below the header, or check that the right sheet was exported.",
      this.dialect.headerLine,
    );
  }

  private toRow(record: SplitRecord, cells: string[]): ReadRow {
    const { lineNumber } = record;
    if (this.width === 0) {
      // Trailing columns without a heading count: what stands below them is unmapped, not one cell too many.
      this.width = cells.length;
      return { kind: "header", lineNumber, cells };
    }
    if (isTotalsRow(cells)) {
      const note = `Line ${lineNumber} holds totals and was left out.`;
      return { kind: "skipped", lineNumber, cells, note };
    }
    this.count += 1;
    if (this.count > this.limits.rows) this.refuseTooManyRows(lineNumber);
    if (record.strayQuote) return strayQuote(record, cells);
    const filled = trimTrailing(cells);
    if (filled.length > this.width) return tooManyCells(lineNumber, filled, this.width);
    const padded = Math.max(0, this.width - cells.length);
    return { kind: "row", lineNumber, cells: padTo(cells, this.width), padded };
  }

  private refuseTooManyRows(lineNumber: number): never {
    throw new FileRefusal(
      "too-many-rows",
      `The file has more than ${this.limits.rows.toLocaleString("en-GB")} rows.`,
      "Split it, for example by season or by team, and import the parts one after the other.",
      lineNumber,
    );
  }
}

function padTo(cells: string[], width: number) {
  return cells.length < width
    ? [...cells, ...Array.from({ length: width - cells.length }, () => "")]
    : cells.slice(0, width);
}

function tooManyCells(lineNumber: number, cells: string[], width: number): ReadRow {
  return {
    kind: "problem",
    lineNumber,
    cells,
    code: "too-many-cells",
    reason: `Line ${lineNumber} has ${cells.length} cells, the header has ${width}.`,
    mend: "Put a cell that holds the delimiter between quotation marks, or delete the cells too many.",
  };
}

function strayQuote(record: SplitRecord, cells: string[]): ReadRow {
  const { lineNumber, lastLine } = record;
  const lines = lastLine > lineNumber ? `Lines ${lineNumber} to ${lastLine}` : `Line ${lineNumber}`;
  return {
    kind: "problem",
    lineNumber,
    cells,
    code: "stray-quote",
    reason: `${lines}: a quotation mark stands inside a quoted cell, so it is not clear where the cell ends.`,
    mend: "Write a quotation mark inside a cell twice, or delete it.",
  };
}
