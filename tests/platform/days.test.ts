import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { type DayOrder, formatDay, parseDay } from "~/platform/days";

const day = (text: string, order?: DayOrder) => {
  const parsed = parseDay(text, order);
  return parsed.ok ? parsed.day : `refused: ${parsed.reason}`;
};

describe("reading a day", () => {
  test.each([
    ["27 3 2014", "2014-03-27"],
    ["27/03/2014", "2014-03-27"],
    ["27.3.2014", "2014-03-27"],
    ["27-03-2014", "2014-03-27"],
    ["3/27/2014", "2014-03-27"],
    ["27 Mar 2014", "2014-03-27"],
    ["27 march 2014", "2014-03-27"],
    ["27-Mar-2014", "2014-03-27"],
    ["March 27, 2014", "2014-03-27"],
    ["1st Sept 2014", "2014-09-01"],
    ["Thu 27 Mar 2014", "2014-03-27"],
    ["Saturday, 29 March 2014", "2014-03-29"],
    ["2014-03-27", "2014-03-27"],
    ["2014/3/7", "2014-03-07"],
    ["2014-03-27T00:00:00.000Z", "2014-03-27"],
    ["27/03/2014 00:00:00", "2014-03-27"],
    ["  29 2 2012 ", "2012-02-29"],
    ["5/5/2015", "2015-05-05"],
  ])("%s is %s", (text, expected) => {
    expect(day(text)).toBe(expected);
  });

  test("03/04/2015 is never guessed", () => {
    expect(day("03/04/2015")).toContain("could be two different days");
    expect(day("3 4 2015")).toContain("could be two different days");
    expect(day("03/04/2015", "day-month-year")).toBe("2015-04-03");
    expect(day("03/04/2015", "month-day-year")).toBe("2015-03-04");
  });

  test("an order is kept even where only the other reading exists", () => {
    expect(day("3/27/2014", "day-month-year")).toContain("There is no month 27");
    expect(day("27/3/2014", "month-day-year")).toContain("There is no month 27");
  });

  test("a year-first day means the same under every order", () => {
    expect(day("2015-03-04", "month-day-year")).toBe("2015-03-04");
    expect(day("2015-03-04", "day-month-year")).toBe("2015-03-04");
    expect(day("04/03/2015", "year-month-day")).toContain("year last");
  });

  test.each([
    ["", "No day is given"],
    ["27 3 14", "four figures"],
    ["27 Mar 14", "four figures"],
    ["29 2 2015", "February 2015 has 28 days, not 29"],
    ["31 April 2015", "April 2015 has 30 days, not 31"],
    ["31/04/2015", "April 2015 has 30 days"],
    ["0 3 2014", "There is no day 0"],
    ["27 Xyz 2014", "No month is called that"],
    ["27 Ma 2014", "No month is called that"],
    ["yesterday", "not a day with its month and year"],
    ["27 3", "not a day with its month and year"],
    ["2014-03-27T10:30", "No month is called that"],
    ["27 3 1014", "not between 1900 and 2199"],
    ["41725", "not a day with its month and year"],
  ])("%j is refused: %s", (text, reason) => {
    expect(day(text)).toContain(reason);
  });

  test("every day written in any style with a year is read back", () => {
    const anyDay = fc.date({ min: new Date("1900-01-01"), max: new Date("2199-12-31"), noInvalidDate: true });
    fc.assert(
      fc.property(anyDay, fc.constantFrom("short", "long", "full", "figures"), (date, style) => {
        const iso = date.toISOString().slice(0, 10);
        expect(day(formatDay(iso, style), "day-month-year")).toBe(iso);
        expect(day(iso)).toBe(iso);
      }),
    );
  });

  test("whatever is typed is answered, never thrown", () => {
    fc.assert(
      fc.property(fc.string(), (text) => {
        const parsed = parseDay(text);
        expect(parsed.ok ? parsed.day : parsed.reason).not.toBe("");
      }),
    );
  });
});

describe("writing a day", () => {
  test.each([
    ["short", "1 Dec 2026"],
    ["long", "1 December 2026"],
    ["day-month", "1 Dec"],
    ["weekday", "Tuesday 1 December"],
    ["full", "Tuesday 1 December 2026"],
    ["figures", "1 12 2026"],
  ] as const)("%s is %s", (style, expected) => {
    expect(formatDay("2026-12-01", style)).toBe(expected);
  });

  test("September is Sep on every machine", () => {
    expect(formatDay("2014-09-27")).toBe("27 Sep 2014");
  });

  test.each(["2014-02-30", "27 3 2014", ""])("%j is not a day to write", (text) => {
    expect(() => formatDay(text)).toThrow(RangeError);
  });
});
