import { describe, expect, it } from "vitest";
import { kaplanMeier, logRank, quantile, tertiles } from "~/statistics";
import { expectInterval, expectValue } from "./agreement";

/** "6 6+ 10": a plus is a censored time. */
const followUps = (text: string) =>
  text.split(" ").map((entry) => ({ time: Number.parseFloat(entry), event: !entry.endsWith("+") }));

// Remission times of the 6-MP trial (MASS::gehan). Results with R 4.2.2:
// survfit(Surv(time, cens) ~ 1, conf.type = "log-log").
const treated = followUps("6 6 6 6+ 7 9+ 10 10+ 11+ 13 16 17+ 19+ 20+ 22 23 25+ 32+ 32+ 34+ 35+");
const placebo = followUps("1 1 2 2 3 4 4 5 5 8 8 8 8 11 11 12 12 15 17 22 23");
const returns = followUps("3 5 5 8 12 14 14+ 21 28+ 30 45+ 60+");

describe("kaplanMeier", () => {
  it("agrees on the 6-MP trial [R]", () => {
    const { steps, median } = kaplanMeier(treated);
    const printed = [
      [6, "0.8571429"],
      [7, "0.8067227"],
      [10, "0.7529412"],
      [13, "0.6901961"],
      [16, "0.6274510"],
      [22, "0.5378151"],
      [23, "0.4481793"],
    ] as const;
    expect(steps.map(({ time }) => time)).toEqual(printed.map(([time]) => time));
    for (const [index, [, survival]] of printed.entries()) expectValue(steps[index]?.survival, survival);
    expect(steps[0]).toMatchObject({ atRisk: 21, events: 3 });
    expectValue(steps[0]?.standardError, "0.0763604");
    expectValue(steps[6]?.standardError, "0.1345915");
    expectInterval(steps[6] ?? expect.fail(), "0.1880520–0.6801426", "at 23");
    expect(median.estimate).toBe(23);
    expect(median.upper).toBeNull();
  });

  it("steps down the days to return, censoring those still out [R]", () => {
    const { steps, median } = kaplanMeier(returns);
    expect(steps.map(({ time }) => time)).toEqual([3, 5, 8, 12, 14, 21, 30]);
    const printed = ["0.9166667", "0.75", "0.6666667", "0.5833333", "0.5", "0.4", "0.2666667"];
    for (const [index, survival] of printed.entries()) {
      expect(steps[index]?.survival).toBeCloseTo(Number(survival), 6);
    }
    // R gives 17.5, the middle of the flat at exactly one half; ours is the smallest time at or below it.
    expect(median.estimate).toBe(14);
  });

  it("has no median while more than half are still out", () => {
    expect(kaplanMeier(followUps("4 9+ 12+ 20+")).median).toMatchObject({ estimate: null, upper: null });
    expect(kaplanMeier(followUps("9+ 12+"))).toMatchObject({ steps: [], median: { estimate: null } });
  });

  it("stays finite when everyone has returned", () => {
    const { steps } = kaplanMeier(followUps("2 5 9"));
    expect(steps[2]).toMatchObject({ survival: 0, lower: 0, standardError: 0 });
    expect(steps[2]?.upper).toBe(steps[1]?.upper);
    const together = kaplanMeier(followUps("7 7 7"));
    expect(together.median.estimate).toBe(7);
    // Exact binomial upper limit of 0 of 3.
    expect(together.steps[0]?.upper).toBeCloseTo(1 - 0.025 ** (1 / 3), 12);
  });

  it("does not depend on the order of rows", () => {
    expect(kaplanMeier(treated.toReversed())).toEqual(kaplanMeier(treated));
  });
});

describe("logRank", () => {
  it("agrees on the 6-MP trial: 16.792941 [R: survdiff]", () => {
    const test = logRank(treated, placebo);
    expectValue(test.statistic, "16.792941");
    expect(test.df).toBe(1);
    expect(test.pValue).toBeLessThan(1e-4);
    expect(logRank(placebo, treated).statistic).toBeCloseTo(test.statistic, 9);
  });

  it("refuses groups that cannot be compared", () => {
    expect(() => logRank(followUps("3+ 4+"), followUps("5+"))).toThrow(/^a and b/);
    expect(() => logRank([], placebo)).toThrow(/^a:/);
  });
});

describe("quantiles", () => {
  const shares = [0.42, 0.55, 0.61, 0.68, 0.73, 0.77, 0.84, 0.9, 0.96];

  it("cuts tertiles by type 7, not type 6 [R]", () => {
    const [low, high] = tertiles(shares);
    expectValue(low, "0.656667");
    expectValue(high, "0.793333");
    expect(Math.abs(low - 0.633333)).toBeGreaterThan(0.01);
  });

  it("interpolates, and gives the ends at 0 and 1 whatever the order", () => {
    expect(quantile([3, 1, 2, 4], 0.5)).toBe(2.5);
    expect(quantile([9, 1, 5], 0)).toBe(1);
    expect(quantile([9, 1, 5], 1)).toBe(9);
    expect(quantile([7], 0.3)).toBe(7);
  });
});
