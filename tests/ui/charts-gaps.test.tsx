import { describe, expect, test } from "vitest";
import { BurdenChart } from "~/ui/charts/burden-chart";
import { ControlChart } from "~/ui/charts/control-chart";
import { FunnelChart } from "~/ui/charts/funnel-chart";
import { IntervalChart } from "~/ui/charts/interval-chart";
import { LineWithBand } from "~/ui/charts/line-with-band";
import { ThresholdChart } from "~/ui/charts/threshold-chart";
import { TwoSidedBars } from "~/ui/charts/two-sided-bars";
import { count, draw } from "./chart-markup";

const periods = ["Aug", "Sep", "Oct"];
const one = { value: 3, label: "all 3.0" };
const line = 'fill="none" stroke="var(--color-series-1)"';

/** A figure that is none must never be drawn as a low one. */
describe.each([Number.NaN, Number.POSITIVE_INFINITY])("%s is a gap and no figure", (bad) => {
  const rate = (estimate: number) => ({ estimate, lower: 1, upper: 4 });

  test("in ControlChart", () => {
    const html = draw(
      <ControlChart
        periods={periods}
        points={[2, bad, 3].map((value) => ({ value, lower: 1, upper: 6, signal: false }))}
        centre={one}
        limitLabel="limits"
        unit="per 1000"
        title="t"
        gapNote="nothing recorded"
      />,
    );
    expect(html).toContain("nothing recorded");
    expect(count(html, line)).toBe(2);
    expect(count(html, "<circle")).toBe(2);
  });

  test("in ThresholdChart and LineWithBand", () => {
    const sum = draw(
      <ThresholdChart
        periods={periods}
        values={[2, bad, 3]}
        threshold={one}
        crossings={[1]}
        unit="sum"
        title="t"
      />,
    );
    expect(count(sum, line)).toBe(2);
    expect(sum).not.toContain("color-ember");
    const points = [rate(2), rate(bad), rate(3)];
    const rates = draw(
      <LineWithBand
        periods={periods}
        series={[{ series: 1, label: "girls", points }]}
        unit="per 1000"
        title="t"
      />,
    );
    expect(count(rates, "<circle")).toBe(2);
  });

  test("in FunnelChart and BurdenChart", () => {
    const funnel = draw(
      <FunnelChart
        points={[
          { label: "Women", exposure: 900, rate: bad, outside: true },
          { label: "Men", exposure: 900, rate: 2, outside: false },
        ]}
        centre={one}
        limits={[]}
        xUnit="exposures"
        yUnit="per 1000"
        title="t"
      />,
    );
    expect(funnel).toContain("Men");
    expect(funnel).not.toContain("Women");
    const burden = draw(
      <BurdenChart
        points={[
          { label: "knee", x: 9, y: bad, events: 4 },
          { label: "ankle", x: 9, y: 2, events: 4 },
        ]}
        curves={[]}
        xUnit="days"
        yUnit="per 1000"
        title="t"
      />,
    );
    expect(burden).toContain("ankle");
    expect(burden).not.toContain("knee");
  });

  test("in TwoSidedBars and IntervalChart, which say so", () => {
    const side = { value: bad, lower: 1, upper: 4, events: 3 };
    const sides = draw(
      <TwoSidedBars
        rows={[{ label: "ankle", left: side, right: { ...side, value: 2 } }]}
        leftLabel="left"
        rightLabel="right"
        unit="per 1000"
        decimals={1}
        title="t"
      />,
    );
    expect(count(sides, ">–<")).toBe(1);
    expect(count(sides, "<g transform")).toBe(1);
    const interval = draw(
      <IntervalChart
        groups={[{ label: "ankle", points: [{ series: 1, label: "girls", rate: rate(bad) }] }]}
        unit="per 1000"
        title="t"
      />,
    );
    expect(interval).toContain("– girls: no figure");
    expect(interval).not.toContain("<circle");
  });
});
