import { describe, expect, it } from "vitest";
import { defaultFilters } from "~/features/rates/filters";
import type { Counts } from "~/features/rates/rates";
import { recentSpan, surpriseOf, surprisesByTeam } from "~/features/rates/recent-weeks/recent-weeks";
import { weekCharts } from "~/features/rates/recent-weeks/recent-weeks-charts";
import {
  cusumThreshold,
  restartingCusum,
  weeksToFind,
} from "~/features/rates/recent-weeks/recent-weeks-cusum";
import { teamSurprisesTable, weeksTable } from "~/features/rates/recent-weeks/recent-weeks-tables";
import {
  lookingOften,
  recentNote,
  recentSentence,
  thresholdWords,
} from "~/features/rates/recent-weeks/recent-weeks-words";
import { select } from "~/features/rates/selection";
import { textOf } from "~/features/rates/sentence";
import { addDays } from "~/platform/clock";
import { cusumRunLength, poissonInterval } from "~/statistics";
import { cell, counts, several, tally } from "./view";

const materialOf = (made: Counts) => ({
  counts: made,
  selection: select(made, defaultFilters),
  unit: "aes" as const,
});
/** Mondays from 3 August 2026 on. */
const monday = (index: number) => addDays("2026-08-03", 7 * index);

describe("the last four weeks", () => {
  it("end yesterday, or with the season that is over", () => {
    expect(recentSpan("2027-06-30", "2026-12-01")).toEqual({ from: "2026-11-03", to: "2026-11-30" });
    expect(recentSpan("2026-06-30", "2026-12-01")).toEqual({ from: "2026-06-03", to: "2026-06-30" });
  });

  it("end with the last exposure of a season that is over", () => {
    const cells = [{ day: "2026-05-10" }, { day: "2026-05-17" }, { day: "2026-09-01" }];
    expect(recentSpan("2026-06-30", "2026-12-01", cells)).toEqual({ from: "2026-04-20", to: "2026-05-17" });
    expect(recentSpan("2027-06-30", "2026-12-01", cells).to).toBe("2026-11-30");
  });

  // 21 injuries in 10,000 exposures before and 1000 exposures now: 2.1 expected; P(X >= 7 | 2.1) 0.005862118 [R].
  const span = { from: "2026-11-02", to: "2026-11-29" };
  const before = Array.from({ length: 10 }, (_, index) => cell({ day: monday(index), aes: 1000 }));
  const made = counts({
    to: "2026-11-30",
    cells: [...before, cell({ day: "2026-11-10", aes: 1000 }), cell({ day: "2026-11-30", aes: 400 })],
    injuries: [
      ...several(21, { day: monday(4) }),
      ...several(7, { day: "2026-11-10" }),
      // Today does not count yet.
      ...several(3, { day: "2026-11-30" }),
    ],
    sessions: [tally({ day: monday(4) }), tally({ day: "2026-11-10" })],
  });

  it("are held against all earlier weeks: 7 where 2.1 were expected", () => {
    const surprise = surpriseOf(materialOf(made), span);
    expect(surprise).toMatchObject({ observed: 7, exposure: 1000, reason: null });
    expect(surprise.baseline).toEqual({ injuries: 21, weeks: 10 });
    expect(surprise.expected?.estimate).toBeCloseTo(2.1, 10);
    expect(surprise.probability).toBeCloseTo(0.005862118, 8);
    // One stratum: the limits are Garwood's of the 21, a tenth of them.
    const limits = poissonInterval(21);
    expect(surprise.expected?.lower).toBeCloseTo(limits.lower / 10, 8);
    expect(surprise.expected?.upper).toBeCloseTo(limits.upper / 10, 8);
    expect(surprise.probabilityAtUpper ?? 0).toBeGreaterThan(surprise.probability ?? 1);
  });

  it("are said with their probability and the caution about looking often", () => {
    const material = materialOf(made);
    const surprise = surpriseOf(material, span);
    const sentence = textOf(
      recentSentence(surprise, weekCharts(material, span), span, defaultFilters, "the club"),
    );
    expect(sentence).toMatch(
      /^In the four weeks from 2 Nov to 29 Nov 2026 the club had 7 injuries where 2\.1 were expected \(1\.3 to 3\.2\)\. So many or more would come by luck with a probability of 0\.006\./,
    );
    // 52 looks a year at a chance of 0.00586.
    expect(lookingOften(surprise, [])).toContain("at about 0.3 of a year's 52 looks");
    const teams = Array.from({ length: 20 }, (_, index) => ({
      ...surprise,
      teamId: `${index}`,
      name: `Team ${index}`,
    }));
    // 1 - (1 - 0.005862)^20 = 0.1109; 52 x 20 x 0.005862 = 6.1.
    expect(lookingOften(surprise, teams)).toContain(
      "one of 20 teams shows as much today is 0.11, and over a year about 6.1 of 1,040 looks would",
    );
    expect(textOf(recentNote(surprise, 1))).toContain("all 10 earlier weeks with exposure, 21 injuries");
  });

  it("weigh training and matches by what each had before", () => {
    const mixed = {
      ...made,
      cells: [
        ...made.cells,
        cell({ day: monday(1), kind: "match", aes: 500 }),
        cell({ day: "2026-11-11", kind: "match", aes: 100 }),
      ],
      injuries: [...made.injuries, ...several(10, { day: monday(1), sessionKind: "match" })],
    };
    // 1000 x 21 / 10,000 + 100 x 10 / 500.
    expect(surpriseOf(materialOf(mixed), span).expected?.estimate).toBeCloseTo(2.1 + 2, 10);
  });

  it("have nothing to expect from too little baseline", () => {
    const thin = { ...made, injuries: made.injuries.slice(18) };
    const surprise = surpriseOf(materialOf(thin), span);
    expect(surprise).toMatchObject({
      expected: null,
      probability: null,
      observed: 7,
      reason: "too little baseline: 3 injuries before these weeks",
    });
    const material = materialOf(thin);
    const sentence = textOf(
      recentSentence(surprise, weekCharts(material, span), span, defaultFilters, "the club"),
    );
    expect(sentence).toContain(
      "How many to expect cannot be said (too little baseline: 3 injuries before these weeks)",
    );
    const short = { ...made, cells: made.cells.slice(4) };
    expect(surpriseOf(materialOf(short), span).reason).toBe("too little baseline: 6 weeks before these");
  });

  it("are withheld where too little of their exposure is recorded", () => {
    const low = { ...made, sessions: [tally({ day: monday(4) }), tally({ day: "2026-11-10", recorded: 4 })] };
    expect(surpriseOf(materialOf(low), span)).toMatchObject({
      expected: null,
      reason: "withheld: only 40 % of held sessions recorded",
    });
  });

  it("read not reported for a team of which nobody said anything, never 0", () => {
    const teams = [...made.teams, { id: "u", name: "Quiet", sport: "soccer", sex: "boys" }];
    const quiet = {
      ...made,
      teams,
      cells: [...made.cells, cell({ teamId: "u", day: monday(2) }), cell({ teamId: "u", day: "2026-11-10" })],
      injuries: [...made.injuries, ...several(6, { teamId: "u", day: monday(2) })],
    };
    const rows = surprisesByTeam(materialOf(quiet), span);
    expect(rows.map(({ name, observed }) => [name, observed])).toEqual([
      ["Girls U16", 7],
      ["Quiet", null],
    ]);
    expect(teamSurprisesTable(rows, "aes", "").rows[1]?.cells.observed).toEqual({ reason: "not reported" });
    const confirmed = { ...quiet, confirmedWeeks: [{ teamId: "u", week: "2026-11-09" }] };
    expect(surprisesByTeam(materialOf(confirmed), span)[1]).toMatchObject({
      name: "Quiet",
      observed: 0,
      reason: "too little baseline: one week before these",
    });
  });
});

describe("weeks against their limits", () => {
  // statistics.md "Charts": u-bar 4.830918; month 6 8.670520 under its limit of 9.844095.
  const events = [6, 9, 5, 7, 4, 15, 8, 6];
  const aes = [1450, 1820, 1510, 1690, 1240, 1730, 1600, 1380];
  const span = { from: "2026-09-07", to: "2026-10-02" };
  const made = counts({
    to: "2026-10-02",
    cells: aes.map((value, index) => cell({ day: addDays(monday(index), 1), aes: value })),
    injuries: events.flatMap((count, index) => several(count, { day: addDays(monday(index), 2) })),
    sessions: [],
  });
  const second = [
    { id: "t", name: "A", sport: "soccer", sex: "girls" },
    { id: "u", name: "B", sport: "soccer", sex: "girls" },
  ];

  it("are the u chart's", () => {
    const charts = weekCharts(materialOf(made), span);
    const own = charts.weeks.filter(({ exposure }) => exposure > 0);
    expect(own.map((week) => week.events)).toEqual(events);
    expect(charts.centre).toBeCloseTo(4.830918, 6);
    expect(own[5]?.rate?.estimate).toBeCloseTo(8.67052, 6);
    expect(own[5]?.limits?.upper).toBeCloseTo(9.844095, 6);
    expect(own[5]?.limits?.signal).toBe(false);
    expect(own[0]?.limits?.upper).toBeCloseTo(10.306775, 6);
    // The span ends on a Friday: its week runs on.
    expect(charts.weeks.at(-1)).toMatchObject({ week: "2026-09-28", unfinished: true });
    expect(weeksTable(charts, "aes").rows.at(-1)?.cells.week).toBe("21 Sep 2026");
  });

  it("are gaps where nobody reported on a single team, and the mean keeps the exposure", () => {
    const silentWeek = {
      ...made,
      injuries: made.injuries.filter(({ day }) => day !== addDays(monday(2), 2)),
    };
    const single = weekCharts(materialOf(silentWeek), span);
    expect(single.weeks.find(({ week }) => week === monday(2))).toMatchObject({
      events: null,
      rate: null,
      limits: null,
      cusum: null,
      gap: "not reported",
    });
    expect(single.centre).toBeCloseTo((55 / 12420) * 1000, 8);
    const reported = { ...silentWeek, confirmedWeeks: [{ teamId: "t", week: monday(2) }] };
    expect(weekCharts(materialOf(reported), span).weeks.find(({ week }) => week === monday(2))).toMatchObject(
      { events: 0, gap: null },
    );
    // Of several teams a week is what those that report had.
    const two = {
      ...silentWeek,
      teams: second,
      cells: [...silentWeek.cells, cell({ teamId: "u", day: monday(0), aes: 10 })],
    };
    expect(weekCharts(materialOf(two), span).weeks.find(({ week }) => week === monday(2))).toMatchObject({
      events: 0,
      gap: null,
    });
  });

  it("have no limits from fewer than 5 injuries", () => {
    const few = { ...made, injuries: made.injuries.slice(0, 4) };
    expect(weekCharts(materialOf(few), span).centre).toBeNull();
  });
});

describe("the running sum", () => {
  // statistics.md: k = 3, h = 5; S = 0,0,0,0,0,0,1,1,3,4,7; signal at 11. Usual counts of 3 ln 2 give the level 3.
  const x = [2, 1, 3, 2, 0, 2, 4, 3, 5, 4, 6, 3];
  const usual = 3 * Math.LN2;
  const weeks = x.map((events) => ({ events, expected: usual }));

  it("is that of one level, and begins again after it crossed", () => {
    const { sums, crossings } = restartingCusum(weeks, 5);
    expect(crossings).toEqual([10]);
    const expected = [0, 0, 0, 0, 0, 0, 1, 1, 3, 4, 7, 0];
    for (const [index, value] of expected.entries()) expect(sums[index]).toBeCloseTo(value, 10);
  });

  it("stays over a week without a figure and begins again after a break", () => {
    const rising = { events: 5, expected: usual };
    const short = restartingCusum([rising, null, rising], 100).sums;
    expect(short[1]).toBeNull();
    expect(short[2]).toBeCloseTo(4, 10);
    const long = restartingCusum([rising, null, null, null, null, rising], 100).sums;
    expect(long[5]).toBeCloseTo(2, 10);
  });

  it("weighs each week by its own exposure", () => {
    const { sums } = restartingCusum(
      [
        { events: 2, expected: 0.5 * Math.LN2 },
        { events: 2, expected: 2 * Math.LN2 },
      ],
      100,
    );
    expect(sums).toEqual([expect.closeTo(1.5, 10), expect.closeTo(1.5, 10)]);
  });

  it("raises a false alarm no more often than its threshold promises", () => {
    // The exact mean run length of the Markov chain, against the bound, for whole levels and thresholds.
    for (const level of [1, 2, 3, 6]) {
      for (const threshold of [2, 4, 7]) {
        const mean = level * Math.LN2;
        const weeksBetween = cusumRunLength({ mean, reference: level, threshold });
        expect(weeksBetween).toBeGreaterThanOrEqual(Math.exp(threshold * Math.LN2));
      }
    }
    expect(Math.exp(cusumThreshold() * Math.LN2)).toBeCloseTo(104, 8);
  });

  it("finds a doubling about as soon as it says", () => {
    const exact = cusumRunLength({ mean: 2 * usual, reference: 3, threshold: 7 });
    const said = weeksToFind(usual, 7);
    expect(Math.abs(said - exact) / exact).toBeLessThan(0.25);
    const words = thresholdWords({ weeks: [{ cusum: 0 }], threshold: 6.7, usual });
    expect(words).toContain("at most once in 104 weeks");
  });
});
