import { quantile as quantileOf } from "d3-array";
import { reject, requireFinite, requireNonEmpty } from "./validate";

/**
 * Quantile of type 7: linear interpolation between order statistics, the default of R and of spreadsheets.
 * Source: Hyndman RJ, Fan Y, The American Statistician 1996;50:361-365.
 * @param p from 0 to 1
 * @throws RangeError naming `values` or `p`
 */
export function quantile(values: readonly number[], p: number) {
  requireNonEmpty("values", values);
  for (const [index, value] of values.entries()) requireFinite(`values[${index}]`, value);
  if (!(p >= 0 && p <= 1)) reject("p", "from 0 to 1", p);
  return quantileOf(values, p) ?? reject("values", "a list of finite numbers");
}

/**
 * The two cuts that part values into thirds, by the same rule.
 * @throws RangeError naming `values`
 */
export function tertiles(values: readonly number[]): [number, number] {
  return [quantile(values, 1 / 3), quantile(values, 2 / 3)];
}
