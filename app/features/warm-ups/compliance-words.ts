import type { Compliance, Share } from "./compliance";

type Interval = { estimate: number; lower: number; upper: number };

/** "62 %", never broken over two lines. */
export const percent = (value: number) => `${Math.round(value * 100)}\u00a0%`;

/** "62 % (51 to 72)", the interval in the same unit. */
export const shareWords = ({ estimate, lower, upper }: Interval) =>
  `${percent(estimate)} (${Math.round(lower * 100)} to ${Math.round(upper * 100)})`;

/** "1.6 (1.3 to 2.0)". */
export const doseWords = ({ estimate, lower, upper }: Interval) =>
  `${estimate.toFixed(1)} (${lower.toFixed(1)} to ${upper.toFixed(1)})`;

/** A share in a cell with its n; why there is none. */
export const cellWords = ({ estimate, successes, trials }: Share) =>
  estimate ? { figure: shareWords(estimate), n: `${successes} of ${trials}` } : null;

/** Reasons for skipping in the order of their number. */
export const reasonsOf = ({ skipReasons }: Pick<Compliance, "skipReasons">) =>
  Object.entries(skipReasons).sort(([, a], [, b]) => b - a);
