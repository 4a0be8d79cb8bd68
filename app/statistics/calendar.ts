import { reject } from "./validate";

export type CalendarDay = { year: number; month: number; day: number; dayNumber: number };

/**
 * A day of the calendar, without hour or time zone; `dayNumber` counts days so that two can be subtracted.
 * @param iso YYYY-MM-DD
 * @throws RangeError under the argument's own name
 */
export function parseDay(name: string, iso: string): CalendarDay {
  const parts = /^(\d{4})-(\d{2})-(\d{2})$/.exec(iso);
  if (parts === null) return reject(name, "a date such as 2025-03-09", iso);
  const [year, month, day] = [Number(parts[1]), Number(parts[2]), Number(parts[3])];
  const time = Date.UTC(year, month - 1, day);
  // Date turns 30 February into March and the year 99 into 1999; written back they differ.
  if (new Date(time).toISOString().slice(0, 10) !== iso) return reject(name, "a day of the calendar", iso);
  return { year, month, day, dayNumber: time / 86_400_000 };
}
