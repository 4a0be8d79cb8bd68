import { FileRefusal } from "../refusal";
import { emptyFile } from "./detect-text";
import { isBlank, parseCells, trimTrailing } from "./parse-cells";
import { RecordSplitter, type SplitRecord } from "./split-records";

export const delimiters = [",", ";", "\t", "|"] as const;
export type Delimiter = (typeof delimiters)[number];
export type Newline = "\r\n" | "\n" | "\r" | "mixed";
export type Dialect = {
  delimiter: Delimiter;
  /** For showing only: the reader takes every kind of line break, mixed too. */
  newline: Newline;
  /** The file begins with a spreadsheet's `sep=` line. */
  separatorLine: boolean;
  /** What stands above the header, line by line, without the `sep=` line and blank lines. */
  titleLines: string[];
  /** Line of the file, from 1, on which the header row begins. */
  headerLine: number;
  header: string[];
  confidence: "certain" | "likely" | "unsure";
  /** Other delimiters under which the text is a table too, best first. */
  alternatives: Delimiter[];
};
export type DialectOptions = {
  /** Says whether a cell is a known column heading; makes finding the header row sure. */
  isHeaderWord?: (cell: string) => boolean;
  /** Set when a person chose: the delimiter, or the line of the header. */
  delimiter?: Delimiter;
  headerLine?: number;
  /** False when the text is only the head of the file, so that its last row may be cut. Default true. */
  complete?: boolean;
};

type Table = {
  delimiter: Delimiter;
  records: SplitRecord[];
  rows: string[][];
  columns: number;
  score: number;
  /** Why reading stopped under this delimiter; what came before it still counts. */
  refusal: FileRefusal | undefined;
};
type Row = { record: SplitRecord; cells: string[] };

const sampleRows = 200;
const headerSearchRows = 40;
const pieceLength = 256;
const separatorLinePattern = /^\uFEFF?"?sep=(.)"?[,;\t|]*(?:\r\n|\r|\n|$)/iu;
const dataCell = /^[+-]?[\d\s.,:/%-]*\d[\d\s.,:/%-]*$|@/u;

/**
 * Finds delimiter, `sep=` line, title lines and header row in the beginning of a decoded file.
 * Throws `FileRefusal` for an empty text and for quotation marks that never close under any delimiter.
 */
export function detectDialect(text: string, options: DialectOptions = {}): Dialect {
  if (text.trim() === "") throw emptyFile();
  const separator = separatorLinePattern.exec(text);
  const declared = delimiters.find((delimiter) => delimiter === separator?.[1]);
  const tables = readTables(text, options);
  const best = chooseTable(tables, options.delimiter, declared);
  const refusal =
    best.refusal ?? (best.score > 0 ? undefined : tables.find((table) => table.refusal)?.refusal);
  if (refusal) throw refusal;
  const rows = best.records
    .map((record, index) => ({ record, cells: best.rows[index] ?? [] }))
    .slice(separator ? 1 : 0)
    .filter(({ cells }) => !isBlank(cells));
  const header = findHeader(rows, best.columns, options);
  return {
    delimiter: best.delimiter,
    newline: detectNewline(best.records, text),
    separatorLine: separator !== null,
    titleLines: rows.slice(0, rows.indexOf(header)).map(({ record }) => withoutEmptyCells(record.text)),
    headerLine: header.record.lineNumber,
    header: trimTrailing(header.cells).map((cell) => cell.trim()),
    confidence: rateConfidence(best, tables, declared),
    alternatives: tables
      .filter((table) => table !== best && table.columns > 1)
      .map((table) => table.delimiter),
  };
}

function readTables(text: string, options: DialectOptions): Table[] {
  return delimiters.map((delimiter) => readTable(text, delimiter, options)).sort((a, b) => b.score - a.score);
}

/** Splits piece by piece, so that the rows before a refusal are known. */
function splitSample(text: string, delimiter: Delimiter, complete: boolean) {
  const splitter = new RecordSplitter(delimiter);
  const records: SplitRecord[] = [];
  try {
    for (let at = 0; at < text.length; at += pieceLength) {
      records.push(...splitter.push(text.slice(at, at + pieceLength)));
    }
    if (complete) records.push(...splitter.end());
    else if (records.length === 0) records.push({ text, lineNumber: 1, lastLine: 1, strayQuote: false });
    return { records, refusal: undefined };
  } catch (error) {
    if (error instanceof FileRefusal) return { records, refusal: error };
    throw error;
  }
}

function readTable(text: string, delimiter: Delimiter, options: DialectOptions): Table {
  const { records, refusal } = splitSample(text, delimiter, options.complete !== false);
  const sample = records.slice(0, sampleRows);
  const rows = parseCells(sample, delimiter);
  const widths = rows.filter((cells) => !isBlank(cells)).map((cells) => trimTrailing(cells).length);
  const columns = commonest(rows.filter((cells) => !isBlank(cells)).map((cells) => cells.length));
  const agreeing = widths.filter((width) => width > 1 && width <= columns).length;
  const share = columns > 1 && widths.length > 0 ? agreeing / widths.length : 0;
  const known = options.isHeaderWord
    ? Math.max(0, ...rows.slice(0, headerSearchRows).map((cells) => countKnown(cells, options)))
    : 0;
  // Agreement between rows first, more columns next; known headings outweigh commas inside names.
  const score = share * Math.log2(columns + 1) + known;
  return { delimiter, records: sample, rows, columns, score, refusal };
}

function chooseTable(tables: Table[], chosen: Delimiter | undefined, declared: Delimiter | undefined): Table {
  const byPerson = tables.find((table) => table.delimiter === chosen);
  if (byPerson) return byPerson;
  const bySeparatorLine = tables.find((table) => table.delimiter === declared && table.columns > 1);
  const best = bySeparatorLine ?? tables[0];
  if (!best) throw emptyFile();
  // Nothing is split by anything: one column, and comma is as good as any.
  return best.score > 0 ? best : (tables.find((table) => table.delimiter === ",") ?? best);
}

function findHeader(rows: Row[], columns: number, options: DialectOptions): Row {
  const first = rows[0];
  if (!first) throw emptyFile();
  const chosen = rows.find(({ record }) => record.lineNumber === options.headerLine);
  if (chosen) return chosen;
  const candidates = rows.slice(0, headerSearchRows);
  const known = candidates.map(({ cells }) => countKnown(cells, options));
  const most = Math.max(...known);
  if (most >= Math.min(2, columns)) return candidates[known.indexOf(most)] ?? first;
  const wide = candidates.filter(({ cells }) => countFilled(cells) >= Math.max(1, columns * 0.6));
  const worded = wide.filter(({ cells }) => !cells.some((cell) => dataCell.test(cell.trim())));
  // A title with a comma in it fills fewer cells than the header below it.
  const fullest = Math.max(...worded.map(({ cells }) => countFilled(cells)));
  return worded.find(({ cells }) => countFilled(cells) === fullest) ?? wide[0] ?? first;
}

function withoutEmptyCells(line: string) {
  return line.replace(/[,;\t|\s]+$/u, "").trim();
}

function countKnown(cells: readonly string[], options: DialectOptions) {
  return options.isHeaderWord ? cells.filter((cell) => options.isHeaderWord?.(cell)).length : 0;
}

function countFilled(cells: readonly string[]) {
  return cells.filter((cell) => cell.trim() !== "").length;
}

function commonest(numbers: readonly number[]) {
  const counts = new Map<number, number>();
  for (const number of numbers) counts.set(number, (counts.get(number) ?? 0) + 1);
  const [best] = [...counts].sort((a, b) => b[1] - a[1] || b[0] - a[0]);
  return best?.[0] ?? 0;
}

/** Looks only at the breaks between records, not at those inside quoted cells. */
function detectNewline(records: readonly SplitRecord[], text: string): Newline {
  const kinds = new Set<Newline>();
  let at = 0;
  for (const record of records) {
    at += record.text.length;
    const kind = text.startsWith("\r\n", at) ? "\r\n" : text[at] === "\r" ? "\r" : "\n";
    if (at < text.length) kinds.add(kind);
    at += kind.length;
  }
  const [only] = kinds;
  if (kinds.size > 1) return "mixed";
  return only ?? "\n";
}

function rateConfidence(best: Table, tables: readonly Table[], declared: Delimiter | undefined) {
  if (best.delimiter === declared) return "certain";
  if (best.columns < 2) return "unsure";
  const rival = Math.max(0, ...tables.filter((table) => table !== best).map((table) => table.score));
  if (rival === 0) return "certain";
  return best.score >= rival * 1.5 ? "likely" : "unsure";
}
