import { parseDay } from "./calendar";
import { reject, requireCount } from "./validate";

export type TimeLoss = { days: number; ongoing: boolean };

/**
 * Days on which the athlete could not take full part: from the day after onset to the day before full
 * availability (onset is day 0; back the next day is 0 days). While not fully available on `asOf`, that day counts
 * too: the days are then the least the injury can still end with, ongoing, and censored in medians.
 * @param onset YYYY-MM-DD
 * @param fullOn first day of full availability, YYYY-MM-DD; null while open. After `asOf` it is a plan: ongoing
 * @param asOf the day up to which the records go, YYYY-MM-DD
 * @throws RangeError naming `onset`, `fullOn` or `asOf`
 */
export function timeLoss({
  onset,
  fullOn,
  asOf,
}: {
  onset: string;
  fullOn: string | null;
  asOf: string;
}): TimeLoss {
  const start = parseDay("onset", onset).dayNumber;
  const today = parseDay("asOf", asOf).dayNumber;
  if (today < start) reject("asOf", `on or after onset (${onset})`, asOf);
  const end = fullOn === null ? null : parseDay("fullOn", fullOn).dayNumber;
  if (end !== null && end < start) reject("fullOn", `on or after onset (${onset})`, fullOn);
  if (end === null || end > today) return { days: today - start, ongoing: true };
  return { days: Math.max(0, end - start - 1), ongoing: false };
}

export const severityBands = ["0", "1-7", "8-28", ">28"] as const;
export type SeverityBand = (typeof severityBands)[number];

/**
 * Severity: the band of a number of days of time loss.
 * @throws RangeError naming `days`
 */
export function severityBand(days: number): SeverityBand {
  requireCount("days", days);
  if (days === 0) return "0";
  if (days <= 7) return "1-7";
  return days <= 28 ? "8-28" : ">28";
}
