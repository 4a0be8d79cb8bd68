import { foldText } from "~/platform/fold-text";

const totalsWords = new Set(
  [
    ["total", "totals", "grand total", "sub total", "subtotal", "sum", "sums", "average", "mean"],
    ["summe", "gesamt", "insgesamt", "gesamtsumme", "zwischensumme", "durchschnitt", "mittelwert"],
    ["suma", "totales", "promedio", "razem", "lacznie", "srednia", "ogolem"],
    ["cyfanswm", "cyfartaledd"],
  ].flat(),
);
const figure = /^[\d\s.,:%h'-]+$/u;
const dayLike = /\d{1,4}[./-]\d{1,2}[./-]\d{1,4}/u;

/**
 * True for a row of totals below a table: its first filled cell says so and every other filled cell is a
 * plain figure. A person called Sum has another name or a date beside it and is not taken for one.
 */
export function isTotalsRow(cells: readonly string[]) {
  const [first, ...others] = cells.map((cell) => cell.trim()).filter((cell) => cell !== "");
  if (first === undefined || !totalsWords.has(foldText(first))) return false;
  return others.every((cell) => figure.test(cell) && !dayLike.test(cell));
}
