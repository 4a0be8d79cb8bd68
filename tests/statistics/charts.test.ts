import { describe, expect, it } from "vitest";
import { cusumReference, cusumRunLength, exceedance, gChart, poissonCusum, uChart } from "~/statistics";
import { drawPoisson, expectValue, makeRandom } from "./agreement";

describe("uChart", () => {
  it("gives limits for each month's own exposure [R]", () => {
    const events = [6, 9, 5, 7, 4, 15, 8, 6];
    const exposure = [1.45, 1.82, 1.51, 1.69, 1.24, 1.73, 1.6, 1.38];
    const chart = uChart(events.map((count, index) => ({ events: count, exposure: exposure[index] ?? 0 })));
    expectValue(chart.centre, "4.830918");
    expectValue(chart.points[5]?.rate, "8.670520");
    expectValue(chart.points[5]?.upper, "9.844095");
    expectValue(chart.points[0]?.upper, "10.306775");
    expect(chart.points.every(({ lower }) => lower === 0)).toBe(true);
    // No signal in month 6, though as many are expected in one month of 41 only.
    expect(chart.points.some(({ signal }) => signal)).toBe(false);
    expectValue(exceedance(15, chart.centre * 1.73), "0.024162");
  });

  it("is a c chart when exposures are equal: NIST wafers, from memory [M]: 16, 28 and 4", () => {
    const wafers = [
      16, 14, 28, 16, 12, 20, 10, 12, 10, 17, 19, 17, 14, 16, 15, 13, 14, 16, 11, 20, 11, 19, 16, 31, 13,
    ];
    const chart = uChart(wafers.map((events) => ({ events, exposure: 1 })));
    expect(chart.centre).toBe(16);
    expect(chart.points[0]).toMatchObject({ upper: 28, lower: 4 });
    // 28 is on the limit and does not signal, 31 does.
    expect(chart.points.flatMap(({ signal }, index) => (signal ? [wafers[index]] : []))).toEqual([31]);
  });

  it("signals low rates too, and nothing where nothing happened", () => {
    const rows = [
      { events: 2, exposure: 1000 },
      { events: 60, exposure: 1000 },
      { events: 30, exposure: 1000 },
    ];
    expect(uChart(rows).points.map(({ signal }) => signal)).toEqual([true, true, false]);
    expect(uChart([{ events: 0, exposure: 5 }])).toEqual({
      centre: 0,
      points: [{ rate: 0, lower: 0, upper: 0, signal: false }],
    });
  });
});

describe("gChart", () => {
  it("gives the limit for gaps between rare injuries [S: formula page citing Benneyan 2001; R]", () => {
    const chart = gChart([12, 30, 5, 44, 18, 9, 27, 61, 15, 19]);
    expect(chart.centre).toBe(24);
    expectValue(chart.upper, "97.484692");
    expect(chart.points.some(({ signal }) => signal)).toBe(false);
    expect(gChart([...Array.from({ length: 20 }, () => 5), 90]).points.at(-1)?.signal).toBe(true);
  });
});

describe("poissonCusum", () => {
  const counts = [2, 1, 3, 2, 0, 2, 4, 3, 5, 4, 6, 3];

  it("makes its reference from the two means", () => {
    expectValue(poissonCusum([], { inControl: 2, outOfControl: 4, threshold: 5 }).reference, "2.885390");
    expectValue(poissonCusum([], { inControl: 4, outOfControl: 7, threshold: 5 }).reference, "5.360821");
  });

  it("follows the worked example and signals above the threshold, not at it", () => {
    const chart = poissonCusum(counts, { reference: 3, threshold: 5 });
    expect(chart.path).toEqual([0, 0, 0, 0, 0, 0, 1, 1, 3, 4, 7, 7]);
    expect(chart.signalAt).toBe(11);
    expect(poissonCusum(counts, { reference: 3, threshold: 7 }).signalAt).toBeNull();
    expect(poissonCusum(counts, { reference: 3, threshold: 6.9 }).signalAt).toBe(11);
  });

  it("takes a reference for each week where exposures differ", () => {
    const same = poissonCusum(counts, { reference: 3, threshold: 5 });
    const each = poissonCusum(counts, { reference: counts.map(() => 3), threshold: 5 });
    expect(each.path).toEqual(same.path);
    expect(each.signalAt).toBe(same.signalAt);
    // By hand: max(0, 2 - 1), max(0, 1 + 1 - 4), max(0, 0 + 6 - 2.5).
    const uneven = poissonCusum([2, 1, 6], { reference: [1, 4, 2.5], threshold: 3 });
    expect(uneven).toEqual({ reference: [1, 4, 2.5], path: [1, 0, 3.5], signalAt: 3 });
    expect(() => poissonCusum([2, 1, 6], { reference: [1, 4], threshold: 3 })).toThrow(/^reference: /);
    expect(() => poissonCusum([2, 1], { reference: [1, 0], threshold: 3 })).toThrow(/^reference\[1\]/);
    expect(() => poissonCusum([2, 1], { reference: [], threshold: 3 })).toThrow(/^reference/);
  });

  it("is then the log likelihood ratio of each week's own means, in one unit", () => {
    // Exposure 0.8, 1.5 and 1.1 thousand AE at 4 per thousand, a rise by half to be found.
    const weeks = [0.8, 1.5, 1.1].map((exposure, index) => ({
      mean: 4 * exposure,
      count: [7, 9, 8][index] ?? 0,
    }));
    const reference = weeks.map(({ mean }) => cusumReference({ inControl: mean, outOfControl: 1.5 * mean }));
    const { path } = poissonCusum(
      weeks.map(({ count }) => count),
      { reference, threshold: 10 },
    );
    const logLikelihood = weeks.reduce((sum, { mean, count }) => sum + count * Math.log(1.5) - 0.5 * mean, 0);
    expect(path.at(-1)).toBeCloseTo(logLikelihood / Math.log(1.5), 10);
  });

  it("gives the reference alone [R]", () => {
    expectValue(cusumReference({ inControl: 2, outOfControl: 4 }), "2.885390");
    expectValue(cusumReference({ inControl: 4, outOfControl: 7 }), "5.360821");
    expect(() => cusumReference({ inControl: 0, outOfControl: 4 })).toThrow(/^inControl/);
    expect(() => cusumReference({ inControl: 4, outOfControl: 4 })).toThrow(/^outOfControl/);
  });

  it("refuses a chart without a reference or one that looks for a fall", () => {
    const without: { reference: number; threshold: number } = JSON.parse('{"threshold":5}');
    expect(() => poissonCusum(counts, without)).toThrow(/^reference/);
    expect(() => poissonCusum(counts, { inControl: 4, outOfControl: 2, threshold: 5 })).toThrow(
      /^outOfControl/,
    );
    expect(() => poissonCusum([1.5], { reference: 3, threshold: 5 })).toThrow(/^counts\[0\]/);
  });
});

describe("cusumRunLength", () => {
  it("gives the zero-state mean run lengths of reference 3, signalling at 5, which is above 4 [R]", () => {
    // The reference values signal when the sum reaches 5; ours when it exceeds the threshold, for counts above 4.
    expectValue(cusumRunLength({ mean: 2, reference: 3, threshold: 4 }), "188.491386");
    expectValue(cusumRunLength({ mean: 4, reference: 3, threshold: 4 }), "5.202051");
    // The chart of the worked example, which signals above 5, is slower both ways.
    expect(cusumRunLength({ mean: 2, reference: 3, threshold: 5 })).toBeGreaterThan(400);
  });

  it("is the geometric mean wait when the threshold is 0 and one count above the reference signals", () => {
    // Reference 1, threshold 0: the first count of 2 or more; P = 1 - e^-1 (1 + 1).
    expect(cusumRunLength({ mean: 1, reference: 1, threshold: 0 })).toBeCloseTo(1 / (1 - 2 / Math.E), 10);
  });

  it("agrees with the chart itself, simulated", () => {
    const random = makeRandom(20_240_817);
    const runs = Array.from({ length: 4000 }, () => {
      const counts = Array.from({ length: 120 }, () => drawPoisson(4, random));
      return poissonCusum(counts, { reference: 3, threshold: 5 }).signalAt ?? 120;
    });
    const mean = runs.reduce((sum, run) => sum + run, 0) / runs.length;
    const spread = Math.sqrt(runs.reduce((sum, run) => sum + (run - mean) ** 2, 0) / runs.length);
    const expected = cusumRunLength({ mean: 4, reference: 3, threshold: 5 });
    expect(Math.abs(mean - expected)).toBeLessThan((4 * spread) / Math.sqrt(runs.length));
  });

  it("says when a signal is too rare to say how rare", () => {
    expect(() => cusumRunLength({ mean: 0.01, reference: 3, threshold: 50 })).toThrow(/^threshold/);
    expect(() => cusumRunLength({ mean: 2, reference: 2.5, threshold: 5 })).toThrow(/^reference/);
  });
});
