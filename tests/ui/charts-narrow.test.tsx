import fc from "fast-check";
import type { ReactElement } from "react";
import { describe, expect, test, vi } from "vitest";
import { BurdenChart } from "~/ui/charts/burden-chart";
import { textWidth } from "~/ui/charts/chart-frame";
import { ControlChart } from "~/ui/charts/control-chart";
import { FunnelChart } from "~/ui/charts/funnel-chart";
import { IntervalChart } from "~/ui/charts/interval-chart";
import { LineWithBand } from "~/ui/charts/line-with-band";
import { type Box, type NamedSpot, placeNames } from "~/ui/charts/name-places";
import { narrowSideWords } from "~/ui/charts/side-rows";
import { StepCurve } from "~/ui/charts/step-curve";
import { ThresholdChart } from "~/ui/charts/threshold-chart";
import { TwoSidedBars } from "~/ui/charts/two-sided-bars";
import { count, draw, expectSound } from "./chart-markup";

/** The browser measures the box of a chart; here it is as wide as on the narrowest phone. */
vi.mock("@nivo/core", async (original) => ({
  ...(await original<typeof import("@nivo/core")>()),
  ResponsiveWrapper: ({
    children,
  }: {
    children: (size: { width: number; height: number }) => ReactElement;
  }) => children({ width: 288, height: 0 }),
}));

const weeks = Array.from({ length: 60 }, (_, index) => `${(index % 28) + 1} Aug`);
const rate = { estimate: 2, lower: 1, upper: 3 };
const long = "Girls under 16, second team, Saturdays";

describe("at 320 px", () => {
  test("every chart is drawn at the width of its box", () => {
    const one = { value: 3, label: "last season 3.0" };
    const charts = [
      <ControlChart
        key="control"
        periods={weeks}
        points={weeks.map((_, index) => ({ value: index % 5, lower: 0, upper: 6, signal: index === 7 }))}
        centre={one}
        limitLabel="99.8 % limits"
        unit="per 1000"
        title="t"
      />,
      <ThresholdChart
        key="threshold"
        periods={weeks}
        values={weeks.map((_, index) => index % 6)}
        threshold={one}
        crossings={[5]}
        unit="sum"
        title="t"
      />,
      <FunnelChart
        key="funnel"
        points={weeks.map((label, index) => ({
          label,
          exposure: index * 50,
          rate: index % 7,
          outside: index > 50,
        }))}
        centre={one}
        limits={[]}
        xUnit="exposures"
        yUnit="per 1000"
        title="t"
      />,
      <StepCurve
        key="steps"
        curves={[
          { series: 1, label: long, steps: [{ x: 3, y: 0.4, lower: 0.1, upper: 0.7 }], censored: [9] },
        ]}
        start={1}
        xUnit="days"
        yUnit="away"
        title="t"
      />,
      <BurdenChart
        key="burden"
        points={weeks.map((label, index) => ({ label, x: 1 + index, y: 1 / (1 + index), events: index }))}
        curves={[{ value: 1, label: "1 day lost" }]}
        xUnit="days"
        yUnit="per 1000"
        title="t"
      />,
      <TwoSidedBars
        key="sides"
        rows={[
          { label: long, left: { value: 1, lower: 0.5, upper: 2, events: 3, unstable: true }, right: null },
        ]}
        leftLabel="left"
        rightLabel="right"
        unit="per 1000"
        decimals={2}
        title="t"
      />,
    ];
    for (const chart of charts) {
      const html = draw(chart);
      expectSound(html);
      expect(html).toMatch(/<svg[^>]*width="288"[^>]*role="img"/);
    }
  });

  test("sixty weeks of three groups get a picture each, on one axis", () => {
    const series = ([1, 2, 3] as const).map((number) => ({
      series: number,
      label: `group ${number}`,
      points: weeks.map(() => rate),
    }));
    const many = draw(<LineWithBand periods={weeks} series={series} unit="per 1000" title="Weeks" />);
    for (const { label } of series) expect(many).toContain(`aria-label="Weeks: ${label}"`);
    const few = draw(
      <LineWithBand periods={weeks.slice(0, 10)} series={series} unit="per 1000" title="Weeks" />,
    );
    expect(count(few, 'role="img"')).toBe(1);
  });

  test("words of a side break before their interval and never leave their side", () => {
    const side = { value: 12.34, lower: 10.12, upper: 15.67, events: 4, unstable: true };
    expect(narrowSideWords(side, 2)).toEqual(["12.34", "(10.12 to 15.67)", "unstable"]);
    expect(narrowSideWords({ ...side, value: 0.5, lower: 0.3, upper: 0.8 }, 2)).toEqual([
      "0.50 (0.30 to 0.80)",
      "unstable",
    ]);
    for (const line of narrowSideWords({ ...side, upper: Number.POSITIVE_INFINITY }, 2))
      expect(textWidth(line)).toBeLessThanOrEqual(158);
  });

  test("words of an interval are wrapped, none is cut", () => {
    const html = draw(
      <IntervalChart
        groups={[
          {
            label: long,
            points: [
              {
                series: 1,
                label: "girls and mixed teams",
                rate: { estimate: 3, lower: 0.4, upper: Number.POSITIVE_INFINITY },
                unstable: true,
              },
            ],
          },
        ]}
        unit="times"
        title="t"
        logarithmic
      />,
    );
    const lines = [...html.matchAll(/<tspan[^>]*>([^<]*)</g)].map((one) => one[1] ?? "");
    expect(lines.join(" ")).toContain("girls and mixed teams 3.0 (from 0.4, no upper limit), unstable");
    for (const line of lines) expect(textWidth(line)).toBeLessThanOrEqual(300);
  });
});

describe("names of spots", () => {
  const bounds: Box = { left: 0, right: 500, top: 0, bottom: 300 };
  const spot = fc.record({
    x: fc.double({ min: 10, max: 490, noNaN: true }),
    y: fc.double({ min: 10, max: 290, noNaN: true }),
    radius: fc.double({ min: 2, max: 14, noNaN: true }),
    text: fc.constantFrom("ankle", "knee", "lower back and pelvis", "groin and hip"),
    must: fc.boolean(),
  });
  const boxOf = (named: NamedSpot, place: { x: number; y: number; anchor: string }): Box => {
    const width = textWidth(named.text) - 4;
    const left = place.x - ({ start: 0, middle: width / 2, end: width }[place.anchor] ?? 0);
    return { left, right: left + width, top: place.y - 13, bottom: place.y + 3 };
  };
  const meet = (a: Box, b: Box) =>
    a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom;

  test("never cover each other, a spot or what is taken, and stay inside", () => {
    const taken: Box = { left: 200, right: 300, top: 100, bottom: 140 };
    fc.assert(
      fc.property(fc.array(spot, { maxLength: 25 }), (spots) => {
        const boxes = placeNames(spots, bounds, [taken]).flatMap((place, index) => {
          const named = spots[index];
          return place && named ? [boxOf(named, place)] : [];
        });
        for (const [index, box] of boxes.entries()) {
          expect(meet(box, taken)).toBe(false);
          expect(box.left).toBeGreaterThanOrEqual(0);
          expect(box.right).toBeLessThanOrEqual(500);
          for (const other of boxes.slice(index + 1)) expect(meet(box, other)).toBe(false);
          for (const { x, y, radius } of spots) {
            const round = { left: x - radius, right: x + radius, top: y - radius, bottom: y + radius };
            expect(meet(box, round)).toBe(false);
          }
        }
      }),
      { numRuns: 50 },
    );
  });

  test("what must be named is named further off, what need not is left out", () => {
    const crowd = Array.from({ length: 9 }, (_, index) => ({
      x: 250 + (index % 3) * 12,
      y: 150 + Math.floor(index / 3) * 12,
      radius: 6,
      text: "ankle",
      must: index === 4,
    }));
    const places = placeNames(crowd, bounds);
    expect(places[4]?.far).toBe(true);
    const without = placeNames(
      crowd.map((one) => ({ ...one, must: false })),
      bounds,
    );
    expect(without[4]).toBeNull();
    expect(placeNames(crowd, bounds, [], 5)[4]).toBeNull();
  });
});
