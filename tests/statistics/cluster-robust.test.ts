import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  type ClusterRow,
  clusterRobustRateRatio,
  coefficientRatio,
  exchangeableRegression,
  mantelHaenszel,
  poissonRegression,
  rateRatio,
  teamRateTest,
} from "~/statistics";
import { drawPoisson, expectInterval, expectValue, makeRandom } from "./agreement";
import { teamMonths } from "./team-months";

const rows: ClusterRow[] = teamMonths.map(({ events, exposure, arm, cluster }) => ({
  events,
  exposure,
  cluster,
  group: arm === 1 ? "a" : "b",
}));
const byMonth = rows.map((row, index) => ({ ...row, stratum: teamMonths[index]?.month ?? "" }));

describe("clusterRobustRateRatio", () => {
  it("gives the sandwich of teams that are clusters [R: vcovCL(m, ~team, type = HC0, cadjust = FALSE)]", () => {
    const ratio = clusterRobustRateRatio(rows);
    expectInterval(ratio, "0.397052 (0.199520–0.790147)");
    expectValue(Math.log(ratio.estimate), "-0.923689");
    expect(ratio.method).toBe("Poisson regression (cluster-robust HC0)");
    expect(ratio).toMatchObject({ clusters: 12, fewClusters: true, level: 0.95 });
    // (0.351105 / 0.316228) squared, both printed by R.
    expectValue(ratio.varianceInflation, "1.23275", "of the printed standard errors");
  });

  it("gives CR2 with Satterthwaite's degrees of freedom: p 0.0428, df 8.10 [R]", () => {
    const { smallSample, ...ratio } = clusterRobustRateRatio(rows);
    expectValue(smallSample?.pValue, "0.0428");
    expectValue(smallSample?.df, "8.10");
    expect(smallSample?.estimate).toBeCloseTo(ratio.estimate, 12);
    expect(smallSample?.lower).toBeLessThan(ratio.lower);
    expect(smallSample?.upper).toBeGreaterThan(ratio.upper);
  });

  it("is the regression with a dummy per stratum", () => {
    const model = poissonRegression({
      rows: teamMonths.map(({ arm, month, ...row }) => ({
        ...row,
        x: [arm, month === "month 2" ? 1 : 0, month === "month 3" ? 1 : 0],
      })),
      names: ["arm", "second", "third"],
    });
    const coefficient = model.coefficients[1] ?? expect.fail();
    const { estimate, lower, upper } = coefficientRatio(coefficient);
    const ratio = clusterRobustRateRatio(byMonth);
    expect(ratio.estimate).toBeCloseTo(estimate, 10);
    expect(ratio.lower).toBeCloseTo(lower, 10);
    expect(ratio.upper).toBeCloseTo(upper, 10);
  });

  it("leaves strata out that say nothing, and drops rows of no exposure", () => {
    const silent: ClusterRow[] = [
      { events: 0, exposure: 300, group: "a", cluster: "team 1", stratum: "nothing happened" },
      { events: 0, exposure: 200, group: "b", cluster: "team 9", stratum: "nothing happened" },
      { events: 7, exposure: 200, group: "b", cluster: "team 9", stratum: "only b" },
      { events: 0, exposure: 0, group: "a", cluster: "team 40", stratum: "month 1" },
    ];
    expect(clusterRobustRateRatio([...byMonth, ...silent])).toEqual(clusterRobustRateRatio(byMonth));
  });

  it("falls back to exact limits without events in one group, and says what they leave out", () => {
    const none = rows.map((row) => (row.group === "a" ? { ...row, events: 0 } : row));
    const ratio = clusterRobustRateRatio(none);
    const { a, b } = sums(none);
    const exact = rateRatio(a, b, { method: "exact" });
    expect(ratio).toMatchObject({
      ...exact,
      method: `${exact.method}; teams not accounted for`,
      varianceInflation: null,
      smallSample: null,
    });
    const swapped = clusterRobustRateRatio(none.map(swap));
    expect(swapped).toMatchObject({ estimate: Infinity, upper: Infinity, smallSample: null });
    expect(swapped.lower).toBeCloseTo(1 / ratio.upper, 9);
  });

  it("keeps to the strata where teams cannot be accounted for", () => {
    const none = byMonth.map((row) => (row.group === "a" ? { ...row, events: 0 } : row));
    const strata = ["month 1", "month 2", "month 3"].map((month) =>
      sums(none.filter(({ stratum }) => stratum === month)),
    );
    const { estimate, lower, upper } = mantelHaenszel(strata);
    const ratio = clusterRobustRateRatio(none);
    expect(ratio).toMatchObject({ estimate, lower, upper });
    expect(ratio.method).toBe("exact (conditional on strata); teams not accounted for");
    // No stratum holds both groups: only the crude ratio is left, and it says so.
    const apart = clusterRobustRateRatio(rows.map((row) => ({ ...row, stratum: row.group })));
    expect(apart.method).toBe("exact (conditional binomial); strata and teams not accounted for");
  });

  it("falls back where a group is a single team: its spread cannot be known", () => {
    const single = rows.filter(({ group, cluster }) => group === "b" || cluster === "team 2");
    const ratio = clusterRobustRateRatio(single);
    expect(ratio.method).toContain("teams not accounted for");
    expect(ratio.smallSample).toBeNull();
  });

  it("compares sessions within the same teams", () => {
    const within = [1, 2, 3, 4, 5, 6].flatMap((team): ClusterRow[] => [
      { events: team, exposure: 900, group: "a", cluster: `${team}` },
      { events: 2 * team, exposure: 1000, group: "b", cluster: `${team}` },
    ]);
    const ratio = clusterRobustRateRatio(within);
    expect(ratio.estimate).toBeCloseTo(1000 / 900 / 2, 10);
    // The same ratio in every team: the sandwich is 0, and the limits are those of independent athletes.
    expect(ratio.varianceInflation).toBeCloseTo(0, 10);
    expect(ratio.method).toContain("narrower and not used");
    expect(ratio.smallSample?.method).toContain("model's variance");
  });

  it("says nothing of few clusters from 40 on", () => {
    const many = Array.from(
      { length: 40 },
      (_, team): ClusterRow => ({
        events: 1 + (team % 3),
        exposure: 500,
        group: team < 20 ? "a" : "b",
        cluster: `${team}`,
      }),
    );
    expect(clusterRobustRateRatio(many)).toMatchObject({ clusters: 40, fewClusters: false });
    expect(clusterRobustRateRatio(many.slice(1))).toMatchObject({ clusters: 39, fewClusters: true });
  });
});

const swap = (row: ClusterRow): ClusterRow => ({ ...row, group: row.group === "a" ? "b" : "a" });

function sums(list: readonly ClusterRow[]) {
  const sum = (which: "a" | "b") => {
    const own = list.filter(({ group }) => group === which);
    return {
      events: own.reduce((total, { events }) => total + events, 0),
      exposure: own.reduce((total, { exposure }) => total + exposure, 0),
    };
  };
  return { a: sum("a"), b: sum("b") };
}

const clusterRow = fc.record({
  events: fc.integer({ min: 0, max: 9 }),
  exposure: fc.integer({ min: 1, max: 900 }),
  group: fc.constantFrom("a", "b" as const),
  stratum: fc.constantFrom("x", "y", "z"),
  cluster: fc.constantFrom("1", "2", "3", "4", "5", "6", "7", "8"),
});
const manyRows = fc
  .array(clusterRow, { minLength: 2, maxLength: 60 })
  .filter((list) => sums(list).a.exposure > 0 && sums(list).b.exposure > 0)
  .filter((list) => list.some(({ events }) => events > 0));

describe("clusterRobustRateRatio, whatever the rows", () => {
  it("holds its estimate, inverts on swap, does not mind order nor rows cut in two, and is never NaN", () => {
    fc.assert(
      fc.property(manyRows, (list) => {
        const ratio = clusterRobustRateRatio(list);
        for (const interval of [ratio, ratio.smallSample]) {
          if (interval === null) continue;
          expect(interval.lower).toBeLessThanOrEqual(interval.estimate);
          expect(interval.upper).toBeGreaterThanOrEqual(interval.estimate);
          expect(interval.pValue).toBeGreaterThanOrEqual(0);
          expect(interval.pValue).toBeLessThanOrEqual(1);
        }
        expect(clusterRobustRateRatio(list.toReversed())).toEqual(ratio);
        const swapped = clusterRobustRateRatio(list.map(swap));
        expect(swapped.clusters).toBe(ratio.clusters);
        expectNear(swapped.estimate, 1 / ratio.estimate);
        expectNear(swapped.lower, 1 / ratio.upper);
        expectNear(swapped.smallSample?.upper ?? 1, 1 / (ratio.smallSample?.lower ?? 1));
        const halves = list.flatMap((row) => {
          const events = Math.floor(row.events / 2);
          const half = { ...row, exposure: row.exposure / 2 };
          return [
            { ...half, events },
            { ...half, events: row.events - events },
          ];
        });
        expectNear(clusterRobustRateRatio(halves).lower, ratio.lower);
        const hours = clusterRobustRateRatio(list.map((row) => ({ ...row, exposure: row.exposure * 1.5 })));
        expectNear(hours.upper, ratio.upper);
      }),
      { numRuns: 300 },
    );
  });

  it("covers a true ratio of 1 among ten uneven teams where limits blind to teams do not", () => {
    const random = makeRandom(31_415);
    const draws = 1500;
    let [blind, robust, small] = [0, 0, 0];
    for (let draw = 0; draw < draws; draw++) {
      // Team rates vary by a factor whose coefficient of variation is about one half.
      const teams = Array.from(
        { length: 10 },
        (_, team): ClusterRow => ({
          events: drawPoisson(16 * (0.2 + 1.6 * random()), random),
          exposure: 4000,
          group: team < 5 ? "a" : "b",
          cluster: `${team}`,
        }),
      );
      const holds = ({ lower, upper }: { lower: number; upper: number }) => lower <= 1 && 1 <= upper;
      const ratio = clusterRobustRateRatio(teams);
      if (ratio.smallSample === null) throw new Error("no small-sample limits");
      blind += holds(rateRatio(sums(teams).a, sums(teams).b)) ? 1 : 0;
      robust += holds(ratio) ? 1 : 0;
      small += holds(ratio.smallSample) ? 1 : 0;
    }
    expect(blind / draws).toBeLessThan(0.75);
    // With ten teams the sandwich alone stays short of its level, as the flag says; CR2 with t reaches it.
    expect(robust / draws).toBeLessThan(0.94);
    expect(small / draws).toBeGreaterThan(0.94);
  });
});

function expectNear(actual: number, expected: number) {
  if (actual === expected) return;
  expect(Math.abs(actual - expected)).toBeLessThanOrEqual(1e-7 * Math.max(Math.abs(expected), 1e-12));
}

describe("exchangeableRegression", () => {
  const model = exchangeableRegression({
    rows: teamMonths.map(({ arm, ...row }) => ({ ...row, x: [arm] })),
    names: ["arm"],
  });

  it("agrees with R: geepack::geeglm(corstr = exchangeable)", () => {
    expectValue(model.coefficients[1]?.estimate, "-0.946660");
    expectValue(model.coefficients[1]?.robustStandardError, "0.350633");
    expectValue(model.correlation, "0.512687");
    expect(model.clusters).toBe(12);
  });

  it("does not mind the order of rows", () => {
    const backward = exchangeableRegression({
      rows: teamMonths.toReversed().map(({ arm, ...row }) => ({ ...row, x: [arm] })),
      names: ["arm"],
    });
    expect(backward.correlation).toBeCloseTo(model.correlation, 10);
    expect(backward.coefficients[1]?.estimate).toBeCloseTo(model.coefficients[1]?.estimate ?? 0, 10);
  });

  it("refuses rows that cannot tell a correlation", () => {
    const one = teamMonths.map(({ arm, ...row }, index) => ({ ...row, x: [arm], cluster: `${index}` }));
    expect(() => exchangeableRegression({ rows: one, names: ["arm"] })).toThrow(/^rows/);
    const two = teamMonths.map(({ arm, ...row }) => ({ ...row, x: [arm], cluster: `${arm}` }));
    expect(() => exchangeableRegression({ rows: two, names: ["arm"] })).toThrow(/^rows/);
  });
});

describe("teamRateTest", () => {
  const teams = (which: "a" | "b") =>
    [...new Set(rows.filter(({ group }) => group === which).map(({ cluster }) => cluster))].map(
      (team) => sums(rows.filter(({ cluster }) => cluster === team))[which],
    );

  it("gives the t-test of the teams' rates: t 1.800957, p 0.101893 [R: t.test(var.equal = TRUE)]", () => {
    const test = teamRateTest(teams("b"), teams("a"));
    expectValue(test.statistic, "1.800957");
    expectValue(test.pValue, "0.101893");
    expect(test.df).toBe(10);
    const reversed = teamRateTest(teams("a"), teams("b").toReversed());
    expect(reversed.statistic).toBeCloseTo(-test.statistic, 12);
    expect(reversed.lower).toBeCloseTo(-test.upper, 10);
    expect(teamRateTest(teams("b"), teams("a"), { per: 1 }).estimate * 1000).toBeCloseTo(test.estimate, 10);
  });

  it("refuses teams without spread, and too few of them", () => {
    const team = { events: 3, exposure: 300 };
    expect(() => teamRateTest([team, team], [team])).toThrow(/^a and b/);
    expect(() => teamRateTest([team], [team])).toThrow(/^a and b/);
    expect(() => teamRateTest([], [team])).toThrow(/^a:/);
    expect(() => teamRateTest([team, { events: 0.5, exposure: 1 }], [team])).toThrow(/^a\[1\]\.events/);
  });
});
