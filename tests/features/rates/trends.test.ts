import { describe, expect, it } from "vitest";
import { defaultFilters, type RatesFilters } from "~/features/rates/filters";
import type { Counts } from "~/features/rates/rates";
import { select } from "~/features/rates/selection";
import { textOf } from "~/features/rates/sentence";
import { monthRows, trendOf, trendWithinKinds } from "~/features/rates/trends/trends";
import { seasonRows, seasonsSoFar } from "~/features/rates/trends/trends-seasons";
import { monthsTable, soFarTable } from "~/features/rates/trends/trends-tables";
import { soFarSentence, trendNote, trendSentence } from "~/features/rates/trends/trends-words";
import { rateRatio } from "~/statistics";
import { cell, counts, several } from "./view";

const long = { id: "y", name: "2025/26", startsOn: "2025-08-01", endsOn: "2026-06-30" };

function trendFrom(made: Counts, given: Partial<RatesFilters> = {}) {
  const filters = { ...defaultFilters, ...given };
  const selection = select(made, filters);
  const material = { counts: made, selection, unit: filters.per };
  const months = monthRows(material);
  return {
    filters,
    selection,
    material,
    months,
    trend: trendOf(months),
    kinds: trendWithinKinds(months, selection, filters.per),
  };
}

function mustTrend(trend: ReturnType<typeof trendOf>) {
  if ("reason" in trend) throw new Error(trend.reason);
  return trend;
}

describe("a trend over months", () => {
  // statistics.md "Trend": slope -0.0986615 (SE 0.0383308), -9.395065 % (-15.952536 to -2.325973) [R].
  const injuries = [31, 28, 35, 24, 22, 19, 17];
  const aes = [9800, 9650, 10400, 9100, 9900, 9750, 9300];
  const at = (index: number) =>
    `2025-${String(index + 8).padStart(2, "0")}-10`.replace(
      /2025-(1[3-9])/,
      (_, month) => `2026-0${Number(month) - 12}`,
    );
  const made = counts({
    from: long.startsOn,
    to: long.endsOn,
    seasons: [long],
    sessions: [],
    cells: aes.map((value, index) => cell({ day: at(index), aes: value })),
    injuries: injuries.flatMap((count, index) => several(count, { day: at(index) })),
  });

  it("is that of R, and over a year the same to the power of twelve", () => {
    const { perMonth, perYear, months, first, last } = mustTrend(trendFrom(made).trend);
    expect([months, first, last]).toEqual([7, "Aug 2025", "Feb 2026"]);
    expect(perMonth.estimate).toBeCloseTo(1 - 0.09395065, 7);
    expect(perMonth.lower).toBeCloseTo(1 - 0.15952536, 7);
    expect(perMonth.upper).toBeCloseTo(1 - 0.02325973, 7);
    expect(perYear.estimate).toBeCloseTo(Math.exp(-0.0986615 * 12), 5);
    expect(perYear.upper).toBeCloseTo(0.97674027 ** 12, 6);
  });

  it("says what the interval says, and warns of the time of the year", () => {
    const { trend, kinds, months } = trendFrom(made);
    expect(textOf(trendSentence(trend, kinds, "The club"))).toBe(
      "Over 7 finished months with exposure, Aug 2025 to Feb 2026, the rate fell by 69 % a year: 0.31 times a year (0.12 to 0.75); the whole interval lies below no change.",
    );
    const note = textOf(trendNote(trend, kinds, [], months));
    expect(note).toContain("the interval is not widened");
    expect(note).toContain("cannot be told from the time of the year");
  });

  it("counts a gap as the time it is", () => {
    // The last month moved two months later: the same fall takes longer.
    const moved = {
      ...made,
      cells: made.cells.map((each) => (each.day === at(6) ? { ...each, day: "2026-04-10" } : each)),
      injuries: made.injuries.map((each) => (each.day === at(6) ? { ...each, day: "2026-04-10" } : each)),
    };
    const [tight, wide] = [mustTrend(trendFrom(made).trend), mustTrend(trendFrom(moved).trend)];
    expect(wide.perMonth.estimate).toBeGreaterThan(tight.perMonth.estimate);
    expect(trendFrom(moved).months.map(({ row }) => row?.injuries ?? null)).toEqual([
      31,
      28,
      35,
      24,
      22,
      19,
      null,
      null,
      17,
      null,
      null,
    ]);
  });

  it("leaves the month that still runs out, and marks it", () => {
    const running = { ...made, to: "2026-02-12" };
    const { trend, months } = trendFrom(running);
    expect(mustTrend(trend).months).toBe(6);
    expect(months.at(-1)).toMatchObject({ month: "2026-02", unfinished: true });
    expect(monthsTable(months, "aes").rows.at(-1)?.cells).toMatchObject({
      month: "Feb 2026, not finished",
      injuries: 17,
    });
    // A season that ended in the middle of a month has no month to finish.
    const ended = { ...running, seasons: [{ ...long, endsOn: "2026-02-12" }] };
    expect(trendFrom(ended).months.at(-1)?.unfinished).toBe(false);
  });

  it("says why there is none", () => {
    const none = { ...made, injuries: [] };
    expect(trendFrom(none).trend).toEqual({ reason: "no injury falls in these months" });
    const short = { ...made, cells: made.cells.slice(0, 2) };
    expect(textOf(trendSentence(trendFrom(short).trend, null, "The club"))).toContain(
      "at least three finished months with exposure, and there are 2",
    );
  });
});

describe("a trend that is only a growing share of matches", () => {
  // 4 per 1000 in training and 20 in matches in every month; matches grow from 10 to 60 % of the exposure.
  const shares = [1, 2, 3, 4, 5, 6];
  const made = counts({
    from: long.startsOn,
    to: "2026-01-31",
    seasons: [{ ...long, endsOn: "2026-01-31" }],
    cells: shares.flatMap((share, index) => {
      const day = index < 5 ? `2025-${String(index + 8).padStart(2, "0")}-10` : "2026-01-10";
      return [cell({ day, aes: 2500 * (10 - share) }), cell({ day, kind: "match", aes: 2500 * share })];
    }),
    injuries: shares.flatMap((share, index) => {
      const day = index < 5 ? `2025-${String(index + 8).padStart(2, "0")}-10` : "2026-01-10";
      return [...several(10 * (10 - share), { day }), ...several(50 * share, { day, sessionKind: "match" })];
    }),
  });

  it("is gone with the share held equal", () => {
    const { trend, kinds, material } = trendFrom(made);
    expect(mustTrend(trend).perMonth.lower).toBeGreaterThan(1);
    expect(kinds?.perMonth.estimate).toBeCloseTo(1, 10);
    expect(textOf(trendSentence(trend, kinds, "The club"))).toContain(
      "there the interval includes no change.",
    );
    expect(seasonRows(material)[0]?.matchShare).toBeCloseTo(0.35, 10);
  });
});

describe("the season so far", () => {
  const seasons = [
    { id: "a", name: "2024/25", startsOn: "2024-08-05", endsOn: "2025-06-30" },
    { id: "b", name: "2025/26", startsOn: "2025-08-01", endsOn: "2025-09-30" },
    { id: "c", name: "2026/27", startsOn: "2026-08-03", endsOn: "2027-06-30" },
  ];
  const made = counts({
    from: "2024-08-05",
    to: "2026-11-10",
    seasons,
    sessions: [],
    cells: [
      cell({ day: "2024-08-05", aes: 500 }),
      cell({ day: "2024-11-12", aes: 700 }),
      cell({ day: "2024-11-13", aes: 9999 }),
      cell({ day: "2025-09-30", aes: 800 }),
      cell({ day: "2026-11-10", aes: 1000 }),
    ],
    injuries: [
      ...several(5, { day: "2024-11-12" }),
      ...several(50, { day: "2024-11-13" }),
      ...several(8, { day: "2026-08-03" }),
    ],
  });
  const { material, filters } = trendFrom(made);
  const rows = seasonsSoFar(material, "c", "2026-11-10");

  it("is held against as many days from the first of each earlier season, or to its end", () => {
    expect(rows.map(({ season, from, to, days }) => [season.name, from, to, days])).toEqual([
      ["2026/27", "2026-08-03", "2026-11-10", 100],
      ["2025/26", "2025-08-01", "2025-09-30", 61],
      ["2024/25", "2024-08-05", "2024-11-12", 100],
    ]);
    expect(rows.map(({ row }) => [row.injuries, row.denominator])).toEqual([
      [8, 1000],
      [0, 800],
      [5, 1200],
    ]);
    expect(rows[2]?.ratio).toEqual(rateRatio({ events: 8, exposure: 1000 }, { events: 5, exposure: 1200 }));
  });

  it("says so, without a ratio that has no end", () => {
    expect(textOf(soFarSentence(rows, filters))).toBe(
      "In its first 100 days season 2026/27 had 8 injuries in 1,000 exposures, 8.0 per 1000 (3.5 to 15.8). Season 2025/26 gives no rate for the same days to compare with.",
    );
    expect(JSON.stringify(soFarTable(rows, "aes"))).not.toMatch(/NaN|Infinity/);
    expect(textOf(soFarSentence(seasonsSoFar(material, "a", "2024-11-12"), filters))).toContain(
      "no earlier season",
    );
  });
});
