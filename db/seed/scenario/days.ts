import type { Day, LocalMoment } from "./types.ts";

/**
 * Calendar days without a time zone. `Date` is used at UTC midnight only, so that neither the machine's zone
 * nor daylight saving can move a day.
 */
const DAY_MS = 86_400_000;

/** Whole days since 1970-01-01. Throws RangeError for anything but an existing ISO date. */
export function dayNumber(day: Day): number {
  const milliseconds = Date.parse(`${day}T00:00:00Z`);
  if (!/^\d{4}-\d{2}-\d{2}$/.test(day) || Number.isNaN(milliseconds)) {
    throw new RangeError(`day: "${day}" is not a calendar date like 2026-10-03`);
  }
  if (new Date(milliseconds).toISOString().slice(0, 10) !== day) {
    throw new RangeError(`day: "${day}" does not exist`);
  }
  return milliseconds / DAY_MS;
}

/** ISO date of a day number. */
export function dayOf(number: number): Day {
  return new Date(number * DAY_MS).toISOString().slice(0, 10);
}

export function addDays(day: Day, days: number): Day {
  return dayOf(dayNumber(day) + days);
}

/** Days from `from` to `to`; negative when `to` is earlier. */
export function daysBetween(from: Day, to: Day): number {
  return dayNumber(to) - dayNumber(from);
}

/** 0 = Monday to 6 = Sunday. */
export function weekdayOf(day: Day): number {
  return (dayNumber(day) + 3) % 7;
}

export function mondayOf(day: Day): Day {
  return addDays(day, -weekdayOf(day));
}

/** Completed years on a day; someone born on 29 February turns on 1 March in common years. */
export function ageOnDay(dateOfBirth: Day, on: Day): number {
  const years = Number(on.slice(0, 4)) - Number(dateOfBirth.slice(0, 4));
  return on.slice(5) < dateOfBirth.slice(5) ? years - 1 : years;
}

/** A moment so many minutes after a local start ("18:00") on a day; may run into the next day. */
export function momentAfter(day: Day, start: string, minutes: number): LocalMoment {
  const total = Number(start.slice(0, 2)) * 60 + Number(start.slice(3, 5)) + minutes;
  const onDay = addDays(day, Math.floor(total / 1440));
  const rest = ((total % 1440) + 1440) % 1440;
  return `${onDay}T${String(Math.floor(rest / 60)).padStart(2, "0")}:${String(rest % 60).padStart(2, "0")}`;
}
