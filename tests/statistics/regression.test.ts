import { describe, expect, it } from "vitest";
import { coefficientRatio, designEffect, poissonRegression, rateTrend } from "~/statistics";
import { expectInterval, expectValue } from "./agreement";
import { teamMonths as months } from "./team-months";

// British doctors, from memory [M]; results with R 4.2.2: glm(y ~ ... + offset(log(py)), poisson).
const smokers = [
  [32, 52_407],
  [104, 43_248],
  [206, 28_612],
  [186, 12_663],
  [102, 5317],
] as const;
const others = [
  [2, 18_790],
  [12, 10_673],
  [28, 5710],
  [28, 2585],
  [31, 1462],
] as const;
const doctors = [
  ...smokers.map(([events, exposure], band) => ({ events, exposure, smoker: 1, age: band + 1 })),
  ...others.map(([events, exposure], band) => ({ events, exposure, smoker: 0, age: band + 1 })),
];

// Results with R [R: glm, sandwich::vcovCL].
const teamMonths = months.map(({ events, exposure, arm, cluster }) => ({
  events,
  exposure,
  x: [arm],
  cluster,
}));

const named = (model: ReturnType<typeof poissonRegression>, name: string) => {
  const found = model.coefficients.find((coefficient) => coefficient.name === name);
  if (found === undefined) throw new Error(`no coefficient ${name}`);
  return found;
};

describe("poissonRegression", () => {
  it("fits the British doctors with age as a factor [R]", () => {
    const model = poissonRegression({
      rows: doctors.map(({ events, exposure, smoker, age }) => ({
        events,
        exposure,
        x: [smoker, ...[2, 3, 4, 5].map((band) => (age === band ? 1 : 0))],
      })),
      names: ["smoker", "age 2", "age 3", "age 4", "age 5"],
    });
    const smoker = named(model, "smoker");
    expectValue(smoker.estimate, "0.354536");
    expectValue(smoker.standardError, "0.107374");
    expectInterval(coefficientRatio(smoker, { standardError: "model" }), "1.425519 (1.154984–1.759421)");
    expectValue(model.deviance, "12.132366");
    expectValue(model.pearson, "11.155333");
    expect(model.df).toBe(4);
    expect(model.coefficients[0]?.name).toBe("(intercept)");
  });

  it("fits age, its square and an interaction [R; model of Dobson's textbook, M]", () => {
    const model = poissonRegression({
      rows: doctors.map(({ events, exposure, smoker, age }) => ({
        events,
        exposure,
        x: [age, age ** 2, smoker, smoker * age],
      })),
      names: ["age", "age squared", "smoker", "smoker x age"],
    });
    const estimates = model.coefficients.slice(1).map(({ estimate }) => estimate);
    for (const [index, printed] of ["2.376478", "-0.197677", "1.440972", "-0.307548"].entries()) {
      expectValue(estimates[index], printed);
    }
    expectValue(model.deviance, "1.635370");
    expect(model.df).toBe(5);
  });

  it("widens for overdispersion: AIDS deaths in Australia, from memory [M; R]", () => {
    const deaths = [0, 1, 2, 3, 1, 4, 9, 18, 23, 31, 20, 25, 37, 45];
    const rows = deaths.map((events, index) => ({ events, exposure: 1, x: [index + 1] }));
    const model = poissonRegression({ rows, names: ["quarter"] });
    const slope = named(model, "quarter");
    expectValue(slope.estimate, "0.2565236");
    expectValue(slope.standardError, "0.0220391");
    expectValue(model.pearson, "28.847305");
    expect(model.df).toBe(12);
    expectValue(model.dispersion, "2.403942");
    expectValue(slope.quasiStandardError, "0.0341709");
  });

  it("gives clustered standard errors that do not pretend that team-months are independent [R]", () => {
    const model = poissonRegression({ rows: teamMonths, names: ["warm-up"] });
    const arm = named(model, "warm-up");
    expectValue(arm.estimate, "-0.923689");
    expectValue(arm.standardError, "0.316228");
    expectValue(arm.robustStandardError, "0.351105", "vcovCL(HC0, cadjust = FALSE) and GEE independence");
    expect(model.clusters).toBe(12);
    const ratio = coefficientRatio(arm);
    expectInterval(ratio, "0.397052 (0.199520–0.790147)");
    expect(ratio.method).toBe("Poisson regression (cluster-robust HC0)");
    // The small-sample factors others apply, which this one leaves out: clusters, then also rows.
    const robust = arm.robustStandardError ?? Number.NaN;
    expectValue(robust * Math.sqrt(12 / 11), "0.366717", "vcovCL default");
    expectValue(robust * Math.sqrt((12 / 11) * (35 / 34)), "0.372071", "HC1 with cadjust");
    const margin = 1.959963985 * robust * Math.sqrt(12 / 11);
    expectValue(Math.exp(arm.estimate - margin), "0.193507");
    expectValue(Math.exp(arm.estimate + margin), "0.814699");
  });

  it("treats each row as its own cluster when none is named, and does not mind their order", () => {
    const rows = teamMonths.map(({ events, exposure, x }) => ({ events, exposure, x }));
    expect(poissonRegression({ rows, names: ["warm-up"] }).clusters).toBe(36);
    const forward = poissonRegression({ rows: teamMonths, names: ["warm-up"] });
    const backward = poissonRegression({ rows: teamMonths.toReversed(), names: ["warm-up"] });
    expect(named(backward, "warm-up").robustStandardError).toBeCloseTo(
      named(forward, "warm-up").robustStandardError ?? Number.NaN,
      12,
    );
  });

  it("has no robust error for one team an arm, instead of one of 0", () => {
    const rows = [
      { events: 3, exposure: 100, x: [0], cluster: "a" },
      { events: 5, exposure: 120, x: [0], cluster: "a" },
      { events: 2, exposure: 90, x: [1], cluster: "b" },
    ];
    const coefficient = named(poissonRegression({ rows, names: ["arm"] }), "arm");
    expect(coefficient.robustStandardError).toBeNull();
    expect(() => coefficientRatio(coefficient)).toThrow(/^standardError/);
    expect(coefficientRatio(coefficient, { standardError: "quasi" }).estimate).toBeGreaterThan(0);
  });

  it("never lets a robust error narrow the interval", () => {
    // Rates within an arm that are all alike: the sandwich is near 0, chance is not.
    const rows = [1, 2, 3, 4, 5, 6].map((team) => ({
      events: team % 2 === 0 ? 4 : 8,
      exposure: 1000,
      x: [team % 2],
      cluster: String(team),
    }));
    const coefficient = named(poissonRegression({ rows, names: ["arm"] }), "arm");
    expect(coefficient.robustStandardError).toBeLessThan(coefficient.standardError);
    const ratio = coefficientRatio(coefficient);
    const model = coefficientRatio(coefficient, { standardError: "model" });
    expect(ratio).toMatchObject({ estimate: model.estimate, lower: model.lower, upper: model.upper });
    expect(ratio.method).toContain("not used");
    expect(coefficient.quasiStandardError).toBe(coefficient.standardError);
  });

  it("gives the rate itself without covariates, and no dispersion without degrees of freedom", () => {
    const alone = poissonRegression({ rows: [{ events: 6, exposure: 1500, x: [] }], names: [] });
    expect(alone.coefficients[0]?.estimate).toBeCloseTo(Math.log(6 / 1500), 10);
    expect(alone.coefficients[0]?.standardError).toBeCloseTo(1 / Math.sqrt(6), 10);
    expect(alone).toMatchObject({ df: 0, dispersion: null });
  });

  it("loses no digits to calendar years", () => {
    const rows = (start: number) =>
      [31, 28, 35, 24, 22, 19, 17].map((events, index) => ({ events, exposure: 9700, x: [start + index] }));
    const near = named(poissonRegression({ rows: rows(1), names: ["year"] }), "year");
    const far = named(poissonRegression({ rows: rows(2019), names: ["year"] }), "year");
    expect(far.estimate).toBeCloseTo(near.estimate, 11);
    expect(far.standardError).toBeCloseTo(near.standardError, 11);
  });

  it("refuses what has no finite answer", () => {
    const row = (events: number, x: number[]) => ({ events, exposure: 100, x });
    const fitting = (rows: { events: number; exposure: number; x: number[] }[], names: string[]) => () =>
      poissonRegression({ rows, names });
    // A group without events, a constant column, a repeated column, too few rows, nothing at all.
    expect(fitting([row(0, [1]), row(0, [1]), row(4, [0]), row(5, [0])], ["arm"])).toThrow(RangeError);
    expect(fitting([row(1, [1]), row(2, [1])], ["arm"])).toThrow(/^rows/);
    expect(fitting([row(1, [1, 2]), row(2, [2, 4]), row(2, [3, 6]), row(1, [4, 8])], ["a", "b"])).toThrow(
      /^rows/,
    );
    expect(fitting([row(1, [1])], ["arm"])).toThrow(/^rows/);
    expect(fitting([row(0, [1]), row(0, [0])], ["arm"])).toThrow(/^rows/);
    expect(fitting([row(1, [1]), row(2, [])], ["arm"])).toThrow(/^rows\[1\]\.x/);
    expect(fitting([row(1, [1]), row(2, [Number.NaN])], ["arm"])).toThrow(/^rows\[1\]\.x\[0\]/);
    expect(fitting([row(1, [1, 2]), row(2, [3, 1]), row(2, [3, 2])], ["a", "a"])).toThrow(/^names/);
    const mixed = [{ ...row(1, [0]), cluster: "a" }, row(2, [1]), row(3, [1])];
    expect(fitting(mixed, ["arm"])).toThrow(/^rows\[1\]\.cluster/);
  });
});

describe("rateTrend", () => {
  const injuriesOf = [31, 28, 35, 24, 22, 19, 17];
  const exposureOf = [9800, 9650, 10_400, 9100, 9900, 9750, 9300];
  const rows = injuriesOf.map((events, index) => ({
    period: index + 1,
    events,
    exposure: exposureOf[index] ?? 0,
  }));

  it("gives the ratio per period [R: glm(inj ~ yr + offset(log(ae)), poisson)]", () => {
    const trend = rateTrend(rows);
    expectValue(Math.log(trend.estimate), "-0.0986615");
    expectValue((trend.estimate - 1) * 100, "-9.395065");
    expectValue((trend.lower - 1) * 100, "-15.952536");
    expectValue((trend.upper - 1) * 100, "-2.325973");
    // Wald statistic from the slope and its standard error.
    expectValue((Math.log(trend.upper) - Math.log(trend.lower)) / 2 / 1.959963985, "0.0383308");
    expectValue(trend.pValue, "0.010055", "of z = -0.0986615 / 0.0383308");
  });

  it("does not narrow for underdispersion: 0.327524 [R]", () => {
    const trend = rateTrend(rows);
    // 0.3275246; the reference cuts the last digit instead of rounding it.
    expectValue(trend.dispersion, "0.32752");
    expect(trend.method).toBe("Poisson trend");
  });

  it("agrees with the likelihood ratio of the trend, 6.711692, and its score test, 6.678358 [R]", () => {
    const asRows = (x: (period: number) => number[]) =>
      rows.map(({ period, events, exposure }) => ({ events, exposure, x: x(period) }));
    const flat = poissonRegression({ rows: asRows(() => []), names: [] });
    const sloped = poissonRegression({ rows: asRows((period) => [period]), names: ["period"] });
    expectValue(flat.deviance - sloped.deviance, "6.711692");
    const rate =
      rows.reduce((sum, row) => sum + row.events, 0) / rows.reduce((sum, row) => sum + row.exposure, 0);
    const centre =
      rows.reduce((sum, row) => sum + row.exposure * row.period, 0) /
      rows.reduce((sum, row) => sum + row.exposure, 0);
    const score = rows.reduce(
      (sum, row) => sum + (row.period - centre) * (row.events - rate * row.exposure),
      0,
    );
    const variance = rows.reduce((sum, row) => sum + rate * row.exposure * (row.period - centre) ** 2, 0);
    expectValue(score ** 2 / variance, "6.678358");
  });

  it("widens and says so when there is more spread than chance", () => {
    const deaths = [0, 1, 2, 3, 1, 4, 9, 18, 23, 31, 20, 25, 37, 45];
    const trend = rateTrend(deaths.map((events, index) => ({ period: index + 1, events, exposure: 1 })));
    expectValue(Math.log(trend.upper / trend.lower) / 2 / 1.959963985, "0.0341709");
    expect(trend.method).toBe("Poisson trend (quasi-likelihood)");
  });

  it("asks for three periods", () => {
    expect(() => rateTrend(rows.slice(0, 2))).toThrow(/^rows/);
    expect(() => rateTrend(rows.map((row) => ({ ...row, period: 1 })))).toThrow(/^rows/);
  });
});

describe("designEffect", () => {
  it("is 1.48 for 17 a team and a correlation of 0.03", () => {
    expectValue(designEffect({ clusterSize: 17, intraclassCorrelation: 0.03 }), "1.48");
  });
});
