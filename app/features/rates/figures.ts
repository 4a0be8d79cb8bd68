/** How figures of rates are written: enough digits to tell them apart, never more than they can bear. */

/** Decimals for all rates of one view, by the largest of them: 12.3, 0.84, 0.069. */
export function decimalsFor(rates: readonly number[]): number {
  const largest = Math.max(0, ...rates.filter(Number.isFinite));
  if (largest >= 1 || largest === 0) return 1;
  return largest >= 0.1 ? 2 : 3;
}

/** A whole number with its thousands: 9,840. Shares of headcounts are rounded. */
export const formatCount = (value: number) => Math.round(value).toLocaleString("en-GB");

/** A rate or its limit; from 100 on without decimals, which would only pretend. */
export const formatRate = (value: number, decimals: number) =>
  value >= 100 ? formatCount(value) : value.toFixed(decimals);

/**
 * A rate ratio with two figures (0.98, 1.6, 12). A limit that rounding would put on 1 keeps as many as show on which
 * side it lies; no upper limit is written as such.
 */
export function formatRatio(value: number): string {
  if (value === Infinity) return "no upper limit";
  if (value === 0 || value === 1) return value.toFixed(value);
  if (value >= 100) return formatCount(value);
  for (let digits = 2; digits < 6; digits++) {
    const text = value.toPrecision(digits);
    if (Number(text) !== 1) return Number(text) >= 10 ? String(Number(text)) : text;
  }
  return value.toPrecision(6);
}
