import { accept, type Parsed, quoteCell, refuse, tidyCell } from "./parsed";

/** How the days of a column are written. Only a person may turn "ambiguous" or "mixed" into an order. */
export type DayOrder = "day-first" | "month-first" | "iso" | "ambiguous" | "mixed";
export type KnownDayOrder = Exclude<DayOrder, "ambiguous" | "mixed">;
type Parts = { year: number; month: number; day: number };
type Evidence = "day-first" | "month-first" | "undecided" | "same" | "clear" | "unreadable";

const weekday = /^(?:mon|tue|wed|thu|fri|sat|sun|mo|di|mi|do|fr|sa|so)[a-z]*\.?,?\s+(?=\d)/iu;
const timePart = /(?:[T\s]+|,\s*)(\d{1,2}:\d{2}(?::\d{2}(?:\.\d+)?)?(?:\s*[ap]\.?m\.?)?Z?)$/iu;
const isoDay = /^(\d{4})([-/.])(\d{1,2})\2(\d{1,2})$/u;
const numericDay = /^(\d{1,2})\s?([-/.])\s?(\d{1,2})\s?\2\s?(\d{4}|\d{2})$/u;
const wordedDayFirst = /^(\d{1,2})(?:st|nd|rd|th|\.)?[\s-]+(\p{L}{3,12})\.?,?[\s-]+(\d{4})$/u;
const wordedMonthFirst = /^(\p{L}{3,12})\.?\s+(\d{1,2})(?:st|nd|rd|th)?,?\s+(\d{4})$/u;
const months = [
  ["january", "jan", "januar", "jänner"],
  ["february", "feb", "februar"],
  ["march", "mar", "märz", "mrz"],
  ["april", "apr"],
  ["may", "mai"],
  ["june", "jun", "juni"],
  ["july", "jul", "juli"],
  ["august", "aug"],
  ["september", "sep", "sept"],
  ["october", "oct", "oktober", "okt"],
  ["november", "nov"],
  ["december", "dec", "dezember", "dez"],
];
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
const writeIso = "Write the day as year-month-day, for example 2011-02-28.";
const earliestYear = 1900;
const latestYear = 2100;

/**
 * Reads a calendar day and gives it as YYYY-MM-DD. Year-first days and months in words (English, German)
 * need no order; for 03/04/2015 the order must be known. A time of day behind the date is left out with a
 * warning unless it is midnight.
 */
export function parseDayCell(text: string, order: KnownDayOrder | undefined): Parsed<string> {
  const { day: cell, time } = splitDayAndTime(text);
  const warning = time
    ? `The time in ${quoteCell(text)} is not part of the day and was left out.`
    : undefined;
  const clear = readClearDay(cell);
  if (clear) return toDay(clear, text, warning);
  const numeric = numericDay.exec(cell);
  if (!numeric) return refuseUnreadable(text, cell);
  if (numeric[4]?.length === 2) {
    return refuse(
      "day.short-year",
      `${quoteCell(text)} has a year of two digits.`,
      "Write the year with four digits.",
    );
  }
  const [first, second, year] = [Number(numeric[1]), Number(numeric[3]), Number(numeric[4])];
  if (order === "day-first") return toDay({ year, month: second, day: first }, text, warning, "day first");
  if (order === "month-first")
    return toDay({ year, month: first, day: second }, text, warning, "month first");
  // Without an order only a day that reads the same both ways is safe.
  if (first === second) return toDay({ year, month: first, day: first }, text, warning);
  return refuse(
    "day.order",
    `${quoteCell(text)} can be read day first or month first.`,
    "Say how this column writes its days, or write them as year-month-day.",
  );
}

/** Parts a cell such as "2026-09-07 17:30" into day and time; the time is undefined at midnight too. */
export function splitDayAndTime(text: string): { day: string; time: string | undefined } {
  const cell = tidyCell(text).replace(weekday, "");
  const match = timePart.exec(cell);
  if (!match) return { day: cell, time: undefined };
  const time = match[1]?.replace(/Z$/iu, "") ?? "";
  const midnight = /^0{1,2}:00(?::00(?:\.0+)?)?$/u.test(time) || /^12:00(?::00)?\s*a/iu.test(time);
  return { day: cell.slice(0, match.index), time: midnight ? undefined : time };
}

/**
 * Collects the evidence of a column, cell by cell, in constant memory. A cell decides only by being
 * impossible in one of the orders; two cells that decide differently make the column "mixed".
 */
export class DayOrderDetector {
  private readonly counts = new Map<Evidence, number>();
  private readonly examples = new Map<Evidence, string>();

  add(text: string) {
    if (tidyCell(text) === "") return;
    const kind = judge(text);
    this.counts.set(kind, (this.counts.get(kind) ?? 0) + 1);
    if (!this.examples.has(kind)) this.examples.set(kind, text.trim());
  }

  get order(): DayOrder {
    const dayFirst = this.counts.has("day-first");
    const monthFirst = this.counts.has("month-first");
    if (dayFirst && monthFirst) return "mixed";
    if (dayFirst) return "day-first";
    if (monthFirst) return "month-first";
    if (this.counts.has("undecided")) return "ambiguous";
    // 03/03/2015 alone reads the same both ways, so the order cannot matter.
    return this.counts.has("same") ? "day-first" : "iso";
  }

  /** The first cell of each kind, to show beside the question. */
  get evidence(): { kind: Evidence; count: number; example: string }[] {
    return [...this.counts].map(([kind, count]) => ({ kind, count, example: this.examples.get(kind) ?? "" }));
  }
}

/** The order in which a whole column writes its days; never a guess. */
export function detectDayOrder(values: Iterable<string>): DayOrder {
  const detector = new DayOrderDetector();
  for (const value of values) detector.add(value);
  return detector.order;
}

function judge(text: string): Evidence {
  const { day } = splitDayAndTime(text);
  if (readClearDay(day)) return "clear";
  const numeric = numericDay.exec(day);
  if (!numeric) return "unreadable";
  const [first, second] = [Number(numeric[1]), Number(numeric[3])];
  if (first === 0 || second === 0 || first > 31 || second > 31) return "unreadable";
  if (first > 12 && second > 12) return "unreadable";
  if (first > 12) return "day-first";
  if (second > 12) return "month-first";
  return first === second ? "same" : "undecided";
}

function readClearDay(cell: string): Parts | undefined {
  const iso = isoDay.exec(cell);
  if (iso) return { year: Number(iso[1]), month: Number(iso[3]), day: Number(iso[4]) };
  const dayFirst = wordedDayFirst.exec(cell);
  if (dayFirst) return worded(dayFirst[3], dayFirst[2], dayFirst[1]);
  const monthFirst = wordedMonthFirst.exec(cell);
  return monthFirst ? worded(monthFirst[3], monthFirst[1], monthFirst[2]) : undefined;
}

function worded(year = "", name = "", day = ""): Parts | undefined {
  const month = months.findIndex((names) => names.includes(name.toLowerCase()));
  return month === -1 ? undefined : { year: Number(year), month: month + 1, day: Number(day) };
}

function toDay(parts: Parts, text: string, warning: string | undefined, reading?: string): Parsed<string> {
  const { year, month, day } = parts;
  const read = reading ? ` (read ${reading})` : "";
  if (year < earliestYear || year > latestYear) {
    return refuse(
      "day.year",
      `The year in ${quoteCell(text)} is not between ${earliestYear} and ${latestYear}.`,
      "Check the year.",
    );
  }
  if (month < 1 || month > 12) {
    return refuse(
      "day.month",
      `${quoteCell(text)}${read} has no month ${month}.`,
      `Check the day. ${writeIso}`,
    );
  }
  const last = new Date(Date.UTC(year, month, 0)).getUTCDate();
  if (day < 1 || day > last) {
    const name = monthNames[month - 1];
    return refuse(
      "day.not-in-calendar",
      `${quoteCell(text)}${read} is not a day: ${name} ${year} has ${last} days.`,
      "Correct the day or the month.",
    );
  }
  return accept(`${year}-${pad(month)}-${pad(day)}`, warning);
}

function refuseUnreadable(text: string, cell: string): Parsed<string> {
  if (/^\d{5}(?:[.,]\d+)?$/u.test(cell)) {
    return refuse(
      "day.serial",
      `${quoteCell(text)} looks like a spreadsheet’s own count of days, not a date.`,
      "Format the column as a date in the spreadsheet program and save it again.",
    );
  }
  return refuse("day.unreadable", `${quoteCell(text)} is not a day.`, writeIso);
}

function pad(number: number) {
  return String(number).padStart(2, "0");
}
