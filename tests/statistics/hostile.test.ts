import { describe, expect, it } from "vitest";
import {
  burden,
  clusterRobustRateRatio,
  coefficientRatio,
  cusumRunLength,
  designEffect,
  directlyStandardisedRate,
  exceedance,
  exchangeableRegression,
  funnelLimits,
  gChart,
  incidenceRate,
  kaplanMeier,
  mantelHaenszel,
  mantelHaenszelDifference,
  poissonByarInterval,
  poissonCusum,
  poissonInterval,
  poissonMidPInterval,
  poissonRegression,
  proportion,
  quantile,
  rateDifference,
  rateRatio,
  rateTrend,
  shrunkenRates,
  smallestDetectableRatio,
  standardisedIncidenceRatio,
  teamRateTest,
  tertiles,
  uChart,
} from "~/statistics";

const good = { events: 3, exposure: 100 };
const badCounts = [-1, 0.5, Number.NaN, Infinity, -Infinity, 1e300];
const badExposures = [0, -5, Number.NaN, Infinity];
const badLevels = [0, 1, -0.1, 95, Number.NaN];

function expectRefusal(run: () => unknown, name: string) {
  expect(run).toThrow(RangeError);
  expect(run).toThrow(new RegExp(`^${name.replace(/[.[\]()]/g, "\\$&")}`));
}

describe("bad counts are refused by name", () => {
  it.each(badCounts)("%d", (events) => {
    const bad = { events, exposure: 100 };
    expectRefusal(() => poissonInterval(events), "events");
    expectRefusal(() => poissonMidPInterval(events), "events");
    expectRefusal(() => poissonByarInterval(events), "events");
    expectRefusal(() => exceedance(events, 2), "events");
    expectRefusal(() => incidenceRate(bad), "events");
    expectRefusal(() => rateRatio(bad, good), "a.events");
    expectRefusal(() => rateRatio(good, bad), "b.events");
    expectRefusal(() => rateDifference(good, bad), "b.events");
    expectRefusal(
      () =>
        mantelHaenszel([
          { a: good, b: good },
          { a: bad, b: good },
        ]),
      "strata[1].a.events",
    );
    expectRefusal(() => mantelHaenszelDifference([{ a: good, b: bad }]), "strata[0].b.events");
    expectRefusal(() => directlyStandardisedRate([good, bad], [1, 1]), "strata[1].events");
    expectRefusal(() => standardisedIncidenceRatio({ observed: events, expected: 2 }), "observed");
    expectRefusal(() => burden({ daysLost: [3, events], exposureHours: 10 }), "daysLost[1]");
    expectRefusal(() => proportion({ successes: events, trials: 10 }), "successes");
    expectRefusal(() => proportion({ successes: 1, trials: events }), "trials");
    expectRefusal(() => poissonRegression({ rows: [{ ...bad, x: [] }], names: [] }), "rows[0].events");
    expectRefusal(() => rateTrend([{ ...bad, period: 1 }]), "rows[0].events");
    expectRefusal(() => shrunkenRates([good, bad]), "groups[1].events");
    expectRefusal(() => uChart([bad]), "rows[0].events");
    expectRefusal(() => gChart([events]), "gaps[0]");
    expectRefusal(() => poissonCusum([1, events], { reference: 2, threshold: 4 }), "counts[1]");
  });
});

describe("bad exposures are refused by name", () => {
  it.each(badExposures)("%d", (exposure) => {
    const bad = { events: 3, exposure };
    expectRefusal(() => incidenceRate(bad), "exposure");
    expectRefusal(() => incidenceRate(good, { per: exposure }), "per");
    expectRefusal(() => rateRatio(bad, good), "a.exposure");
    expectRefusal(() => rateDifference(good, bad), "b.exposure");
    expectRefusal(() => mantelHaenszel([{ a: good, b: bad }]), "strata[0].b.exposure");
    expectRefusal(() => directlyStandardisedRate([bad], [1]), "strata[0].exposure");
    expectRefusal(() => standardisedIncidenceRatio({ observed: 2, expected: exposure }), "expected");
    expectRefusal(() => exceedance(2, exposure), "expected");
    expectRefusal(() => burden({ daysLost: [3], exposureHours: exposure }), "exposureHours");
    expectRefusal(() => poissonRegression({ rows: [{ ...bad, x: [] }], names: [] }), "rows[0].exposure");
    expectRefusal(() => rateTrend([{ ...bad, period: 1 }]), "rows[0].exposure");
    expectRefusal(() => shrunkenRates([bad]), "groups[0].exposure");
    expectRefusal(() => uChart([good, bad]), "rows[1].exposure");
    const design = { exposureA: 100, exposureB: 100, rate: 5 };
    expectRefusal(() => smallestDetectableRatio({ ...design, exposureA: exposure }), "exposureA");
    expectRefusal(() => smallestDetectableRatio({ ...design, exposureB: exposure }), "exposureB");
    expectRefusal(() => smallestDetectableRatio({ ...design, rate: exposure }), "rate");
    expectRefusal(() => poissonCusum([1], { reference: 2, threshold: exposure }), "threshold");
    expectRefusal(() => cusumRunLength({ mean: exposure, reference: 2, threshold: 4 }), "mean");
  });
});

describe("levels outside 0 to 1 are refused by name", () => {
  it.each(badLevels)("%d", (level) => {
    const pair = { a: good, b: good };
    expectRefusal(() => poissonInterval(3, { level }), "level");
    expectRefusal(() => incidenceRate(good, { level }), "level");
    expectRefusal(() => rateRatio(good, good, { level }), "level");
    expectRefusal(() => rateDifference(good, good, { level }), "level");
    expectRefusal(() => mantelHaenszel([pair], { level }), "level");
    expectRefusal(() => mantelHaenszelDifference([pair], { level }), "level");
    expectRefusal(() => directlyStandardisedRate([good], [1], { level }), "level");
    expectRefusal(() => standardisedIncidenceRatio({ observed: 2, expected: 3 }, { level }), "level");
    expectRefusal(() => burden({ daysLost: [3], exposureHours: 10 }, { level }), "level");
    expectRefusal(() => proportion({ successes: 1, trials: 2 }, { level }), "level");
    expectRefusal(() => kaplanMeier([{ time: 1, event: true }], { level }), "level");
    expectRefusal(
      () =>
        rateTrend(
          [1, 2, 3].map((period) => ({ ...good, period })),
          { level },
        ),
      "level",
    );
    expectRefusal(() => shrunkenRates([good], { level }), "level");
    expectRefusal(() => smallestDetectableRatio({ exposureA: 9, exposureB: 9, rate: 5, level }), "level");
    const coefficient = {
      name: "x",
      estimate: 0,
      standardError: 1,
      quasiStandardError: 1,
      robustStandardError: 1,
    };
    expectRefusal(() => coefficientRatio(coefficient, { level }), "level");
  });
});

describe("what is empty, upside down or unknown is refused by name", () => {
  it("lists", () => {
    expectRefusal(() => mantelHaenszel([]), "strata");
    expectRefusal(() => directlyStandardisedRate([], []), "strata");
    expectRefusal(() => directlyStandardisedRate([good], [1, 2]), "weights");
    expectRefusal(() => directlyStandardisedRate([good, good], [1, -1]), "weights[1]");
    expectRefusal(() => directlyStandardisedRate([good], [0]), "weights");
    expectRefusal(() => kaplanMeier([]), "rows");
    expectRefusal(() => kaplanMeier([{ time: -1, event: true }]), "rows[0].time");
    expectRefusal(() => poissonRegression({ rows: [], names: [] }), "rows");
    expectRefusal(() => shrunkenRates([]), "groups");
    expectRefusal(() => uChart([]), "rows");
    expectRefusal(() => gChart([]), "gaps");
    expectRefusal(() => quantile([], 0.5), "values");
    expectRefusal(() => quantile([1, Number.NaN], 0.5), "values[1]");
    expectRefusal(() => quantile([1], 1.5), "p");
    expectRefusal(() => quantile([1], Number.NaN), "p");
    expectRefusal(() => tertiles([]), "values");
  });

  it("pairs", () => {
    const none = { events: 0, exposure: 10 };
    expectRefusal(() => rateRatio(none, none), "a.events and b.events");
    expectRefusal(() => mantelHaenszel([{ a: none, b: none }]), "strata");
    expectRefusal(() => mantelHaenszelDifference([{ a: none, b: good }]), "strata");
    expectRefusal(() => proportion({ successes: 3, trials: 2 }), "successes");
    expectRefusal(() => proportion({ successes: 0, trials: 0 }), "trials");
    expectRefusal(() => designEffect({ clusterSize: 0.5, intraclassCorrelation: 0.1 }), "clusterSize");
    expectRefusal(
      () => designEffect({ clusterSize: 5, intraclassCorrelation: 1.1 }),
      "intraclassCorrelation",
    );
    expectRefusal(() => smallestDetectableRatio({ exposureA: 9, exposureB: 9, rate: 5, power: 1 }), "power");
    expectRefusal(
      () => smallestDetectableRatio({ exposureA: 9, exposureB: 9, rate: 5, power: 0.01 }),
      "power",
    );
  });

  it("methods and texts that only untyped callers can pass", () => {
    const unknown: { method?: never } = JSON.parse('{"method":"toString"}');
    expectRefusal(() => rateRatio(good, good, unknown), "method");
    expectRefusal(() => proportion({ successes: 1, trials: 2 }, unknown), "method");
    expectRefusal(() => standardisedIncidenceRatio({ observed: 1, expected: 2 }, unknown), "method");
    const text: typeof good = JSON.parse('{"events":"3","exposure":100}');
    expectRefusal(() => incidenceRate(text), "events");
    const missing: typeof good = JSON.parse('{"events":3}');
    expectRefusal(() => incidenceRate(missing), "exposure");
  });
});

describe("rows of teams are refused by name", () => {
  const row = { events: 2, exposure: 300, group: "a" as const, cluster: "1" };
  const other = { ...row, group: "b" as const };
  const ratioOf = (bad: object) => () => clusterRobustRateRatio([other, { ...row, ...bad }]);

  it.each([
    [{ events: -1 }, "rows[1].events"],
    [{ events: 0.5 }, "rows[1].events"],
    [{ exposure: -3 }, "rows[1].exposure"],
    [{ exposure: Number.NaN }, "rows[1].exposure"],
    [{ exposure: 0 }, "rows[1].exposure"],
    [{ group: "c" }, "rows[1].group"],
    [{ cluster: 7 }, "rows[1].cluster"],
    [{ stratum: "match" }, "rows[1].stratum"],
  ])("%o", (bad, name) => {
    expectRefusal(ratioOf(bad), name);
  });

  it("lists that cannot be compared", () => {
    expectRefusal(() => clusterRobustRateRatio([]), "rows");
    expectRefusal(() => clusterRobustRateRatio([row, row]), "rows");
    expectRefusal(() => clusterRobustRateRatio([row, other], { level: 1 }), "level");
    const none = [row, other].map((one) => ({ ...one, events: 0 }));
    expectRefusal(() => clusterRobustRateRatio(none), "rows");
    const idle = [row, { ...other, events: 0, exposure: 0 }];
    expectRefusal(() => clusterRobustRateRatio(idle), "rows");
    expectRefusal(() => teamRateTest([good], [good, { events: 3, exposure: 0 }]), "b[1].exposure");
    expectRefusal(() => teamRateTest([good, { events: 5, exposure: 9 }], [good], { level: 0 }), "level");
    expectRefusal(() => exchangeableRegression({ rows: [], names: [] }), "rows");
    expectRefusal(() => funnelLimits({ rate: 5, exposure: 1e15 }), "exposure");
  });
});

describe("extremes stay finite", () => {
  it("tiny and huge exposures, many events, high levels", () => {
    for (const exposure of [1e-9, 1e15]) {
      for (const events of [0, 1, 5000, 2_000_000]) {
        const { estimate, lower, upper } = incidenceRate({ events, exposure }, { level: 0.999999 });
        expect([estimate, lower, upper].every(Number.isFinite)).toBe(true);
        expect(lower).toBeLessThanOrEqual(estimate);
        expect(upper).toBeGreaterThan(estimate);
      }
    }
    const lopsided = rateRatio({ events: 1, exposure: 1e-6 }, { events: 200_000, exposure: 1e9 });
    expect(
      Object.values(lopsided).every((value) => typeof value === "string" || Number.isFinite(value)),
    ).toBe(true);
  });
});
