/** Months and seasons of a view, as keys and as words. Days are ISO dates. Small enough for the browser. */

export type SeasonDays = { id: string; name: string; startsOn: string; endsOn: string };

/** The season that a day falls in; undefined between two seasons. */
export const seasonOf = (day: string, seasons: readonly SeasonDays[]) =>
  seasons.find(({ startsOn, endsOn }) => startsOn <= day && day <= endsOn);

/** Every month from the one of `from` to the one of `to`: "2026-09". */
export function monthsOf(from: string, to: string): string[] {
  const months: string[] = [];
  let [year, month] = [Number(from.slice(0, 4)), Number(from.slice(5, 7))];
  for (;;) {
    const key = `${year}-${String(month).padStart(2, "0")}`;
    if (key > to.slice(0, 7)) return months;
    months.push(key);
    [year, month] = month === 12 ? [year + 1, 1] : [year, month + 1];
  }
}

const names = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];

/** "2026-09" as "Sep 2026". */
export const monthWords = (month: string) => `${names[Number(month.slice(5, 7)) - 1]} ${month.slice(0, 4)}`;

/** A day as "7 Sep", with its year as "7 Sep 2026". */
export const dayWords = (day: string, withYear = false) =>
  `${Number(day.slice(8))} ${names[Number(day.slice(5, 7)) - 1]}${withYear ? ` ${day.slice(0, 4)}` : ""}`;
