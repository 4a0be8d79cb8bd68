import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  ageBand,
  burden,
  directlyStandardisedRate,
  exchangeableRegression,
  gChart,
  incidenceRate,
  kaplanMeier,
  logRank,
  mantelHaenszel,
  mantelHaenszelDifference,
  poissonRegression,
  proportion,
  quantile,
  rateTrend,
  shrunkenRates,
  standardisedIncidenceRatio,
  teamRateTest,
  tertiles,
  uChart,
} from "~/statistics";
import { makeRandom } from "./agreement";

/** What a function answers, or the words in which it refuses: both must not depend on the order of rows. */
function outcome(run: () => unknown): unknown {
  try {
    return run();
  } catch (error) {
    if (error instanceof RangeError) return error.message.replace(/\[\d+\]/g, "[]");
    throw error;
  }
}

function expectSame(actual: unknown, expected: unknown, path = "") {
  if (typeof actual === "number" && typeof expected === "number") {
    if (Object.is(actual, expected) || actual === expected) return;
    const size = Math.max(Math.abs(actual), Math.abs(expected), 1e-3);
    expect(Math.abs(actual - expected), `${path}: ${actual}, ${expected}`).toBeLessThanOrEqual(1e-7 * size);
  } else if (typeof actual === "object" && actual !== null && typeof expected === "object" && expected) {
    expect(Object.keys(actual)).toEqual(Object.keys(expected));
    for (const key of Object.keys(actual))
      expectSame(Reflect.get(actual, key), Reflect.get(expected, key), `${path}.${key}`);
  } else expect(actual, path).toBe(expected);
}

const exposure = fc.integer({ min: 1, max: 5000 });
const counted = fc.record({ events: fc.integer({ min: 0, max: 40 }), exposure });
const lists = <T>(row: fc.Arbitrary<T>, minLength = 1) => fc.array(row, { minLength, maxLength: 14 });
const seed = fc.integer();

function shuffle<T>(rows: readonly T[], from: number) {
  const random = makeRandom(from);
  return rows
    .map((row) => ({ row, key: random() }))
    .sort((first, second) => first.key - second.key)
    .map(({ row }) => row);
}

/** Holds a function of rows to the same outcome for the same rows shuffled. */
function expectOrderless<T>(row: fc.Arbitrary<T>, run: (rows: T[]) => unknown) {
  fc.assert(
    fc.property(lists(row), seed, (rows, from) => {
      expectSame(
        outcome(() => run(shuffle(rows, from))),
        outcome(() => run(rows)),
      );
    }),
    { numRuns: 80 },
  );
}

const stratum = fc.record({ a: counted, b: counted });
const followUp = fc.record({ time: fc.integer({ min: 0, max: 30 }), event: fc.boolean() });
const regressed = fc.record({
  events: fc.integer({ min: 0, max: 9 }),
  exposure,
  x: fc.tuple(fc.integer({ min: 0, max: 1 }), fc.integer({ min: -3, max: 3 })),
  cluster: fc.constantFrom("1", "2", "3", "4", "5"),
});

describe("the order of rows never matters", () => {
  it("to pooled and standardised rates", () => {
    expectOrderless(stratum, (rows) => mantelHaenszel(rows));
    expectOrderless(stratum, (rows) => mantelHaenszelDifference(rows));
    expectOrderless(fc.tuple(counted, fc.integer({ min: 1, max: 9 })), (rows) =>
      directlyStandardisedRate(
        rows.map(([row]) => row),
        rows.map(([, weight]) => weight),
      ),
    );
    expectOrderless(fc.integer({ min: 0, max: 200 }), (daysLost) => burden({ daysLost, exposureHours: 70 }));
  });

  it("to regressions and trends", () => {
    const names = ["arm", "x"];
    expectOrderless(regressed, (rows) => poissonRegression({ rows, names }));
    expectOrderless(regressed, (rows) => exchangeableRegression({ rows, names }));
    expectOrderless(
      fc.record({ events: fc.nat(40), exposure, period: fc.integer({ min: 1, max: 9 }) }),
      (rows) => rateTrend(rows),
    );
  });

  it("to shrunken rates, charts and tests of teams, each row keeping its own", () => {
    const keyed = fc.record({ events: fc.nat(40), exposure, key: fc.uuid() });
    expectOrderless(keyed, (rows) => {
      const { groups, ...whole } = shrunkenRates(rows);
      return { ...whole, ...Object.fromEntries(inOrder(rows.map(({ key }, i) => [key, groups[i]]))) };
    });
    expectOrderless(keyed, (rows) => {
      const { points, centre } = uChart(rows);
      return { centre, ...Object.fromEntries(inOrder(rows.map(({ key }, i) => [key, points[i]]))) };
    });
    expectOrderless(counted, (rows) =>
      teamRateTest(rows, [
        { events: 3, exposure: 700 },
        { events: 5, exposure: 600 },
      ]),
    );
    expectOrderless(fc.nat(90), (gaps) => ({ centre: gChart(gaps).centre, upper: gChart(gaps).upper }));
  });

  it("to survival, quantiles and bands", () => {
    expectOrderless(followUp, (rows) => kaplanMeier(rows));
    expectOrderless(followUp, (rows) =>
      logRank(rows, [
        { time: 4, event: true },
        { time: 40, event: false },
      ]),
    );
    expectOrderless(fc.integer({ min: -50, max: 50 }), (values) => [
      quantile(values, 0.3),
      ...tertiles(values),
    ]);
    const bands = [
      { from: 0, to: 9 },
      { from: 10, to: 15 },
      { from: 16, to: null },
    ];
    fc.assert(
      fc.property(fc.nat(90), seed, (age, from) => {
        expect(ageBand(age, shuffle(bands, from))).toBe(ageBand(age, bands));
      }),
    );
  });
});

function inOrder<T>(entries: [string, T][]) {
  return entries.sort(([first], [second]) => (first < second ? -1 : 1));
}

const cut = (row: { events: number; exposure: number }, share: number) => {
  const events = Math.floor(row.events * share);
  const part = row.exposure * share;
  return [
    { events, exposure: part },
    { events: row.events - events, exposure: row.exposure - part },
  ] as const;
};
const share = fc.double({ min: 0.05, max: 0.95, noNaN: true });

describe("merging strata", () => {
  it("with the same split of exposure changes no pooled ratio, difference, nor their limits", () => {
    fc.assert(
      fc.property(lists(stratum), share, (strata, at) => {
        // Each stratum cut in two, both groups in the same place: merging them again must change nothing.
        const halves = strata.flatMap(({ a, b }) => {
          const [firstA, secondA] = cut(a, at);
          const [firstB, secondB] = cut(b, at);
          return [
            { a: firstA, b: firstB },
            { a: secondA, b: secondB },
          ];
        });
        const pooled = (rows: typeof strata) =>
          outcome(() => {
            const { heterogeneity: _, ...rest } = mantelHaenszel(rows);
            return rest;
          });
        expectSame(pooled(halves), pooled(strata));
        expectSame(
          outcome(() => mantelHaenszelDifference(halves).estimate),
          outcome(() => mantelHaenszelDifference(strata).estimate),
        );
      }),
    );
  });

  it("weighted by their own exposure, gives the crude rate", () => {
    fc.assert(
      fc.property(lists(counted), (rows) => {
        const whole = { events: sum(rows, "events"), exposure: sum(rows, "exposure") };
        const weights = rows.map((row) => row.exposure);
        const standardised = directlyStandardisedRate(rows, weights);
        const crude = incidenceRate(whole);
        expectSame(standardised.estimate, crude.estimate);
        // Every event then weighs the same, and the gamma limits are the exact ones.
        expectSame(standardised.lower, crude.lower);
        expectSame(standardised.upper, crude.upper);
      }),
    );
  });

  it("with equal covariates changes no coefficient nor standard error", () => {
    fc.assert(
      fc.property(lists(regressed, 6), share, (rows, at) => {
        const coefficientsOf = (list: typeof rows) =>
          outcome(() => {
            const { coefficients } = poissonRegression({ rows: list, names: ["arm", "x"] });
            // The quasi-likelihood's dispersion does depend on how finely rows are cut.
            return coefficients.map(({ quasiStandardError: _, ...rest }) => rest);
          });
        const halves = rows.flatMap((row) => cut(row, at).map((part) => ({ ...row, ...part })));
        const merged = coefficientsOf(rows);
        // What is refused for too few rows may be enough once cut; what is answered must stay.
        if (typeof merged !== "string") expectSame(coefficientsOf(halves), merged);
      }),
      { numRuns: 80 },
    );
  });

  it("a standard's own strata are expected to have their own rate: the ratio is 1", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 500 }), (observed) => {
        const { estimate, lower, upper } = standardisedIncidenceRatio({ observed, expected: observed });
        expect(estimate).toBe(1);
        expect(lower).toBeLessThan(1);
        expect(upper).toBeGreaterThan(1);
      }),
    );
  });
});

function sum(rows: readonly { events: number; exposure: number }[], key: "events" | "exposure") {
  return rows.reduce((total, row) => total + row[key], 0);
}

describe("swapping groups and turning time round", () => {
  it("inverts pooled ratios and trends, and negates differences", () => {
    fc.assert(
      fc.property(lists(stratum), (strata) => {
        const swapped = strata.map(({ a, b }) => ({ a: b, b: a }));
        const forward = outcome(() => mantelHaenszel(strata));
        const backward = outcome(() => mantelHaenszel(swapped));
        if (isInterval(forward) && isInterval(backward)) {
          expectSame(backward.estimate, 1 / forward.estimate);
          expectSame(backward.lower, 1 / forward.upper);
          expectSame(backward.upper, 1 / forward.lower);
        } else expect(backward).toBe(forward);
        const difference = outcome(() => mantelHaenszelDifference(strata));
        const reversed = outcome(() => mantelHaenszelDifference(swapped));
        if (isInterval(difference) && isInterval(reversed)) expectSame(reversed.lower, -difference.upper);
        else expect(reversed).toBe(difference);
      }),
    );
    const rows = [9, 12, 11, 17].map((events, index) => ({ events, exposure: 900 + index, period: index }));
    const back = rateTrend(rows.map((row) => ({ ...row, period: -row.period })));
    expectSame(back.upper, 1 / rateTrend(rows).lower);
  });

  it("turns a proportion into its complement", () => {
    fc.assert(
      fc.property(fc.nat(300), fc.nat(300), (successes, failures) => {
        const trials = successes + failures;
        if (trials === 0) return;
        for (const method of ["wilson", "clopper-pearson"] as const) {
          const of = (count: number) => proportion({ successes: count, trials }, { method });
          expectSame(of(failures).lower, 1 - of(successes).upper);
        }
      }),
    );
  });
});

function isInterval(value: unknown): value is { estimate: number; lower: number; upper: number } {
  return typeof value === "object" && value !== null && "estimate" in value;
}
