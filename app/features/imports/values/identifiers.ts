import { accept, type Parsed, quoteCell, refuse, tidyCell } from "./parsed";

/** Longest number of an athlete. */
export const longestIdentifier = 40;
const scientific = /^\d(?:[.,]\d+)?e\+?\d+$/iu;
const textFormula = /^="([^"]*)"$/u;
// biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is refused here
const control = /[\u0000-\u001F\u007F-\u009F]/u;

/** Reads an athlete’s number as the text it is: leading zeros, letters and dashes stay. */
export function parseIdentifier(text: string): Parsed<string> {
  const tidy = tidyCell(text);
  // Some exports write ="007" so that a spreadsheet keeps the zeros.
  const cell = textFormula.exec(tidy)?.[1]?.trim() ?? tidy;
  if (cell === "") return refuse("number.missing", "The number is missing.", "Fill in the athlete’s number.");
  if (control.test(cell) || cell.length > longestIdentifier) {
    return refuse(
      "number.invalid",
      `${quoteCell(text)} is not a number of an athlete.`,
      `Use at most ${longestIdentifier} letters, digits and signs on one line.`,
    );
  }
  if (scientific.test(cell)) {
    return accept(
      cell,
      `${quoteCell(text)} may have been shortened by a spreadsheet. Format the column as text and check the number.`,
    );
  }
  return accept(cell);
}
