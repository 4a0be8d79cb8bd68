import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { exceedance, funnelLimits, meanShare, poissonInterval, proportion } from "~/statistics";
import { drawPoisson, expectValue, makeRandom } from "./agreement";

describe("funnelLimits", () => {
  it("lies where the mid-P tail of a count passes the level, by hand for 2 expected", () => {
    // Of a mean of 2: P(X >= 5) = 1 - 7 e^-2, P(X >= 6) = that less (32 / 120) e^-2, P(X >= 7) less (64 / 720) e^-2.
    const five = 1 - 7 * Math.exp(-2);
    const six = five - (32 / 120) * Math.exp(-2);
    const seven = six - (64 / 720) * Math.exp(-2);
    const [ofFive, ofSix] = [(five + six) / 2, (six + seven) / 2];
    // At a level that leaves just the tail of 5 the limit is 5, and the same for 6.
    expect(funnelLimits({ rate: 2, exposure: 1000, level: 1 - 2 * ofFive }).upper).toBeCloseTo(5, 9);
    expect(funnelLimits({ rate: 2, exposure: 1000, level: 1 - 2 * ofSix }).upper).toBeCloseTo(6, 9);
    const { lower, upper } = funnelLimits({ rate: 2, exposure: 1000 });
    expect(lower).toBe(0);
    expect(upper).toBeGreaterThan(5);
    expect(upper).toBeLessThan(6);
  });

  it("puts a count outside exactly when its mid-P tail is below half of what the level leaves", () => {
    const mean = fc.double({ min: 0.01, max: 300, noNaN: true });
    const level = fc.constantFrom(0.8, 0.95, 0.998);
    fc.assert(
      fc.property(mean, fc.integer({ min: 0, max: 400 }), level, (expected, count, given) => {
        const { lower, upper } = funnelLimits({ rate: expected, exposure: 1000, level: given });
        const above = (exceedance(count, expected) + exceedance(count + 1, expected)) / 2;
        const tail = (1 - given) / 2;
        fc.pre(Math.abs(above - tail) > 1e-9 && Math.abs(1 - above - tail) > 1e-9);
        expect(count > upper).toBe(above < tail);
        expect(count < lower).toBe(1 - above < tail);
      }),
    );
  });

  it("comes near the normal limits for much exposure, and narrows towards the rate", () => {
    const limits = funnelLimits({ rate: 5, exposure: 1e9 });
    expect(limits.upper).toBeCloseTo(5 + 1.959964 * Math.sqrt(5 / 1e6), 4);
    expect(limits.lower).toBeCloseTo(5 - 1.959964 * Math.sqrt(5 / 1e6), 4);
  });

  it("has no steps, narrows with the exposure, widens with the level and has the unit of the rate", () => {
    const rate = fc.double({ min: 0.1, max: 40, noNaN: true });
    const exposure = fc.double({ min: 10, max: 1e6, noNaN: true });
    fc.assert(
      fc.property(rate, exposure, fc.double({ min: 0.5, max: 0.9999, noNaN: true }), (at, over, level) => {
        const limits = funnelLimits({ rate: at, exposure: over, level });
        expect(limits.lower).toBeGreaterThanOrEqual(0);
        expect(limits.upper).toBeGreaterThanOrEqual(limits.lower);
        const count = ({ upper, lower }: { upper: number; lower: number }) => [upper * over, lower * over];
        const next = funnelLimits({ rate: at * (1 + 1e-9), exposure: over, level });
        for (const [index, value] of count(limits).entries())
          expect(Math.abs((count(next)[index] ?? 0) - value) / 1000).toBeLessThan(1e-3);
        const more = funnelLimits({ rate: at, exposure: over * 1.1, level });
        expect(more.upper).toBeLessThan(limits.upper * (1 + 1e-9));
        expect(more.lower).toBeGreaterThan(limits.lower * (1 - 1e-9) - 1e-9);
        const wide = funnelLimits({ rate: at, exposure: over, level: 1 - (1 - level) / 10 });
        expect(wide.upper).toBeGreaterThanOrEqual(limits.upper);
        expect(wide.lower).toBeLessThanOrEqual(limits.lower);
        const perTen = funnelLimits({ rate: at * 10, exposure: over, per: 10_000, level });
        expect(perTen.upper).toBeCloseTo(limits.upper * 10, 7);
      }),
    );
  });

  it("leaves out about one team of twenty, simulated, when all are alike", () => {
    const random = makeRandom(5_150);
    const draws = 20_000;
    let outside = 0;
    for (let draw = 0; draw < draws; draw++) {
      const exposure = 5000 + 60_000 * random();
      const { lower, upper } = funnelLimits({ rate: 4, exposure });
      const observed = (drawPoisson(0.004 * exposure, random) / exposure) * 1000;
      if (observed < lower || observed > upper) outside += 1;
    }
    expect(outside / draws).toBeGreaterThan(0.04);
    expect(outside / draws).toBeLessThan(0.06);
  });

  it("is 0 to 0 where nothing happened anywhere, and refuses what is no rate", () => {
    expect(funnelLimits({ rate: 0, exposure: 100 })).toEqual({ lower: 0, upper: 0 });
    expect(() => funnelLimits({ rate: -1, exposure: 100 })).toThrow(/^rate/);
    expect(() => funnelLimits({ rate: 1, exposure: 0 })).toThrow(/^exposure/);
    expect(() => funnelLimits({ rate: 1, exposure: 9, per: 0 })).toThrow(/^per/);
    expect(() => funnelLimits({ rate: 1, exposure: 9, level: 1 })).toThrow(/^level/);
  });

  it("is not the interval of an observed count, which answers another question", () => {
    expect(funnelLimits({ rate: 10, exposure: 1000 }).upper).toBeLessThan(poissonInterval(10).upper);
  });
});

describe("meanShare", () => {
  it("rounds the sum down for the lower limit and up for the upper", () => {
    const share = meanShare({ sum: 17.4, trials: 24 });
    expectValue(share.estimate, "0.725");
    expect(share.lower).toBe(proportion({ successes: 17, trials: 24 }).lower);
    expect(share.upper).toBe(proportion({ successes: 18, trials: 24 }).upper);
    // 18 of 24 [R]: upper 0.880006.
    expectValue(share.upper, "0.880006");
  });

  it("is the proportion itself for a whole sum, also one that rounding misses by a hair", () => {
    const whole = [0.2, 0.4, 0.4, 0.6, 0.6, 0.8].reduce((sum, value) => sum + value, 0);
    for (const sum of [3, whole, 3 + 4e-16]) {
      const share = meanShare({ sum, trials: 6 });
      const { lower, upper } = proportion({ successes: 3, trials: 6 });
      expect(share).toMatchObject({ lower, upper });
    }
    expect(meanShare({ sum: 6, trials: 6 })).toMatchObject({ estimate: 1, upper: 1 });
    expect(meanShare({ sum: 0, trials: 6 })).toMatchObject({ estimate: 0, lower: 0 });
  });

  it("covers the mean of values between 0 and 1 at least 95 times in 100, simulated", () => {
    const random = makeRandom(808);
    const draws = 4000;
    let held = 0;
    for (let draw = 0; draw < draws; draw++) {
      // Squares of uniform values: mean one third.
      const sum = Array.from({ length: 15 }, () => random() ** 2).reduce((total, value) => total + value, 0);
      const { lower, upper } = meanShare({ sum, trials: 15 });
      if (lower <= 1 / 3 && 1 / 3 <= upper) held += 1;
    }
    expect(held / draws).toBeGreaterThanOrEqual(0.95);
  });

  it("refuses what is no sum of shares", () => {
    expect(() => meanShare({ sum: 3.1, trials: 3 })).toThrow(/^sum/);
    expect(() => meanShare({ sum: -0.1, trials: 3 })).toThrow(/^sum/);
    expect(() => meanShare({ sum: Number.NaN, trials: 3 })).toThrow(/^sum/);
    expect(() => meanShare({ sum: 0, trials: 0 })).toThrow(/^trials/);
    expect(() => meanShare({ sum: 1, trials: 2.5 })).toThrow(/^trials/);
    expect(() => meanShare({ sum: 1, trials: 2 }, { level: 0 })).toThrow(/^level/);
  });
});
