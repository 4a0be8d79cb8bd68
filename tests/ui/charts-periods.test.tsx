import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { textWidth } from "~/ui/charts/chart-frame";
import { ControlChart, type ControlPoint } from "~/ui/charts/control-chart";
import { longestGap } from "~/ui/charts/gaps";
import { LineWithBand } from "~/ui/charts/line-with-band";
import { namedPeriods, spotRadius } from "~/ui/charts/period-plot";
import { ThresholdChart } from "~/ui/charts/threshold-chart";
import { count, draw, expectSound, figure, numbersOf, periods } from "./chart-markup";

const centre = { value: 3, label: "last season 3.0" };
const point = (value: number, more: Partial<ControlPoint> = {}): ControlPoint => ({
  value,
  lower: 0.5,
  upper: 6,
  signal: false,
  ...more,
});
const hollow = 'fill="var(--color-chalk)" stroke="var(--color-series-1)"';
const maybe = <Value,>(value: fc.Arbitrary<Value>) => fc.option(value, { nil: null });

describe("ControlChart on the server", () => {
  const html = draw(
    <ControlChart
      periods={["4 Aug", "11 Aug", "18 Aug", "25 Aug", "1 Sep"]}
      points={[point(2), point(3, { unstable: true }), null, point(9, { signal: true }), point(4)]}
      centre={centre}
      limitLabel="99.8 % limits"
      unit="per 1000"
      title="Rates by week"
      gapNote="no exposure recorded"
    />,
  );

  test("names its lines, its axis and itself", () => {
    expect(html).toMatch(/<svg[^>]*role="img"[^>]*aria-label="Rates by week"/);
    for (const text of ["last season 3.0", "99.8 % limits", "per 1000", "– no exposure recorded"])
      expect(html).toContain(text);
  });

  test("a signal is a larger diamond with its period beside it", () => {
    expect(html).toMatch(/<path d="M0 -8\.4[^"]*" fill="var\(--color-ember\)"/);
    // Once below the axis and once beside the diamond.
    expect(count(html, ">25 Aug<")).toBe(2);
    expect(count(html, ">18 Aug<")).toBe(1);
  });

  test("the unstable spot is hollow, and the lines break at the gap", () => {
    expect(count(html, hollow)).toBe(1);
    expect(count(html, 'fill="none" stroke="var(--color-series-1)"')).toBe(2);
    expect(count(html, 'stroke-dasharray="6 4"')).toBe(4);
  });

  test("without a gap its note is not written", () => {
    const whole = draw(
      <ControlChart
        periods={["a", "b"]}
        points={[point(1), point(2)]}
        centre={centre}
        limitLabel="limits"
        unit="per 1000"
        title="Whole"
        gapNote="no exposure recorded"
      />,
    );
    expect(whole).not.toContain("no exposure recorded");
  });

  test("limits of one period with hardly any exposure do not press the others flat", () => {
    const points = Array.from({ length: 20 }, (_, index) => point(3, { upper: index === 7 ? 400 : 8 }));
    const drawn = draw(
      <ControlChart
        periods={points.map((_, index) => `week ${index}`)}
        points={points}
        centre={centre}
        limitLabel="limits"
        unit="per 1000"
        title="Wide"
      />,
    );
    expect(drawn).not.toContain(">400<");
    expect(drawn).toContain(">10<");
  });

  test("whatever it is given, it is drawn", () => {
    const anyPoint = fc.record({
      value: figure,
      lower: figure,
      upper: figure,
      signal: fc.boolean(),
      unstable: fc.boolean(),
    });
    fc.assert(
      fc.property(periods, fc.array(maybe(anyPoint), { maxLength: 70 }), figure, (names, points, middle) => {
        expectSound(
          draw(
            <ControlChart
              periods={names}
              points={points}
              centre={{ value: middle, label: "centre" }}
              limitLabel="limits"
              unit="per 1000"
              title="Any"
              gapNote="nothing recorded"
            />,
          ),
        );
      }),
      { numRuns: 60 },
    );
  });
});

describe("ThresholdChart on the server", () => {
  test("rises from 0, shows the threshold and names what crossed it", () => {
    const html = draw(
      <ThresholdChart
        periods={["Aug", "Sep", "Oct", "Nov"]}
        values={[1, 5, null, 2]}
        threshold={{ value: 4, label: "alarm at 4" }}
        crossings={[1, 2, 99]}
        unit="running sum"
        title="Sum by month"
      />,
    );
    expect(html).toMatch(/aria-label="Sum by month"/);
    expect(html).toContain("alarm at 4");
    expect(count(html, 'fill="var(--color-ember)" stroke="none"')).toBe(1);
    expect(count(html, ">Sep<")).toBe(2);
    expect(count(html, ">Oct<")).toBe(1);
    // The first of two runs begins on the axis: y of its first two corners differ while x is the same.
    const lines = [...html.matchAll(/<path d="M([\d.]+) ([\d.]+)L([\d.]+) ([\d.]+)[^"]*" fill="none"/g)];
    expect(lines).toHaveLength(2);
    expect(lines[0]?.[1]).toBe(lines[0]?.[3]);
    expect(Number(lines[0]?.[2])).toBeGreaterThan(Number(lines[0]?.[4]));
    expect(lines[1]?.[2]).toBe(lines[1]?.[4]);
  });

  test("whatever it is given, it is drawn", () => {
    fc.assert(
      fc.property(
        periods,
        fc.array(maybe(figure), { maxLength: 70 }),
        figure,
        fc.array(fc.integer({ min: -2, max: 80 })),
        (names, values, level, crossings) => {
          expectSound(
            draw(
              <ThresholdChart
                periods={names}
                values={values}
                threshold={{ value: level, label: "alarm" }}
                crossings={crossings}
                unit="sum"
                title="Any"
              />,
            ),
          );
        },
      ),
      { numRuns: 60 },
    );
  });
});

describe("LineWithBand", () => {
  const rate = { estimate: 2, lower: 1, upper: 3 };

  test("two periods of the same name stay two", () => {
    const html = draw(
      <LineWithBand
        periods={["Aug", "Sep", "Aug"]}
        series={[{ series: 1, label: "girls", points: [rate, { ...rate, estimate: 3 }, rate] }]}
        unit="per 1000"
        title="Two Augusts"
      />,
    );
    const line = html.match(/<path d="([^"]*)" fill="none" stroke="var\(--color-series-1\)"/)?.[1] ?? "";
    const xs = [...line.matchAll(/[ML]([\d.]+) /g)].map((match) => Number(match[1]));
    expect(xs).toHaveLength(3);
    expect(new Set(xs).size).toBe(3);
  });

  test("a limit without an end does not take the axis with it", () => {
    const html = draw(
      <LineWithBand
        periods={["Aug", "Sep"]}
        series={[{ series: 1, label: "girls", points: [{ ...rate, upper: Number.POSITIVE_INFINITY }, rate] }]}
        unit="per 1000"
        title="Open"
      />,
    );
    expectSound(html);
    expect(html).toContain(">3<");
  });

  test("whatever it is given, it is drawn", () => {
    const anyPoint = fc.record({ estimate: figure, lower: figure, upper: figure, unstable: fc.boolean() });
    fc.assert(
      fc.property(
        periods,
        fc.array(fc.array(maybe(anyPoint), { maxLength: 70 }), { maxLength: 3 }),
        (names, all) => {
          const series = all.map((points, index) => ({
            series: (index + 1) as 1 | 2 | 3,
            label: `group ${index}`,
            points,
          }));
          expectSound(draw(<LineWithBand periods={names} series={series} unit="per 1000" title="Any" />));
        },
      ),
      { numRuns: 60 },
    );
  });
});

test("names of periods never touch, and spots stay apart, however many there are", () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 1, max: 400 }),
      fc.double({ min: 0.5, max: 300, noNaN: true }),
      (n, slot) => {
        const names = Array.from({ length: n }, (_, index) => `${index} Aug`);
        const shown = namedPeriods(names, slot);
        for (const [at, index] of shown.entries())
          if (at > 0)
            expect((index - (shown[at - 1] ?? 0)) * slot).toBeGreaterThan(Math.max(...names.map(textWidth)));
        if (slot > 5) expect(2 * spotRadius(slot)).toBeLessThan(slot);
      },
    ),
  );
});

test("the longest gap is found, and none where there is none", () => {
  expect(longestGap([1, null, 2, null, null, null])).toBe(4);
  expect(longestGap([null, 1])).toBe(0);
  expect(longestGap([1, 2])).toBeNull();
  expect(longestGap([])).toBeNull();
});

test("markup is measured as meant", () => {
  expect(numbersOf('<a r="2"/><b r="-3"/>', "r")).toEqual([2, -3]);
  expect(() => expectSound('<circle r="-1"/>')).toThrow();
  expect(() => expectSound('<path d="MNaN 2"/>')).toThrow();
});
