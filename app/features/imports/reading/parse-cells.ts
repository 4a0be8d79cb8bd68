import Papa from "papaparse";
import type { SplitRecord } from "./split-records";

/** Parses whole records into cells with the CSV parser; one array of cells per record, in order. */
export function parseCells(records: readonly SplitRecord[], delimiter: string): string[][] {
  if (records.length === 0) return [];
  const parsed = parse(records.map((record) => record.text).join("\n"), delimiter);
  if (parsed.length === records.length) return parsed;
  // A stray quotation mark can make the parser run on into the next record: then each stands alone.
  return records.map((record) => parse(record.text, delimiter)[0] ?? [""]);
}

function parse(text: string, delimiter: string) {
  return Papa.parse<string[]>(text, { delimiter, newline: "\n" }).data;
}

/** True when no cell holds anything but blanks. */
export function isBlank(cells: readonly string[]) {
  return cells.every((cell) => cell.trim() === "");
}

/** Drops the empty cells at the end, which spreadsheets write when a column was once used. */
export function trimTrailing(cells: readonly string[]) {
  let length = cells.length;
  while (length > 0 && cells[length - 1]?.trim() === "") length -= 1;
  return cells.slice(0, length);
}
