import Papa from "papaparse";

export type CsvValue = string | number | boolean | null | undefined;
export type CsvOptions = {
  /** Begin with a byte order mark, so that Excel reads UTF-8. Default false. */
  bom?: boolean;
  /** Default comma. */
  delimiter?: "," | ";" | "\t" | "|";
  /** Default CR LF, as RFC 4180 writes it. */
  newline?: "\r\n" | "\n";
};

const startsLikeFormula = /^[=+\-@\t\r\n]/u;
const plainNegativeNumber = /^-\d+(?:[.,]\d+)?$/u;
const escapedFormula = /^'(?='*[=+\-@\t\r\n])/u;

/**
 * Makes one cell safe to open in a spreadsheet: a text that begins like a formula (= + - @, tab, line
 * break) gets a leading apostrophe. A plain negative number stays a number. A text that already begins
 * with an apostrophe before a formula gets one more, so that `unescapeCsvCell` gives back the original.
 */
export function escapeCsvCell(value: CsvValue) {
  if (value === null || value === undefined) return "";
  if (typeof value !== "string") return String(value);
  if (plainNegativeNumber.test(value)) return value;
  return startsLikeFormula.test(value) || escapedFormula.test(value) ? `'${value}` : value;
}

/** Takes off the apostrophe that `escapeCsvCell` (or a spreadsheet) put before a formula character. */
export function unescapeCsvCell(text: string) {
  return text.replace(escapedFormula, "");
}

/**
 * Writes rows as RFC 4180 text: cells are escaped against formulas and quoted where they hold a delimiter
 * of any common dialect, a quotation mark or a line break. Every row ends with the newline.
 */
export function writeCsv(rows: readonly (readonly CsvValue[])[], options: CsvOptions = {}) {
  const newline = options.newline ?? "\r\n";
  const start = options.bom ? Papa.BYTE_ORDER_MARK : "";
  if (rows.length === 0) return start;
  // A lone empty cell would leave an empty line, which readers pass over: its quotation marks keep the row.
  const lone = rows.every((row) => row.length === 1);
  const needsQuotes = (value: unknown) => /[,;\t|"\r\n]/u.test(String(value)) || (lone && value === "");
  const text = Papa.unparse(
    rows.map((row) => row.map(escapeCsvCell)),
    // A semicolon inside a comma file would split into a second cell in half of Europe: quote it as well.
    { delimiter: options.delimiter ?? ",", newline, quotes: needsQuotes },
  );
  return `${start}${text}${newline}`;
}
