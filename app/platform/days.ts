/**
 * Calendar days as texts `YYYY-MM-DD`: read from what a person or a file wrote, and written for people to read.
 * A day has no time and no zone; instants are another matter and another module.
 */

/** A calendar day as `YYYY-MM-DD`. */
export type Day = string;

/** The order in which all-figure dates are meant, as told by a form or by the person who imports a file. */
export type DayOrder = "day-month-year" | "month-day-year" | "year-month-day";

export type ParsedDay = { ok: true; day: Day } | { ok: false; reason: string };

const monthNames = [
  "January",
  "February",
  "March",
  "April",
  "May",
  "June",
  "July",
  "August",
  "September",
  "October",
  "November",
  "December",
];
const weekdayNames = ["Sunday", "Monday", "Tuesday", "Wednesday", "Thursday", "Friday", "Saturday"];

const howToWrite = "Write a day like 27 3 2014 or 27 Mar 2014.";

const refuse = (reason: string): ParsedDay => ({ ok: false, reason });

/** The month of a word: its full name or its first three letters or more ("Mar", "Sept"); 0 when it is none. */
function monthFromWord(word: string): number {
  const letters = word.toLowerCase().replace(/\.$/, "");
  if (letters.length < 3) return 0;
  return monthNames.findIndex((name) => name.toLowerCase().startsWith(letters)) + 1;
}

function toDay(year: number, month: number, day: number): Day {
  return `${String(year).padStart(4, "0")}-${String(month).padStart(2, "0")}-${String(day).padStart(2, "0")}`;
}

function daysInMonth(year: number, month: number): number {
  return new Date(Date.UTC(year, month, 0)).getUTCDate();
}

function exists(year: number, month: number, day: number): boolean {
  return month >= 1 && month <= 12 && day >= 1 && day <= daysInMonth(year, month);
}

function checkDay(year: number, month: number, day: number): ParsedDay {
  if (year < 1900 || year > 2199) return refuse(`The year ${year} is not between 1900 and 2199.`);
  if (month < 1 || month > 12) return refuse(`There is no month ${month}. ${howToWrite}`);
  if (day < 1) return refuse(`There is no day ${day} in a month. ${howToWrite}`);
  const last = daysInMonth(year, month);
  if (day > last) return refuse(`${monthNames[month - 1]} ${year} has ${last} days, not ${day}.`);
  return { ok: true, day: toDay(year, month, day) };
}

/** Three groups of figures with the year last: only the order, or the lack of a second reading, decides. */
function readFigures(first: number, second: number, year: number, order?: DayOrder): ParsedDay {
  if (order === "day-month-year") return checkDay(year, second, first);
  if (order === "month-day-year") return checkDay(year, first, second);
  if (order === "year-month-day")
    return refuse("This day has its year last, and the order says that it comes first.");
  const dayFirst = exists(year, second, first);
  const monthFirst = exists(year, first, second);
  if (dayFirst && monthFirst && first !== second) {
    return refuse("This could be two different days. Write the month as a word, like 27 Mar 2014.");
  }
  return dayFirst || !monthFirst ? checkDay(year, second, first) : checkDay(year, first, second);
}

/** "27", "Mar", "2014" or "Mar", "27", "2014" in any order that names the month by a word. */
function readWords(parts: string[]): ParsedDay {
  const months = parts.map(monthFromWord);
  const at = months.findIndex((month) => month > 0);
  if (at < 0) return refuse(`No month is called that. ${howToWrite}`);
  const [first = "", second = ""] = parts.filter((_, index) => index !== at);
  const figures = [first, second].map((part) => part.replace(/(?<=^\d{1,2})(st|nd|rd|th)$/i, ""));
  if (figures.some((figure) => !/^\d+$/.test(figure))) return refuse(`This is not a day. ${howToWrite}`);
  const yearAt = figures.findIndex((figure) => figure.length === 4);
  if (yearAt < 0) return refuse("Write the year with four figures, like 2014.");
  const day = figures[1 - yearAt] ?? "";
  if (day.length > 2) return refuse(`This is not a day. ${howToWrite}`);
  return checkDay(Number(figures[yearAt]), months[at] ?? 0, Number(day));
}

/**
 * Reads a day as people and spreadsheets write it: `27 3 2014`, `27/03/2014`, `27.3.2014`, `27 Mar 2014`,
 * `March 27, 2014`, `2014-03-27`, with or without a weekday or a midnight behind it.
 *
 * It never guesses: `03/04/2015` is read only with an `order`. Without one, figures are read when a single reading
 * exists (27 cannot be a month; 5/5/2015 is one day either way). A year needs four figures. The year-first form is
 * ISO 8601 and means year, month, day whatever the order.
 *
 * `reason` is a sentence for the person, ready to stand beside a field.
 */
export function parseDay(text: string, order?: DayOrder): ParsedDay {
  const cleaned = text
    .trim()
    .replace(/[T ]00:00(:00(\.0+)?)?Z?$/, "")
    .replace(/^(sun|mon|tues?|wed(nes)?|thu(rs?)?|fri|satur|sat)(day)?\.?,?\s+/i, "");
  if (cleaned === "") return refuse(`No day is given. ${howToWrite}`);
  const parts = cleaned.split(/[\s./,\-–]+/).filter(Boolean);
  if (parts.length !== 3) return refuse(`This is not a day with its month and year. ${howToWrite}`);
  if (parts.some((part) => /[^\d]/.test(part))) return readWords(parts);

  const [first = "", second = "", third = ""] = parts;
  if (first.length === 4 && second.length <= 2 && third.length <= 2) {
    return checkDay(Number(first), Number(second), Number(third));
  }
  if (third.length !== 4) return refuse("Write the year with four figures, like 2014.");
  if (first.length > 2 || second.length > 2) return refuse(`This is not a day. ${howToWrite}`);
  return readFigures(Number(first), Number(second), Number(third), order);
}

/**
 * `short` 27 Mar 2014; `long` 27 March 2014; `day-month` 27 Mar; `weekday` Thursday 27 March;
 * `full` Thursday 27 March 2014; `figures` 27 3 2014 (what a field shows again).
 */
export type DayStyle = "short" | "long" | "day-month" | "weekday" | "full" | "figures";

/** Writes a day for people, in British order. Throws a RangeError when the text is not an existing `YYYY-MM-DD`. */
export function formatDay(day: Day, style: DayStyle = "short"): string {
  const match = /^(\d{4})-(\d{2})-(\d{2})$/.exec(day);
  const [year, month, date] = [Number(match?.[1]), Number(match?.[2]), Number(match?.[3])];
  if (!match || !exists(year, month, date)) throw new RangeError(`Not a calendar day: ${day}`);
  const name = monthNames[month - 1] ?? "";
  const weekday = weekdayNames[new Date(Date.UTC(year, month - 1, date)).getUTCDay()] ?? "";
  switch (style) {
    case "short":
      return `${date} ${name.slice(0, 3)} ${year}`;
    case "long":
      return `${date} ${name} ${year}`;
    case "day-month":
      return `${date} ${name.slice(0, 3)}`;
    case "weekday":
      return `${weekday} ${date} ${name}`;
    case "full":
      return `${weekday} ${date} ${name} ${year}`;
    case "figures":
      return `${date} ${month} ${year}`;
  }
}
