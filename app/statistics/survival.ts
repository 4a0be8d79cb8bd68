import { fsum, group } from "d3-array";
import { chiSquaredTest } from "./mantel-haenszel";
import { normalDeviate } from "./numeric";
import type { ChiSquaredTest, LevelOption } from "./types";
import { defaultLevel, reject, requireLevel, requireNonEmpty, requireNonNegative } from "./validate";

/** `event` false: followed up to `time` without the event (an injury still ongoing, an athlete who left). */
export type FollowUp = { time: number; event: boolean };

export type SurvivalStep = {
  time: number;
  atRisk: number;
  events: number;
  survival: number;
  /** Greenwood; 0 once nobody is left */
  standardError: number;
  lower: number;
  upper: number;
};

export type SurvivalMedian = { estimate: number | null; lower: number | null; upper: number | null };

export type SurvivalCurve = {
  steps: SurvivalStep[];
  median: SurvivalMedian;
  level: number;
  method: string;
};

/**
 * Kaplan-Meier curve with one step per time at which an event happened; those censored at a time still count as
 * at risk there. Limits by Greenwood's variance on the log-log scale. When the curve reaches 0 that variance does
 * not exist: the lower limit is 0 and the upper keeps its last value. The median is the smallest time at which
 * the curve is at most one half, null if it stays above; its limits are those times of the two limit curves.
 * Source: Kalbfleisch JD, Prentice RL, The Statistical Analysis of Failure Time Data; Brookmeyer R, Crowley J,
 * Biometrics 1982;38:29-41 for the limits of the median.
 * @throws RangeError naming `rows` or `level`
 */
export function kaplanMeier(
  rows: readonly FollowUp[],
  { level = defaultLevel }: LevelOption = {},
): SurvivalCurve {
  requireRows("rows", rows);
  requireLevel(level);
  const steps: SurvivalStep[] = [];
  let survival = 1;
  let hazardVariance = 0;
  // Without an earlier step: the exact binomial upper limit of 0 survivors among all.
  let upper = 1 - ((1 - level) / 2) ** (1 / rows.length);
  for (const { time, atRisk, events } of countAtRisk(rows)) {
    const left = atRisk - events;
    survival *= left / atRisk;
    if (left > 0) hazardVariance += events / (atRisk * left);
    const limits = left === 0 ? { lower: 0, upper } : logLogLimits(survival, hazardVariance, level);
    upper = limits.upper;
    const standardError = survival * Math.sqrt(hazardVariance);
    steps.push({ time, atRisk, events, survival, standardError, ...limits });
  }
  return { steps, median: findMedian(steps), level, method: "Kaplan-Meier (Greenwood, log-log)" };
}

/**
 * Log-rank test of the same survival in two groups, by the hypergeometric variance, without continuity correction.
 * Source: Mantel N, Cancer Chemotherapy Reports 1966;50:163-170.
 * @throws RangeError naming `a` or `b`, or when no time has an event with both groups at risk
 */
export function logRank(a: readonly FollowUp[], b: readonly FollowUp[]): ChiSquaredTest {
  requireRows("a", a);
  requireRows("b", b);
  const parts = countAtRisk([...a, ...b]).map(({ time, atRisk, events }) => {
    const atRiskA = a.filter((row) => row.time >= time).length;
    const eventsA = a.filter((row) => row.event && row.time === time).length;
    const share = atRiskA / atRisk;
    const correction = atRisk === 1 ? 0 : (atRisk - events) / (atRisk - 1);
    return { excess: eventsA - events * share, variance: events * share * (1 - share) * correction };
  });
  const variance = fsum(parts, (part) => part.variance);
  if (variance === 0) reject("a and b", "groups with an event while both are at risk");
  return chiSquaredTest(fsum(parts, (part) => part.excess) ** 2 / variance, 1);
}

function requireRows(name: string, rows: readonly FollowUp[]) {
  requireNonEmpty(name, rows);
  for (const [index, { time, event }] of rows.entries()) {
    requireNonNegative(`${name}[${index}].time`, time);
    if (typeof event !== "boolean") reject(`${name}[${index}].event`, "true or false", event);
  }
}

function countAtRisk(rows: readonly FollowUp[]) {
  let atRisk = rows.length;
  const byTime = [...group(rows, (row) => row.time)].sort(([first], [second]) => first - second);
  return byTime
    .map(([time, here]) => {
      const counted = { time, atRisk, events: here.filter((row) => row.event).length };
      atRisk -= here.length;
      return counted;
    })
    .filter(({ events }) => events > 0);
}

function logLogLimits(survival: number, hazardVariance: number, level: number) {
  const margin = (normalDeviate(level) * Math.sqrt(hazardVariance)) / Math.abs(Math.log(survival));
  return { lower: survival ** Math.exp(margin), upper: survival ** Math.exp(-margin) };
}

function findMedian(steps: readonly SurvivalStep[]): SurvivalMedian {
  // A product of fractions that is one half on paper may come out a hair above it.
  const half = 0.5 + 1e-12;
  const firstTime = (curve: "survival" | "lower" | "upper") =>
    steps.find((step) => step[curve] <= half)?.time ?? null;
  return { estimate: firstTime("survival"), lower: firstTime("lower"), upper: firstTime("upper") };
}
