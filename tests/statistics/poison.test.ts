import { describe, expect, it } from "vitest";
import * as statistics from "~/statistics";
import { teamMonths } from "./team-months";

const a = { events: 7, exposure: 900 };
const b = { events: 4, exposure: 1100 };
const c = { events: 0, exposure: 500 };
const level = 0.95;
const per = 1000;
const followed = [
  { time: 3, event: true },
  { time: 5, event: false },
  { time: 8, event: true },
];
const regressed = teamMonths.map(({ events, exposure, arm, cluster }) => ({
  events,
  exposure,
  x: [arm],
  cluster,
}));
const clustered = teamMonths.map(({ arm, month, ...row }) => ({
  ...row,
  stratum: month,
  group: arm === 1 ? ("a" as const) : ("b" as const),
}));
const coefficient = {
  name: "x",
  estimate: 0.2,
  standardError: 0.1,
  quasiStandardError: 0.1,
  robustStandardError: 0.2,
};

/** A good call of every export: arguments as data, so that each number or text in them can be spoilt in turn. */
const calls: Record<string, unknown[]> = {
  ageBand: [
    14,
    [
      { from: 0, to: 13 },
      { from: 14, to: null },
    ],
  ],
  ageOn: ["2010-03-05", "2025-03-05"],
  burden: [
    { daysLost: [4, 9, 0], exposureHours: 180 },
    { per, level },
  ],
  clusterRobustRateRatio: [clustered.filter((_, index) => index % 2 === 0), { level }],
  coefficientRatio: [coefficient, { level, standardError: "robust" }],
  cusumReference: [{ inControl: 2, outOfControl: 4 }],
  cusumRunLength: [{ mean: 2, reference: 3, threshold: 4 }],
  designEffect: [{ clusterSize: 17, intraclassCorrelation: 0.03 }],
  directlyStandardisedRate: [[a, b, c], [3, 2, 1], { per, level }],
  exceedance: [7, 2.1],
  exchangeableRegression: [{ rows: regressed.slice(9, 27), names: ["arm"] }],
  funnelLimits: [{ rate: 4, exposure: 5000, per, level }],
  gChart: [[3, 8, 12]],
  incidenceRate: [a, { per, level }],
  kaplanMeier: [followed, { level }],
  limbSymmetryIndex: [{ injured: 120, uninjured: 140, better: "higher" }],
  logRank: [followed, followed],
  mantelHaenszel: [
    [
      { a, b },
      { a: b, b: c },
    ],
    { level },
  ],
  mantelHaenszelDifference: [
    [
      { a, b },
      { a: b, b: c },
    ],
    { per, level },
  ],
  meanShare: [{ sum: 3.4, trials: 7 }, { level }],
  poissonByarInterval: [4, { level }],
  poissonCusum: [[1, 2, 5], { reference: [2, 2, 3], threshold: 4 }],
  poissonInterval: [4, { level }],
  poissonMidPInterval: [4, { level }],
  poissonRegression: [{ rows: regressed.slice(9, 27), names: ["arm"] }],
  proportion: [
    { successes: 3, trials: 8 },
    { level, method: "wilson" },
  ],
  quantile: [[3, 1, 2], 0.4],
  rateDifference: [a, b, { per, level }],
  rateRatio: [a, b, { level, method: "mid-p" }],
  rateTrend: [[a, b, c, a].map((row, period) => ({ ...row, period })), { level }],
  severityBand: [9],
  shrunkenRates: [[a, b, c], { per, level }],
  smallestDetectableRatio: [{ exposureA: 30_000, exposureB: 24_000, rate: 4, power: 0.8, per, level }],
  standardisedIncidenceRatio: [
    { observed: 4, expected: 3.3 },
    { level, method: "exact" },
  ],
  teamRateTest: [[a, b], [c, a], { per, level }],
  tertiles: [[3, 1, 2]],
  timeLoss: [{ onset: "2025-03-05", fullOn: "2025-03-09", asOf: "2025-03-20" }],
  uChart: [[a, b, c]],
};

const poisons = [
  Number.NaN,
  Infinity,
  -Infinity,
  -1,
  0,
  -0,
  0.5,
  1.5,
  1e300,
  -1e300,
  Number.MIN_VALUE,
  2 ** 53,
  null,
  "3",
  "",
  true,
  [],
];

type Path = (string | number)[];

function leaves(value: unknown, path: Path = []): Path[] {
  if (typeof value !== "object" || value === null) return [path];
  return Object.entries(value).flatMap(([key, inner]) => leaves(inner, [...path, key]));
}

function spoil(value: unknown, [key, ...rest]: Path, poison: unknown): unknown {
  if (key === undefined) return poison;
  const copy: unknown = structuredClone(value);
  if (Array.isArray(copy)) copy[Number(key)] = spoil(copy[Number(key)], rest, poison);
  else if (typeof copy === "object" && copy !== null)
    Object.assign(copy, { [key]: spoil(Reflect.get(copy, key), rest, poison) });
  return copy;
}

/** What must never reach a page: anything that is not a number where a number should be. */
function unfit(result: unknown): boolean {
  if (typeof result === "number") return Number.isNaN(result);
  return typeof result === "object" && result !== null && Object.values(result).some(unfit);
}

function call(name: string, args: unknown[]): unknown {
  const found: unknown = Reflect.get(statistics, name);
  if (typeof found !== "function") throw new Error(`no export ${name}`);
  return Reflect.apply(found, undefined, args);
}

const functions = Object.entries(statistics).flatMap(([name, value]) =>
  typeof value === "function" ? [name] : [],
);

describe("every export, with any one of its values spoilt", () => {
  it("is named here", () => {
    expect(Object.keys(calls).toSorted()).toEqual(functions.toSorted());
  });

  it.each(Object.entries(calls))("%s answers, or refuses by name, and is never NaN", (name, args) => {
    expect(unfit(call(name, args))).toBe(false);
    let refused = 0;
    for (const path of leaves(args)) {
      for (const poison of poisons) {
        const spoilt = spoil(args, path, poison);
        const what = `${name} with ${path.join(".")} = ${String(poison)}`;
        try {
          const result = call(name, Array.isArray(spoilt) ? spoilt : []);
          expect(unfit(result), `${what}: ${JSON.stringify(result)}`).toBe(false);
        } catch (error) {
          expect(error, what).toBeInstanceOf(RangeError);
          expect(String(error), what).toMatch(/^RangeError: [a-zA-Z][\w.[\]() ]*: must be /);
          refused += 1;
        }
      }
    }
    expect(refused).toBeGreaterThan(0);
  });
});
