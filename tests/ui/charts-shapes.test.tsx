import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { BurdenChart } from "~/ui/charts/burden-chart";
import { FunnelChart } from "~/ui/charts/funnel-chart";
import { StepCurve } from "~/ui/charts/step-curve";
import { TwoSidedBars } from "~/ui/charts/two-sided-bars";
import { count, draw, expectSound, figure, numbersOf, words } from "./chart-markup";

const maybe = <Value,>(value: fc.Arbitrary<Value>) => fc.option(value, { nil: null });
const runs = { numRuns: 60 };

describe("FunnelChart on the server", () => {
  const limit = (label: string, half: number) => ({
    label,
    points: [100, 500, 1000, 2000, 4000].map((exposure) => ({
      exposure,
      lower: Math.max(0, 3 - half * Math.sqrt(1000 / exposure)),
      upper: 3 + half * Math.sqrt(1000 / exposure),
    })),
  });
  const html = draw(
    <FunnelChart
      points={[
        { label: "Girls under 16", exposure: 1800, rate: 8, outside: true },
        { label: "Boys under 16", exposure: 1200, rate: 3, outside: false, unstable: true },
        { label: "Women", exposure: 3000, rate: 3.4, outside: false },
      ]}
      centre={{ value: 3, label: "club 3.0" }}
      limits={[limit("95 %", 1.9), limit("99.8 %", 3)]}
      xUnit="athlete-exposures"
      yUnit="per 1000"
      title="Teams against their exposure"
    />,
  );

  test("names every spot that has room, its limits, its centre and its axes", () => {
    expect(html).toMatch(/role="img"[^>]*aria-label="Teams against their exposure"/);
    for (const text of ["Girls under 16", "Boys under 16", "Women", "club 3.0", "95 %", "99.8 %"])
      expect(html).toContain(`>${text}<`);
    expect(html).toContain("athlete-exposures");
    expect(html).toContain("per 1000");
  });

  test("outside is a diamond in another colour, unstable is hollow, the levels have dashes of their own", () => {
    expect(count(html, 'fill="var(--color-ember)" stroke="none"')).toBe(1);
    expect(count(html, 'fill="var(--color-chalk)" stroke="var(--color-series-1)"')).toBe(1);
    expect(count(html, 'stroke-dasharray="9 5"')).toBe(2);
    expect(count(html, 'stroke-dasharray="2 3"')).toBe(2);
  });

  test("whatever it is given, it is drawn", () => {
    const point = fc.record({
      label: words,
      exposure: figure,
      rate: figure,
      outside: fc.boolean(),
      unstable: fc.boolean(),
    });
    const curve = fc.array(fc.record({ exposure: figure, lower: figure, upper: figure }), { maxLength: 8 });
    fc.assert(
      fc.property(
        fc.array(point, { maxLength: 30 }),
        fc.array(curve, { maxLength: 2 }),
        figure,
        (points, all, middle) => {
          const limits = all.map((curvePoints, index) => ({ label: `limit ${index}`, points: curvePoints }));
          const centre = { value: middle, label: "all" };
          expectSound(
            draw(
              <FunnelChart {...{ points, limits, centre }} xUnit="exposures" yUnit="per 1000" title="Any" />,
            ),
          );
        },
      ),
      runs,
    );
  });
});

describe("StepCurve on the server", () => {
  const html = draw(
    <StepCurve
      curves={[
        {
          series: 1,
          label: "girls",
          steps: [
            { x: 10, y: 0.6, lower: 0.4, upper: 0.8 },
            { x: 30, y: 0.2, lower: 0.1, upper: 0.5 },
          ],
          censored: [20, 40],
        },
      ]}
      start={1}
      xUnit="days since onset"
      yUnit="still away"
      mark={{ y: 0.5, label: "half are back" }}
      title="Time until return"
    />,
  );
  const line = html.match(/<path d="([^"]*)" fill="none" stroke="var\(--color-series-1\)"/)?.[1] ?? "";
  const corners = [...line.matchAll(/[ML]([\d.]+) ([\d.]+)/g)].map(
    ([, x, y]) => [Number(x), Number(y)] as const,
  );

  test("says its words and ends its axis at 100 %", () => {
    expect(html).toMatch(/role="img"[^>]*aria-label="Time until return"/);
    for (const text of ["girls", "half are back", "days since onset", "still away", "0 %", "100 %"])
      expect(html).toContain(text);
  });

  test("holds its height until the next step and then falls", () => {
    // Starts at 1, falls at 10 and at 30, goes on level to the last end of a watch at 40.
    expect(corners).toHaveLength(6);
    expect(corners[0]?.[1]).toBe(0);
    for (const at of [0, 2, 4]) expect(corners[at]?.[1]).toBe(corners[at + 1]?.[1]);
    for (const at of [1, 3]) expect(corners[at]?.[0]).toBe(corners[at + 1]?.[0]);
    const width = (corners[5]?.[0] ?? 0) - (corners[0]?.[0] ?? 0);
    expect((corners[1]?.[0] ?? 0) / width).toBeCloseTo(0.25);
  });

  test("each end of a watch is a tick on the curve", () => {
    const ticks = [
      ...html.matchAll(
        /<line x1="([\d.]+)" x2="\1" y1="([\d.]+)" y2="([\d.]+)" stroke="var\(--color-series-1\)"/g,
      ),
    ];
    expect(ticks).toHaveLength(2);
    expect((Number(ticks[0]?.[2]) + Number(ticks[0]?.[3])) / 2).toBeCloseTo(corners[2]?.[1] ?? -1);
    expect((Number(ticks[1]?.[2]) + Number(ticks[1]?.[3])) / 2).toBeCloseTo(corners[4]?.[1] ?? -1);
  });

  test("whatever it is given, it is drawn", () => {
    const steps = fc.array(fc.record({ x: figure, y: figure, lower: figure, upper: figure }), {
      maxLength: 12,
    });
    const censored = fc.array(figure, { maxLength: 6 });
    fc.assert(
      fc.property(
        fc.array(fc.record({ steps, censored, label: words }), { maxLength: 3 }),
        figure,
        (all, level) => {
          const curves = all.map((curve, index) => ({ ...curve, series: (index + 1) as 1 | 2 | 3 }));
          expectSound(
            draw(
              <StepCurve
                curves={curves}
                start={1}
                xUnit="days"
                yUnit="away"
                mark={{ y: level, label: "median" }}
                title="Any"
              />,
            ),
          );
        },
      ),
      runs,
    );
  });
});

describe("BurdenChart on the server", () => {
  const html = draw(
    <BurdenChart
      points={[
        { label: "ankle", x: 9, y: 1.2, events: 36 },
        { label: "knee", x: 38, y: 0.6, events: 9 },
        { label: "neck", x: 3, y: 0.05, events: 1, unstable: true },
        { label: "foot", x: 0, y: 0.2, events: 5 },
      ]}
      curves={[
        { value: 5, label: "5 days lost" },
        { value: 20, label: "20 days lost" },
      ]}
      xUnit="median days lost"
      yUnit="per 1000"
      title="Severity against incidence"
    />,
  );

  test("names its spots, its lines and its axes", () => {
    expect(html).toMatch(/role="img"[^>]*aria-label="Severity against incidence"/);
    for (const text of ["ankle", "knee", "neck", "foot", "5 days lost", "20 days lost", "median days lost"])
      expect(html).toContain(text);
  });

  test("area grows with the events, the unstable spot is hollow, what is 0 has an arrow towards it", () => {
    const radii = numbersOf(html, "r").sort((a, b) => a - b);
    expect(radii).toHaveLength(4);
    expect((radii[3] ?? 0) / (radii[0] ?? 1)).toBeGreaterThan(2);
    expect(count(html, 'fill="var(--color-chalk)" stroke="var(--color-series-1)"')).toBe(1);
    expect(count(html, 'd="M-9 -5L-14 0L-9 5"')).toBe(1);
  });

  test("equal products lie on one straight line, which falls to the right", () => {
    const lines = [
      ...html.matchAll(/<line x1="([\d.]+)" y1="([\d.]+)" x2="([\d.]+)" y2="([\d.]+)"[^>]*dasharray/g),
    ];
    expect(lines).toHaveLength(2);
    const slopes = lines.map(([, x1, y1, x2, y2]) => (Number(y2) - Number(y1)) / (Number(x2) - Number(x1)));
    expect(slopes[0]).toBeGreaterThan(0);
    // On logarithmic axes lines of different products are parallel.
    expect(slopes[0]).toBeCloseTo(slopes[1] ?? 0, 6);
  });

  test("whatever it is given, it is drawn", () => {
    const point = fc.record({ label: words, x: figure, y: figure, events: figure, unstable: fc.boolean() });
    fc.assert(
      fc.property(
        fc.array(point, { maxLength: 25 }),
        fc.array(fc.record({ value: figure, label: words }), { maxLength: 4 }),
        (points, curves) => {
          expectSound(
            draw(<BurdenChart {...{ points, curves }} xUnit="days" yUnit="per 1000" title="Any" />),
          );
        },
      ),
      runs,
    );
  });
});

describe("TwoSidedBars on the server", () => {
  const html = draw(
    <TwoSidedBars
      rows={[
        {
          label: "ankle",
          left: { value: 0.5, lower: 0.3, upper: 0.8, events: 15 },
          right: { value: 0.2, lower: 0.05, upper: 0.5, events: 4, unstable: true },
        },
        {
          label: "knee",
          left: null,
          right: { value: 1, lower: 0.6, upper: 1.5, events: 20 },
          middle: { text: "side unknown: 2" },
        },
      ]}
      leftLabel="left"
      rightLabel="right"
      unit="per 1000"
      decimals={2}
      title="Left and right"
    />,
  );

  test("says both sides, the names between and what has no side", () => {
    expect(html).toMatch(/<svg[^>]*role="img"[^>]*aria-label="Left and right"/);
    for (const text of ["left", "right", "ankle", "knee", "side unknown: 2", "per 1000"])
      expect(html).toContain(`>${text}<`);
    expect(html).toContain(">0.50 (0.30 to 0.80)<");
    expect(html).toContain(">0.20 (0.05 to 0.50), unstable<");
    expect(count(html, ">–<")).toBe(1);
  });

  test("the left side grows to the left on the same axis as the right one", () => {
    const spots = [...html.matchAll(/<g transform="translate\(([\d.]+),([\d.]+)\)">/g)].map(([, x]) =>
      Number(x),
    );
    expect(spots).toHaveLength(3);
    const zeros = [...html.matchAll(/<text x="([\d.]+)"[^>]*>0<\/text>/g)].map(([, x]) => Number(x));
    expect(zeros).toHaveLength(2);
    const [leftZero = 0, rightZero = 0] = zeros;
    const [ankleLeft = 0, , kneeRight = 0] = spots;
    expect(ankleLeft).toBeLessThan(leftZero);
    // Half the rate lies half as far out on its own side.
    expect((leftZero - ankleLeft) * 2).toBeCloseTo(kneeRight - rightZero, 3);
  });

  test("the unstable side is hollow and dotted", () => {
    expect(count(html, 'fill="var(--color-chalk)" stroke="var(--color-series-2)"')).toBe(1);
    expect(count(html, 'stroke-dasharray="1.5 5"')).toBe(1);
  });

  test("whatever it is given, it is drawn", () => {
    const side = maybe(
      fc.record({ value: figure, lower: figure, upper: figure, events: figure, unstable: fc.boolean() }),
    );
    const row = fc.record({ label: words, left: side, right: side });
    fc.assert(
      fc.property(fc.array(row, { maxLength: 15 }), fc.integer({ min: 0, max: 3 }), (rows, decimals) => {
        expectSound(
          draw(
            <TwoSidedBars
              {...{ rows, decimals }}
              leftLabel="left"
              rightLabel="right"
              unit="per 1000"
              title="Any"
            />,
          ),
        );
      }),
      runs,
    );
  });
});
