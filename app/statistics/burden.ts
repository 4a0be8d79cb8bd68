import { fsum } from "d3-array";
import { normalDeviate } from "./numeric";
import type { Estimate, RateOptions } from "./types";
import { defaultLevel, defaultPer, requireCount, requireLevel, requirePositive } from "./validate";

/**
 * With no days lost there are no limits. `largestShare` is the longest single injury's share of all days lost
 * (0 if none): above a half it has to be said.
 */
export type Burden = Omit<Estimate, "lower" | "upper"> & {
  lower: number | null;
  upper: number | null;
  largestShare: number;
};

/**
 * Days lost per `per` hours of exposure, as a compound Poisson sum: the standard error of its logarithm is
 * sqrt(sum of d squared) / sum of d, so that one long injury widens the limits as it should.
 * Source: the variance of a compound Poisson sum, estimated by the sum of squares (delta method).
 * @param daysLost whole days of each injury, 0 or more, up to the cut-off day
 * @param exposureHours hours, above 0
 * @throws RangeError naming `daysLost`, `exposureHours`, `per` or `level`
 */
export function burden(
  { daysLost, exposureHours }: { daysLost: readonly number[]; exposureHours: number },
  { per = defaultPer, level = defaultLevel }: RateOptions = {},
): Burden {
  for (const [index, days] of daysLost.entries()) requireCount(`daysLost[${index}]`, days);
  requirePositive("exposureHours", exposureHours);
  requirePositive("per", per);
  requireLevel(level);
  const total = fsum(daysLost);
  if (total === 0) {
    return {
      estimate: 0,
      lower: null,
      upper: null,
      level,
      method: "no days lost, no interval",
      largestShare: 0,
    };
  }
  const estimate = (total / exposureHours) * per;
  const margin = (normalDeviate(level) * Math.sqrt(fsum(daysLost, (days) => days ** 2))) / total;
  return {
    estimate,
    lower: estimate * Math.exp(-margin),
    upper: estimate * Math.exp(margin),
    level,
    method: "compound Poisson (log scale)",
    largestShare: daysLost.reduce((longest, days) => Math.max(longest, days), 0) / total,
  };
}
