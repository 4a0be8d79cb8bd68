import { formatRatio } from "./figures";
import type { Part } from "./sentence";

/** The pieces that computed sentences of the rates are put together from. */

export const plain = (text: string): Part => ({ text, as: "plain" });
export const strong = (text: string): Part => ({ text, as: "strong" });
export const interval = (text: string): Part => ({ text, as: "interval" });
export const attention = (text: string): Part => ({ text, as: "attention" });

/** Limits of a ratio: "(1.1 to 2.4)", "(0.9, no upper limit)". */
export const ratioLimits = ({ lower, upper }: { lower: number; upper: number }) =>
  upper === Infinity
    ? `(${formatRatio(lower)}, no upper limit)`
    : `(${formatRatio(lower)} to ${formatRatio(upper)})`;

/** A ratio as an estimate that may have no end: "1.6 times", "more often by a factor without an upper limit". */
export const timesWords = (ratio: number) =>
  ratio === Infinity ? "without any to compare with" : `${formatRatio(ratio)} times`;

/** A probability with the digits it can bear: 0.34, 0.006, "below 0.001". */
export function chanceWords(p: number): string {
  if (p < 0.001) return "below 0.001";
  return p < 0.1 ? String(Number(p.toPrecision(1))) : p.toFixed(2);
}

/** A number that need not be whole, such as expected injuries: 2.1, 0.04, 31. */
export const amountWords = (value: number) => {
  if (value >= 10) return String(Math.round(value));
  return value >= 0.95 || value === 0 ? value.toFixed(1) : String(Number(value.toPrecision(1)));
};

/** "A, B and C". */
export const listWords = (names: readonly string[]) =>
  names.length < 2 ? names.join("") : `${names.slice(0, -1).join(", ")} and ${names.at(-1)}`;
