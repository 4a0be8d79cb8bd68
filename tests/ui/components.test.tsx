import type { ReactNode } from "react";
import { renderToStaticMarkup } from "react-dom/server";
import { MemoryRouter } from "react-router";
import { describe, expect, test } from "vitest";
import {
  Button,
  ChalkStatus,
  NavLinks,
  niceScale,
  Pager,
  RateAxis,
  RateBar,
  SpotMark,
  StrokeTally,
} from "~/ui";
import { labelledTicks } from "~/ui/rate-bar";

const render = (node: ReactNode, at = "/") =>
  renderToStaticMarkup(<MemoryRouter initialEntries={[at]}>{node}</MemoryRouter>);

const count = (html: string, part: string | RegExp) => html.split(part).length - 1;

describe("Button", () => {
  test("a busy button says so and keeps its words", () => {
    const html = render(<Button busy>Save</Button>);
    expect(html).toContain('aria-busy="true"');
    expect(html).toContain('aria-disabled="true"');
    expect(html).not.toContain(" disabled=");
    expect(html).toContain(">Save</button>");
  });

  test("the large size is the 56 px target and the regular one 44 px", () => {
    expect(render(<Button size="large">Save</Button>)).toContain("min-h-target-large");
    expect(render(<Button>Save</Button>)).toMatch(/min-h-target /);
  });
});

describe("niceScale", () => {
  test.each([
    [7.9, 8, [0, 2, 4, 6, 8]],
    [9.3, 10, [0, 2, 4, 6, 8, 10]],
    [0.34, 0.35, [0, 0.05, 0.1, 0.15]],
    [1200, 1200, [0, 200, 400, 600, 800, 1000, 1200]],
  ])("%d reaches %d", (max, top, ticks) => {
    const scale = niceScale(max);
    expect(scale.max).toBeGreaterThanOrEqual(max);
    expect(scale.max).toBeCloseTo(top, 1);
    expect(scale.ticks.slice(0, ticks.length).map((tick) => Number(tick.toFixed(6)))).toEqual(ticks);
  });

  test.each([0, -3, Number.NaN, Number.POSITIVE_INFINITY])("%d still gives an axis", (max) => {
    expect(niceScale(max).max).toBe(1);
  });

  test("the last tick is the end of the axis, so that it can carry the unit", () => {
    for (let max = 0.05; max < 3000; max *= 1.37) {
      const scale = niceScale(max);
      expect(scale.ticks.at(-1)).toBeCloseTo(scale.max, 8);
    }
  });
});

describe("RateBar", () => {
  const scale = { max: 10, ticks: [0, 5, 10] };
  const rate = { estimate: 4.4, lower: 2.6, upper: 7 };

  test("lies on the shared axis and says its figures", () => {
    const html = render(<RateBar rate={rate} scale={scale} unit="per 1000" />);
    expect(html).toContain('aria-label="4.4 (2.6 to 7.0) per 1000"');
    expect(html).toContain('x1="26.00%" x2="70.00%"');
    expect(html).toContain('<svg x="44.00%"');
    expect(html).not.toContain("unstable");
  });

  test("on few events is hollow, dotted and called unstable", () => {
    const html = render(<RateBar rate={rate} scale={scale} unstable />);
    expect(html).toContain("4.4 (2.6 to 7.0), unstable");
    expect(html).toContain(">unstable</text>");
    expect(html).toContain('stroke-dasharray="1.5 5"');
    expect(html).toContain('<circle r="5.5" fill="var(--color-chalk)"');
  });

  test("without exposure is a dash and why, without a picture", () => {
    const html = render(<RateBar rate={null} reason="no exposure" scale={scale} />);
    expect(html).toContain("no exposure");
    expect(html).not.toContain("<svg");
  });

  test("an interval past the axis ends in an arrow at its end", () => {
    const html = render(<RateBar rate={{ ...rate, upper: 14 }} scale={scale} />);
    expect(html).toContain('x2="100.00%"');
    expect(html).toContain('d="M-7 -5L0 0L-7 5"');
    expect(html).toContain("2.6 to 14.0");
  });

  test("series differ in shape, not only in colour", () => {
    const marks = ([1, 2, 3, 4] as const).map(
      (series) =>
        render(<RateBar rate={rate} scale={scale} series={series} />).match(
          /<(circle r|path d)="[^"]*"/,
        )?.[0],
    );
    expect(new Set(marks).size).toBe(4);
  });

  test.each([
    [niceScale(9.3), [0, 2, 4, 6, 8, 10]],
    [niceScale(80, 4), [0, 20, 40, 60, 80]],
    [niceScale(1000, 4), [0, 400, 800]],
    [niceScale(400, 4), [0, 200, 400]],
  ])("the figures on an axis are evenly apart and never touch", (scale, written) => {
    expect(labelledTicks(scale)).toEqual(written);
  });

  test("the axis writes its first and last figure", () => {
    const html = render(<RateAxis scale={niceScale(9.3)} label="Rate" />);
    expect(html).toMatch(/>0<\/text>/);
    expect(html).toMatch(/>10<\/text>/);
  });
});

describe("StrokeTally", () => {
  test("draws a stroke for each part, done ones last and so on top", () => {
    const html = render(<StrokeTally done={[true, false, true, false, false]} />);
    expect(count(html, "<line")).toBe(5);
    expect(html.indexOf("text-line")).toBeLessThan(html.indexOf("text-ink"));
    expect(html).toContain('aria-label="2 of 5"');
  });

  test("the last stroke lies across the others", () => {
    const onlyLast = render(<StrokeTally done={[false, false, false, false, true]} />);
    const [, x1, x2] = /<line x1="([\d.]+)" y1="[\d.]+" x2="([\d.]+)"[^>]*text-ink/.exec(onlyLast) ?? [];
    expect(Number(x2) - Number(x1)).toBeGreaterThan(200);
  });

  test("the large one writes its count", () => {
    expect(render(<StrokeTally size="large" done={[true, true, true, false, false]} />)).toContain(">3/5<");
  });
});

test("each spot has a shape of its own beside its word", () => {
  const drawings = (["filled", "half", "crossed", "ring"] as const).map((spot) =>
    render(<SpotMark spot={spot}>word</SpotMark>),
  );
  expect(new Set(drawings).size).toBe(4);
  for (const html of drawings) expect(html).toContain("word");
});

test("the chalk line announces its words politely", () => {
  expect(render(<ChalkStatus line="broken">3 entries wait</ChalkStatus>)).toMatch(/^<div role="status"/);
});

describe("NavLinks", () => {
  const items = ["a", "b", "c", "d", "e", "f"].map((label) => ({ to: `/${label}`, label: `Word ${label}` }));

  test("marks the current address", () => {
    const html = render(<NavLinks items={items.slice(0, 4)} />, "/b");
    expect(count(html, 'aria-current="page"')).toBe(1);
    expect(html).toMatch(/aria-current="page"[^>]*href="\/b"/);
    expect(html).not.toContain("More");
  });

  test("past five, a phone keeps four and opens the rest without script", () => {
    const html = render(<NavLinks items={items} />);
    expect(html).toContain("<details");
    const drawer = html.slice(html.indexOf("<details"));
    expect(drawer).toContain("Word e");
    expect(drawer).toContain("Word f");
    expect(drawer).not.toContain("Word d");
  });
});

describe("Pager", () => {
  test("keeps the rest of the address and stops at the ends", () => {
    const html = render(<Pager page={2} pageSize={20} total={312} what="athletes" />, "/list?team=3&page=2");
    expect(html).toContain("21 to 40 of 312 athletes");
    expect(html).toContain('href="/list?team=3"');
    expect(html).toContain('href="/list?team=3&amp;page=3"');
    const last = render(<Pager page={99} pageSize={20} total={312} what="athletes" />);
    expect(last).toContain("301 to 312 of 312");
    expect(last).not.toContain("Further");
  });

  test("has nothing to say about nothing", () => {
    expect(render(<Pager page={1} pageSize={20} total={0} what="athletes" />)).toBe("");
  });
});
