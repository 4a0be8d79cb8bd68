import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { linearAxis, ratioAxis, shownTicks } from "~/ui/charts/interval-axis";
import { IntervalChart } from "~/ui/charts/interval-chart";
import { describePoint, layoutRows, wordLine } from "~/ui/charts/interval-rows";
import { intervalWords } from "~/ui/charts/interval-words";
import { headings, PeriodGrid, rowWords } from "~/ui/charts/period-grid";
import { count, draw, expectSound, figure, words } from "./chart-markup";

const rate = (estimate: number, lower: number, upper: number) => ({ estimate, lower, upper });
const none = Number.POSITIVE_INFINITY;

describe("ratios", () => {
  test("a limit that is none is said so", () => {
    expect(intervalWords({ lower: 0.5, upper: 2 }, 2, true)).toBe("0.50 to 2.00");
    expect(intervalWords({ lower: 0.5, upper: none }, 2, true)).toBe("from 0.50, no upper limit");
    expect(intervalWords({ lower: 0, upper: 2 }, 2, true)).toBe("no lower limit, up to 2.00");
    expect(intervalWords({ lower: 0, upper: none }, 2, true)).toBe("no lower limit, no upper limit");
    // A rate of 0 has a lower limit of 0 and nothing less.
    expect(intervalWords({ lower: 0, upper: 2 }, 1)).toBe("0.0 to 2.0");
    expect(describePoint({ series: 1, label: "girls", rate: rate(none, 2, none) }, 1)).toBe(
      "girls: no figure",
    );
  });

  test("the axis has powers of two, always 1 among them, and holds every estimate", () => {
    const positive = fc.double({ min: 1e-4, max: 1e4, noNaN: true });
    fc.assert(
      fc.property(fc.array(positive, { maxLength: 8 }), (estimates) => {
        const axis = ratioAxis({ rates: estimates.map((estimate) => rate(estimate, 0, none)) });
        expect(axis.ticks).toContain(1);
        expect(axis.ticks.length).toBeLessThanOrEqual(10);
        for (const tick of axis.ticks) expect(Number.isInteger(Math.log2(tick))).toBe(true);
        for (const width of [60, 220, 600]) expect(shownTicks(axis, width)).toContain(1);
        for (const estimate of estimates) {
          expect(estimate).toBeGreaterThan(axis.min);
          expect(estimate).toBeLessThan(axis.max);
        }
      }),
    );
    expect(ratioAxis({ rates: [rate(1.6, 0.98, 2.6)] }).ticks).toEqual([0.5, 1, 2, 4]);
    expect(ratioAxis({ rates: [], max: 4 }).ticks).toEqual([0.25, 0.5, 1, 2, 4]);
  });

  test("an upper limit of Infinity does not take a linear axis with it", () => {
    expect(linearAxis({ rates: [rate(3, 1, none), rate(4, 2, 9)] }).max).toBe(10);
  });

  const chart = (points: { estimate: number; lower: number; upper: number }[]) =>
    draw(
      <IntervalChart
        groups={[
          { label: "soccer", points: points.map((one) => ({ series: 1, label: "girls", rate: one })) },
        ]}
        unit="times"
        title="Ratios"
        decimals={2}
        logarithmic
      />,
    );

  test("equal factors are equal distances, with the reference at 1", () => {
    const html = chart([rate(0.5, 0.25, 1), rate(2, 1, 4)]);
    const spots = [...html.matchAll(/<g transform="translate\(([\d.]+),[\d.]+\)"><circle/g)].map((one) =>
      Number(one[1]),
    );
    const reference = Number(html.match(/<line x1="([\d.]+)"[^>]*stroke-dasharray="2 4"/)?.[1]);
    expect(spots).toHaveLength(2);
    expect(reference - (spots[0] ?? 0)).toBeCloseTo((spots[1] ?? 0) - reference, 4);
    expect(reference).toBeGreaterThan(spots[0] ?? 0);
  });

  test("what goes on beyond the axis ends in an arrow", () => {
    const arrows = (html: string) =>
      (html.match(/<path d="M[\d.-]+ [\d.]+L[\d.-]+ [\d.]+L[^"]*" fill="none"/g) ?? []).length;
    expect(arrows(chart([rate(1, 0.5, 2)]))).toBe(0);
    expect(arrows(chart([rate(1, 0.5, none)]))).toBe(1);
    expect(arrows(chart([rate(1, 0, none)]))).toBe(2);
    expect(chart([rate(1, 0.5, none)])).toContain("girls 1.00 (from 0.50, no upper limit)");
  });

  test("whatever it is given, it is drawn, on either axis", () => {
    const point = fc.record({
      series: fc.constantFrom(1 as const, 2 as const),
      label: words,
      rate: fc.option(fc.record({ estimate: figure, lower: figure, upper: figure }), { nil: null }),
      unstable: fc.boolean(),
    });
    const group = fc.record({ label: words, points: fc.array(point, { maxLength: 4 }) });
    fc.assert(
      fc.property(
        fc.array(group, { maxLength: 5 }),
        fc.boolean(),
        fc.option(figure, { nil: undefined }),
        (groups, logarithmic, max) => {
          expectSound(draw(<IntervalChart {...{ groups, logarithmic, max }} unit="times" title="Any" />));
        },
      ),
      { numRuns: 60 },
    );
  });

  test("long words are wrapped, and no line meets another", () => {
    const groups = Array.from({ length: 4 }, () => ({
      label: "a league of the northern counties with a very long name, second teams only",
      points: [
        { series: 1 as const, label: "girls and mixed teams", rate: rate(1.2, 0.4, none), unstable: true },
      ],
    }));
    for (const narrow of [true, false]) {
      const { headings: names, rows, height } = layoutRows(groups, narrow, 2, true);
      for (const [index, name] of names.entries()) {
        expect(name.lines.length).toBeGreaterThan(1);
        const bottom = name.y + (name.lines.length - 1) * wordLine;
        const next = narrow
          ? (rows[index]?.y ?? 0) - 14 - ((rows[index]?.lines.length ?? 1) - 1) * wordLine
          : (names[index + 1]?.y ?? height);
        expect(next - bottom).toBeGreaterThanOrEqual(15);
      }
      expect(rows.at(-1)?.y).toBeLessThan(height);
    }
  });
});

describe("PeriodGrid on the server", () => {
  const periods = ["Aug", "Aug", "Aug", "Aug", "Sep", "Sep"].map((short, index) => ({
    short,
    long: `week ${index + 1}`,
  }));
  const rows = [
    {
      label: "Girls under 14",
      href: "/teams/1",
      cells: [
        { share: 0.5, text: "2 of 4" },
        null,
        { share: 0, text: "0 of 3" },
        { share: 1, text: "3 of 3" },
      ],
    },
    { label: "Women", cells: [] },
  ];
  const html = draw(
    <PeriodGrid rows={rows} periods={periods} title="Warm-ups by week" emptyText="No session yet." />,
  );

  test("can be reached by keys and says each row once", () => {
    expect(html).toMatch(/<section[^>]*aria-label="Warm-ups by week"[^>]*tabindex="0"/i);
    expect(html).toContain('aria-label="week 1: 2 of 4; week 3: 0 of 3; week 4: 3 of 3"');
    expect(html).toContain('aria-label="No session yet."');
    expect(html).toMatch(/<a [^>]*href="\/teams\/1"[^>]*>Girls under 14<\/a>/);
    expect(rowWords({ label: "x", cells: [null] }, periods, "nothing")).toBe("nothing");
  });

  test("a stroke is filled as far as its share, and a dot stands where nothing took place", () => {
    const filled = [...html.matchAll(/height="([\d.]+)" rx="[\d.]+" fill="var\(--color-lagoon\)"/g)];
    expect(filled.map((one) => Number(one[1]))).toEqual([13, 26]);
    // Three cells of the first row and all six of the second have nothing.
    expect(count(html, "<circle")).toBe(3 + 6);
  });

  test("a month is named where it begins", () => {
    expect(headings(periods)).toEqual([0, 4]);
    const weeks = (short: string, count: number) => Array.from({ length: count }, () => ({ short }));
    expect(headings([...weeks("Jul", 1), ...weeks("Aug", 5), ...weeks("Sep", 4)])).toEqual([1, 6]);
    expect(headings([...weeks("Jul", 4), ...weeks("Aug", 1)])).toEqual([0, 4]);
    expect(headings([{ short: "Aug" }, { short: "Sep" }, { short: "Oct" }, { short: "Nov" }])).toEqual([
      0, 3,
    ]);
  });

  test("without rows it says what belongs there, and whatever it is given, it is drawn", () => {
    expect(
      draw(<PeriodGrid rows={[]} periods={periods} title="Empty" emptyText="No session yet." />),
    ).toContain("No session yet.");
    const cell = fc.option(fc.record({ share: figure, text: words }), { nil: null });
    fc.assert(
      fc.property(
        fc.array(fc.record({ label: words, cells: fc.array(cell, { maxLength: 60 }) }), { maxLength: 5 }),
        fc.array(fc.record({ short: words, long: words }), { maxLength: 55 }),
        (all, names) => {
          expectSound(draw(<PeriodGrid rows={all} periods={names} title="Any" emptyText="nothing" />));
        },
      ),
      { numRuns: 60 },
    );
  });
});
