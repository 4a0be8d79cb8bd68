import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  burden,
  directlyStandardisedRate,
  incidenceRate,
  kaplanMeier,
  mantelHaenszel,
  poissonInterval,
  poissonMidPInterval,
  proportion,
  rateDifference,
  rateRatio,
  shrunkenRates,
  smallestDetectableRatio,
  standardisedIncidenceRatio,
  uChart,
} from "~/statistics";
import { drawPoisson, makeRandom } from "./agreement";

const exposure = fc.double({ min: 0.5, max: 1e7, noNaN: true });
const counted = fc.record({ events: fc.integer({ min: 0, max: 3000 }), exposure });
const withEvents = fc.record({ events: fc.integer({ min: 1, max: 3000 }), exposure });
const level = fc.double({ min: 0.5, max: 0.999, noNaN: true });
const method = fc.constantFrom("wald", "exact", "mid-p" as const);
const groups = fc.array(counted, { minLength: 1, maxLength: 12 });

function expectClose(actual: number, expected: number, relative = 1e-8) {
  if (actual === expected) return;
  expect(Math.abs(actual - expected)).toBeLessThanOrEqual(relative * Math.max(Math.abs(expected), 1e-300));
}

function expectHolds({ estimate, lower, upper }: { estimate: number; lower: number; upper: number }) {
  const hair = 1e-9 * Math.abs(estimate);
  expect(lower).toBeLessThanOrEqual(estimate + hair);
  expect(upper === Infinity ? 0 : estimate).toBeLessThanOrEqual(upper + hair);
}

describe("every interval holds its estimate", () => {
  it("rates, ratios, differences, proportions", () => {
    fc.assert(
      fc.property(counted, withEvents, level, method, (a, b, at, by) => {
        expectHolds(incidenceRate(a, { level: at }));
        expectHolds(rateRatio(a, b, { level: at, method: by }));
        expectHolds(rateRatio(b, a, { level: at, method: by }));
        expectHolds(rateDifference(a, b, { level: at }));
        expectHolds(mantelHaenszel([{ a, b }], { level: at }));
        const trials = a.events + b.events;
        for (const kind of ["wilson", "clopper-pearson"] as const) {
          const share = proportion({ successes: a.events, trials }, { level: at, method: kind });
          expectHolds(share);
          expect(share.lower).toBeGreaterThanOrEqual(0);
          expect(share.upper).toBeLessThanOrEqual(1);
        }
      }),
    );
  });

  it("standardised and shrunken rates, burdens", () => {
    fc.assert(
      fc.property(groups, level, (rows, at) => {
        expectHolds(
          directlyStandardisedRate(
            rows,
            rows.map((_, index) => index + 1),
            { level: at },
          ),
        );
        for (const group of shrunkenRates(rows, { level: at }).groups) {
          expect(group.lower).toBeLessThanOrEqual(group.upper);
          expect(Number.isFinite(group.upper)).toBe(true);
        }
        const days = rows.map(({ events }) => events);
        const { estimate, lower, upper } = burden({ daysLost: days, exposureHours: 100 }, { level: at });
        if (lower !== null && upper !== null) expectHolds({ estimate, lower, upper });
        else expect(estimate).toBe(0);
      }),
      { numRuns: 60 },
    );
  });

  it("mid-P lies within exact", () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 5000 }), level, (events, at) => {
        const exact = poissonInterval(events, { level: at });
        const midP = poissonMidPInterval(events, { level: at });
        expect(midP.lower).toBeGreaterThanOrEqual(exact.lower * (1 - 1e-9));
        expect(midP.upper).toBeLessThanOrEqual(exact.upper * (1 + 1e-9));
      }),
    );
  });
});

describe("scaling and swapping", () => {
  it("twice the exposure is half the rate; per 10 000 is ten times per 1000", () => {
    fc.assert(
      fc.property(counted, fc.double({ min: 0.01, max: 100, noNaN: true }), (a, factor) => {
        const base = incidenceRate(a);
        const scaled = incidenceRate({ ...a, exposure: a.exposure * factor });
        const tenfold = incidenceRate(a, { per: 10_000 });
        for (const key of ["estimate", "lower", "upper"] as const) {
          expectClose(scaled[key] * factor, base[key]);
          expectClose(tenfold[key], 10 * base[key]);
        }
      }),
    );
  });

  it("a ratio does not change when both exposures are scaled", () => {
    fc.assert(
      fc.property(counted, withEvents, method, (a, b, by) => {
        const base = rateRatio(a, b, { method: by });
        const scaled = rateRatio(
          { ...a, exposure: a.exposure / 60 },
          { ...b, exposure: b.exposure / 60 },
          { method: by },
        );
        for (const key of ["estimate", "lower", "upper"] as const) expectClose(scaled[key], base[key]);
        expect(scaled.pValue).toBeCloseTo(base.pValue, 7);
      }),
    );
  });

  it("a ratio inverts on swap and keeps its p", () => {
    fc.assert(
      fc.property(counted, withEvents, method, level, (a, b, by, at) => {
        const forward = rateRatio(a, b, { method: by, level: at });
        const backward = rateRatio(b, a, { method: by, level: at });
        expectClose(backward.estimate, 1 / forward.estimate);
        expectClose(backward.lower, 1 / forward.upper);
        expectClose(backward.upper, 1 / forward.lower);
        expect(backward.pValue).toBeCloseTo(forward.pValue, 7);
        const difference = rateDifference(a, b, { level: at });
        const reversed = rateDifference(b, a, { level: at });
        expectClose(reversed.lower, -difference.upper);
        expectClose(reversed.upper, -difference.lower);
      }),
    );
  });

  it("p is a probability, and below 5 % about when the 95 % interval leaves 1 out", () => {
    fc.assert(
      fc.property(withEvents, withEvents, (a, b) => {
        for (const by of ["wald", "mid-p"] as const) {
          const { lower, upper, pValue } = rateRatio(a, b, { method: by });
          expect(pValue).toBeGreaterThanOrEqual(0);
          expect(pValue).toBeLessThanOrEqual(1);
          if (pValue < 0.0499) expect(lower > 1 || upper < 1).toBe(true);
          if (pValue > 0.0501) expect(lower <= 1 && upper >= 1).toBe(true);
        }
      }),
    );
  });

  it("a higher level is never narrower", () => {
    fc.assert(
      fc.property(counted, withEvents, (a, b) => {
        const narrow = rateRatio(a, b, { level: 0.9 });
        const wide = rateRatio(a, b, { level: 0.99 });
        expect(wide.lower).toBeLessThanOrEqual(narrow.lower * (1 + 1e-9));
        expect(wide.upper).toBeGreaterThanOrEqual(narrow.upper * (1 - 1e-9));
      }),
    );
  });
});

describe("the order of rows", () => {
  it("does not matter", () => {
    fc.assert(
      fc.property(fc.array(fc.tuple(withEvents, withEvents), { minLength: 1, maxLength: 8 }), (pairs) => {
        const strata = pairs.map(([a, b]) => ({ a, b }));
        const forward = mantelHaenszel(strata);
        const backward = mantelHaenszel(strata.toReversed());
        expectClose(backward.estimate, forward.estimate);
        expectClose(backward.lower, forward.lower);
        const rows = strata.map(({ a }) => a);
        const weights = strata.map(({ b }) => b.exposure);
        expectClose(
          directlyStandardisedRate(rows.toReversed(), weights.toReversed()).upper,
          directlyStandardisedRate(rows, weights).upper,
        );
        expectClose(shrunkenRates(rows.toReversed()).mean, shrunkenRates(rows).mean);
        expectClose(uChart(rows.toReversed()).centre, uChart(rows).centre);
        const daysLost = rows.map(({ events }) => events);
        expect(burden({ daysLost: daysLost.toReversed(), exposureHours: 9 }).estimate).toBe(
          burden({ daysLost, exposureHours: 9 }).estimate,
        );
      }),
      { numRuns: 60 },
    );
  });

  it("leaves a survival curve falling between its limits", () => {
    const rows = fc.array(fc.record({ time: fc.integer({ min: 0, max: 40 }), event: fc.boolean() }), {
      minLength: 1,
    });
    fc.assert(
      fc.property(rows, (followed) => {
        const { steps, median } = kaplanMeier(followed);
        let last = 1;
        for (const step of steps) {
          expect(step.survival).toBeLessThan(last);
          expect(step.lower).toBeLessThanOrEqual(step.survival + 1e-12);
          expect(step.upper).toBeGreaterThanOrEqual(step.survival - 1e-12);
          last = step.survival;
        }
        expect(median.estimate === null).toBe(last > 0.5 + 1e-12);
        expect(kaplanMeier(followed.toReversed())).toEqual({ ...kaplanMeier(followed) });
      }),
    );
  });
});

describe("coverage, simulated", () => {
  it.each([0.7, 3, 12.5, 60])(
    "the exact interval holds a true mean of %d at least 95 times in 100",
    (mean) => {
      const random = makeRandom(7_654_321);
      const draws = 20_000;
      let held = 0;
      for (let draw = 0; draw < draws; draw++) {
        const { lower, upper } = poissonInterval(drawPoisson(mean, random));
        if (lower <= mean && mean <= upper) held += 1;
      }
      expect(held / draws).toBeGreaterThanOrEqual(0.95);
    },
  );

  it("the exact ratio interval holds a true ratio of 1 at least 95 times in 100", () => {
    const random = makeRandom(42);
    const draws = 4000;
    let held = 0;
    for (let draw = 0; draw < draws; draw++) {
      const a = { events: drawPoisson(8, random), exposure: 800 };
      const b = { events: drawPoisson(12, random), exposure: 1200 };
      if (a.events + b.events === 0) continue;
      const { lower, upper } = rateRatio(a, b, { method: "exact" });
      if (lower <= 1 && 1 <= upper) held += 1;
    }
    expect(held / draws).toBeGreaterThanOrEqual(0.95);
  });

  it("the standardised ratio and the standardised rate hold theirs", () => {
    const random = makeRandom(99);
    const draws = 4000;
    let ratioHeld = 0;
    let rateHeld = 0;
    for (let draw = 0; draw < draws; draw++) {
      const ratio = standardisedIncidenceRatio({ observed: drawPoisson(6, random), expected: 6 });
      if (ratio.lower <= 1 && 1 <= ratio.upper) ratioHeld += 1;
      const strata = [
        { events: drawPoisson(2, random), exposure: 400 },
        { events: drawPoisson(9, random), exposure: 900 },
      ];
      const rate = directlyStandardisedRate(strata, [1, 1]);
      if (rate.lower <= 7.5 && 7.5 <= rate.upper) rateHeld += 1;
    }
    expect(ratioHeld / draws).toBeGreaterThanOrEqual(0.95);
    expect(rateHeld / draws).toBeGreaterThanOrEqual(0.95);
  });
});

describe("smallestDetectableRatio", () => {
  const design = { exposureA: 30_000, exposureB: 24_000, rate: 4 };

  it("is a ratio that these exposures show four times in five, simulated", () => {
    const ratio = smallestDetectableRatio(design);
    expect(ratio).not.toBeNull();
    const random = makeRandom(2024);
    const draws = 3000;
    let shown = 0;
    for (let draw = 0; draw < draws; draw++) {
      const a = { events: drawPoisson(120 * (ratio ?? 1), random), exposure: 30_000 };
      const b = { events: drawPoisson(96, random), exposure: 24_000 };
      if (rateRatio(a, b, { method: "wald" }).upper < 1) shown += 1;
    }
    expect(Math.abs(shown / draws - 0.8)).toBeLessThan(0.03);
  });

  it("solves its own equation: the distance is 1.959964 + 0.841621 standard errors", () => {
    const ratio = smallestDetectableRatio(design) ?? Number.NaN;
    expect(-Math.log(ratio) / Math.sqrt(1 / (120 * ratio) + 1 / 96)).toBeCloseTo(2.801585, 5);
  });

  it("comes nearer to 1 with more exposure and further from it with more power", () => {
    const base = smallestDetectableRatio(design) ?? Number.NaN;
    expect(smallestDetectableRatio({ ...design, exposureA: 90_000, exposureB: 72_000 })).toBeGreaterThan(
      base,
    );
    expect(smallestDetectableRatio({ ...design, power: 0.9 })).toBeLessThan(base);
    expect(smallestDetectableRatio({ ...design, rate: 40, per: 10_000 })).toBeCloseTo(base, 12);
  });

  it("is null when no reduction could be shown", () => {
    expect(smallestDetectableRatio({ exposureA: 1000, exposureB: 1000, rate: 1 })).toBeNull();
    expect(smallestDetectableRatio({ exposureA: 2000, exposureB: 2000, rate: 4 })).toBeNull();
  });
});
