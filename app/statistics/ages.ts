import { parseDay } from "./calendar";
import { reject, requireCount, requireNonEmpty } from "./validate";

/** Completed years, both ends included; `to` null: and over. */
export type AgeBand = { from: number; to: number | null };

/**
 * Completed years on a day. Someone born on 29 February is a year older on 1 March in common years.
 * @param dateOfBirth YYYY-MM-DD
 * @param on YYYY-MM-DD: the day of the session or of the onset
 * @throws RangeError naming `dateOfBirth` or `on`
 */
export function ageOn(dateOfBirth: string, on: string) {
  const birth = parseDay("dateOfBirth", dateOfBirth);
  const day = parseDay("on", on);
  if (day.dayNumber < birth.dayNumber) reject("on", `on or after dateOfBirth (${dateOfBirth})`, on);
  const birthdayPassed = day.month > birth.month || (day.month === birth.month && day.day >= birth.day);
  return day.year - birth.year - (birthdayPassed ? 0 : 1);
}

/**
 * The band an age falls in; bands may carry a label or anything else and come back as they are.
 * @param age completed years
 * @param bands in any order, without overlaps
 * @throws RangeError naming `age` when no band holds it, or `bands` when they are empty, upside down or overlap
 */
export function ageBand<Band extends AgeBand>(age: number, bands: readonly Band[]): Band {
  requireCount("age", age);
  requireNonEmpty("bands", bands);
  for (const [index, { from, to }] of bands.entries()) {
    requireCount(`bands[${index}].from`, from);
    if (to !== null) requireCount(`bands[${index}].to`, to);
    if (to !== null && to < from) reject(`bands[${index}].to`, `at least ${from}`, to);
  }
  const [band, second] = bands.filter(({ from, to }) => age >= from && (to === null || age <= to));
  if (second !== undefined) reject("bands", `without overlaps (two hold the age ${age})`);
  return band ?? reject("age", "within one of the bands", age);
}
