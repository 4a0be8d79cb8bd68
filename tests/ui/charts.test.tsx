import fc from "fast-check";
import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, test } from "vitest";
import { spreadLabels, wrapWords } from "~/ui/charts/end-labels";
import { splitAtGaps } from "~/ui/charts/gaps";
import { IntervalChart, type IntervalGroup } from "~/ui/charts/interval-chart";
import { describePoint, layoutRows, placeLabel } from "~/ui/charts/interval-rows";
import { LineWithBand } from "~/ui/charts/line-with-band";

const rate = (estimate: number, lower: number, upper: number) => ({ estimate, lower, upper });
const groups: IntervalGroup[] = [
  {
    label: "13 to 14",
    points: [
      { series: 1, label: "girls", rate: rate(2.2, 0.8, 4.4) },
      { series: 2, label: "boys", rate: rate(1.6, 0.5, 3.2), unstable: true, note: "3 injuries: unstable" },
      { series: 3, label: "all", rate: null, note: "no exposure" },
    ],
  },
];

describe("IntervalChart on the server", () => {
  const html = renderToStaticMarkup(
    <IntervalChart
      groups={groups}
      unit="per 1000"
      title="Rates by age"
      reference={{ value: 2.5, label: "club 2.5" }}
    />,
  );

  test("is drawn, with every line named beside it", () => {
    expect(html).toMatch(/<svg[^>]*aria-label="Rates by age"/);
    for (const words of [
      "girls 2.2 (0.8 to 4.4)",
      "boys, 3 injuries: unstable",
      "all, no exposure",
      "13 to 14",
      "club 2.5",
    ]) {
      expect(html).toContain(words);
    }
  });

  test("the unstable one is hollow and dotted, the steady one neither", () => {
    expect(html.split('stroke-dasharray="1.5 5"').length - 1).toBe(1);
    expect(html.split('fill="var(--color-chalk)" stroke="var(--color-series-2)"').length - 1).toBe(1);
    expect(html).toContain('<circle r="7" fill="var(--color-series-1)"');
  });

  test("the axis ends with its unit", () => {
    expect(html).toMatch(/>\d+ per 1000</);
  });

  test("without any figure there is still a chart that says why", () => {
    const empty = renderToStaticMarkup(
      <IntervalChart
        groups={[{ label: "All", points: [{ series: 1, label: "girls", rate: null, note: "no exposure" }] }]}
        unit="per 1000"
        title="Rates"
      />,
    );
    expect(empty).toContain("girls, no exposure");
  });
});

test("a point says its figures unless a note stands for them", () => {
  expect(describePoint({ series: 1, label: "girls", rate: rate(2, 1, 3) }, 2)).toBe(
    "girls 2.00 (1.00 to 3.00)",
  );
  expect(describePoint({ series: 1, label: "girls", rate: rate(2, 1, 3), unstable: true }, 0)).toBe(
    "girls 2 (1 to 3), unstable",
  );
  expect(describePoint({ series: 1, label: "girls", rate: null }, 1)).toBe("girls: no figure");
});

test("no two lines share a place, wide or narrow", () => {
  for (const narrow of [true, false]) {
    const ys = layoutRows([...groups, ...groups], narrow, 1).rows.map((row) => row.y);
    expect(ys).toHaveLength(6);
    for (const [index, y] of ys.entries())
      if (index > 0) expect(y - (ys[index - 1] ?? 0)).toBeGreaterThanOrEqual(22);
  }
});

test("a label never leaves the drawing to the right and never covers its own line", () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0, max: 700, noNaN: true }),
      fc.double({ min: 0, max: 300, noNaN: true }),
      (from, length) => {
        const to = from + length;
        const place = placeLabel("girls 2.2 (0.8 to 4.4)", from, to, 1000);
        if (place.above) return;
        if (place.anchor === "start") expect(place.x).toBeGreaterThan(to);
        else expect(place.x).toBeLessThan(from);
      },
    ),
  );
  expect(placeLabel("a long label", 10, 990, 1000)).toMatchObject({ above: true });
});

describe("LineWithBand", () => {
  test("breaks where a period has no figure", () => {
    expect(splitAtGaps([1, 2, null, 3])).toEqual([[1, 2], [3]]);
    expect(splitAtGaps([null, null])).toEqual([]);
  });

  test("names each line at its end and marks the unstable point", () => {
    const html = renderToStaticMarkup(
      <LineWithBand
        periods={["Aug", "Sep", "Oct", "Nov"]}
        unit="per 1000"
        title="By month"
        series={[
          {
            series: 1,
            label: "girls",
            points: [rate(1, 0.5, 2), rate(2, 1, 3), null, { ...rate(3, 1, 6), unstable: true }],
          },
        ]}
      />,
    );
    expect(html).toContain("girls");
    expect(html.split('opacity="0.16"').length - 1).toBe(1);
    expect(html.split('fill="var(--color-chalk)" stroke="var(--color-series-1)"').length - 1).toBe(1);
  });

  test("labels at the same height move apart, keep their order and stay above the limit", () => {
    const heights = [20, 20, 38];
    const places = spreadLabels(
      [
        { y: 100, height: 20 },
        { y: 101, height: 20 },
        { y: 102, height: 38 },
      ],
      150,
    );
    const sorted = places.map((y, index) => ({ y, height: heights[index] ?? 0 })).sort((a, b) => a.y - b.y);
    for (const [index, { y, height }] of sorted.entries()) {
      expect(y + height).toBeLessThanOrEqual(sorted[index + 1]?.y ?? 150);
    }
    expect(places[0]).toBeLessThan(places[1] ?? 0);
  });

  test("words wrap to their room", () => {
    expect(wrapWords("last season 2.5", 95)).toEqual(["last season", "2.5"]);
    expect(wrapWords("last season 2.5", 1000)).toEqual(["last season 2.5"]);
    expect(wrapWords("last season 2.5", 10)).toEqual(["last", "season", "2.5"]);
  });
});
