import { DateTime } from "luxon";

/** The one place where instants meet the organisation's calendar. Days are ISO dates, times "HH:MM". */

/** The calendar date of an instant in a time zone. */
export function dayIn(timeZone: string, instant: Date = new Date()): string {
  return DateTime.fromJSDate(instant, { zone: timeZone }).toISODate() ?? "";
}

/** The local clock time of an instant, "HH:MM". */
export function timeIn(timeZone: string, instant: Date = new Date()): string {
  return DateTime.fromJSDate(instant, { zone: timeZone }).toFormat("HH:mm");
}

/**
 * The instant of a local day and time. A time that a clock change skips moves forward by the change;
 * a time that occurs twice means the first.
 */
export function instantOf(timeZone: string, day: string, time: string): Date {
  return DateTime.fromISO(`${day}T${time}`, { zone: timeZone }).toJSDate();
}

export function isTimeZone(name: string) {
  return DateTime.local({ zone: name }).isValid;
}

/** Days are plain calendar dates: counted in UTC, where no day has 23 or 25 hours. */
export function addDays(day: string, count: number): string {
  return DateTime.fromISO(day, { zone: "utc" }).plus({ days: count }).toISODate() ?? "";
}

/** Whole days from one date to another; negative when the second is earlier. */
export function daysBetween(from: string, to: string): number {
  return Math.round(
    DateTime.fromISO(to, { zone: "utc" }).diff(DateTime.fromISO(from, { zone: "utc" }), "days").days,
  );
}

const dayMilliseconds = 86_400_000;

/** Monday of the week of a day (ISO 8601). Asked of every cell of exposure, so by plain arithmetic in UTC. */
export function weekStart(day: string): string {
  const at = Date.parse(`${day}T00:00:00Z`);
  const sinceMonday = (new Date(at).getUTCDay() + 6) % 7;
  return new Date(at - sinceMonday * dayMilliseconds).toISOString().slice(0, 10);
}

/** The same date some months on; the last of the month where that date does not exist (31 January: 28 February). */
export function addMonths(day: string, count: number): string {
  return DateTime.fromISO(day, { zone: "utc" }).plus({ months: count }).toISODate() ?? "";
}
