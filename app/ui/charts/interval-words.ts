type Limits = { lower: number; upper: number };

/**
 * An interval in words: "0.5 to 2.0". An infinite upper limit, and where ratios are drawn a lower limit of 0, are no
 * limits and are said so.
 */
export function intervalWords({ lower, upper }: Limits, decimals: number, ratios = false): string {
  const hasLower = Number.isFinite(lower) && !(ratios && lower <= 0);
  const hasUpper = Number.isFinite(upper);
  const [from, to] = [lower, upper].map((limit) => limit.toFixed(decimals));
  if (hasLower && hasUpper) return `${from} to ${to}`;
  if (hasLower) return `from ${from}, no upper limit`;
  return hasUpper ? `no lower limit, up to ${to}` : "no lower limit, no upper limit";
}
