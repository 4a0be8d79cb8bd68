import { fsum } from "d3-array";
import { gammaQuantile } from "./gamma";
import { poissonInterval } from "./intervals";
import { findRoot } from "./numeric";
import type { Counted, Estimate, RateOptions } from "./types";
import {
  defaultLevel,
  defaultPer,
  requireCounted,
  requireLevel,
  requireNonEmpty,
  requirePositive,
} from "./validate";

export type ShrunkenRates = {
  /** mean of the groups' true rates, per `per` units of exposure */
  mean: number;
  /** shape of their gamma distribution: the larger, the more alike; Infinity when no more spread than chance */
  shape: number;
  groups: Estimate[];
};

// Beyond this shape the groups' true rates differ by less than 0.04 per cent: no more spread than chance.
const largestShape = 1e7;

/**
 * Rates of groups (teams) pulled towards their common mean, the more so the smaller their exposure: gamma-Poisson
 * empirical Bayes with maximum likelihood. Where the groups vary no more than chance would make them, every group
 * gets the mean with the exact limits of the pooled rate. Limits do not include the uncertainty of mean and shape.
 * Source: Clayton D, Kaldor J, Biometrics 1987;43:671-681.
 * @throws RangeError naming `groups`, `per` or `level`
 */
export function shrunkenRates(
  groups: readonly Counted[],
  { per = defaultPer, level = defaultLevel }: RateOptions = {},
): ShrunkenRates {
  requireNonEmpty("groups", groups);
  for (const [index, group] of groups.entries()) requireCounted(`groups[${index}]`, group);
  requirePositive("per", per);
  requireLevel(level);
  const shape = findShape(groups);
  if (shape === Infinity) return poolAll(groups, per, level);
  const mean = meanForShape(groups, shape);
  const tail = (1 - level) / 2;
  return {
    mean: mean * per,
    shape,
    groups: groups.map(({ events, exposure }) => {
      const scale = per / (shape / mean + exposure);
      return {
        estimate: (shape + events) * scale,
        lower: gammaQuantile(tail, shape + events) * scale,
        upper: gammaQuantile(1 - tail, shape + events) * scale,
        level,
        method: "gamma-Poisson shrinkage (maximum likelihood)",
      };
    }),
  };
}

function poolAll(groups: readonly Counted[], per: number, level: number): ShrunkenRates {
  const events = fsum(groups, (group) => group.events);
  const scale = per / fsum(groups, (group) => group.exposure);
  const { lower, upper } = poissonInterval(events, { level });
  const pooled = {
    estimate: events * scale,
    lower: lower * scale,
    upper: upper * scale,
    level,
    method: "no overdispersion found: pooled rate, exact Poisson (Garwood)",
  };
  return { mean: pooled.estimate, shape: Infinity, groups: groups.map(() => ({ ...pooled })) };
}

function findShape(groups: readonly Counted[]) {
  const pooled = fsum(groups, (g) => g.events) / fsum(groups, (g) => g.exposure);
  // The likelihood's slope in 1 / shape at 0: above 0 only if the spread is more than Poisson.
  const slope = fsum(groups, (g) => (g.events - pooled * g.exposure) ** 2 - g.events);
  if (!(slope > 0)) return Infinity;
  const score = (logShape: number) => shapeScore(groups, Math.exp(logShape));
  const high = Math.log(largestShape);
  if (score(high) >= 0) return Infinity;
  let low = 0;
  while (score(low) <= 0) low -= 2;
  return Math.exp(findRoot(score, low, high));
}

/** Derivative of the negative binomial log-likelihood by the shape, the mean being at its best for that shape. */
function shapeScore(groups: readonly Counted[], shape: number) {
  const mean = meanForShape(groups, shape);
  return fsum(groups, ({ events, exposure }) => {
    const expected = mean * exposure;
    // digamma(events + shape) - digamma(shape) is this finite sum.
    let sum = 0;
    for (let j = 0; j < events; j++) sum += 1 / (shape + j);
    return sum - Math.log1p(expected / shape) + (expected - events) / (shape + expected);
  });
}

/** Maximum likelihood mean rate for a given shape: the root lies between the lowest and highest crude rate. */
function meanForShape(groups: readonly Counted[], shape: number) {
  const rates = groups.map(({ events, exposure }) => events / exposure);
  const score = (mean: number) =>
    fsum(groups, ({ events, exposure }) => (events - mean * exposure) / (shape + mean * exposure));
  return findRoot(score, Math.min(...rates), Math.max(...rates));
}
