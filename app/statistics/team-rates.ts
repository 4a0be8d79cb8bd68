import tCdf from "@stdlib/stats-base-dists-t-cdf";
import tQuantile from "@stdlib/stats-base-dists-t-quantile";
import { fsum, mean } from "d3-array";
import type { Counted, Estimate, RateOptions } from "./types";
import { defaultLevel, defaultPer, reject, requireCounted, requireLevel, requirePositive } from "./validate";

/** Difference of the mean team rates (a less b) with its t statistic. */
export type TeamRateTest = Estimate & { statistic: number; df: number; pValue: number };

/**
 * Two groups of teams compared by one rate a team: pooled two-sample t-test. Each team counts the same, whatever its
 * exposure, so that neither teams as clusters nor overdispersion need a model; it finds less than a regression.
 * Source: Donner A, Klar N, Design and Analysis of Cluster Randomization Trials (cluster-level analysis).
 * @param a events and exposure of each team of the first group, b of the second; at least three teams in all
 * @throws RangeError naming `a`, `b`, `per` or `level`, or when the rates do not vary within either group
 */
export function teamRateTest(
  a: readonly Counted[],
  b: readonly Counted[],
  { per = defaultPer, level = defaultLevel }: RateOptions = {},
): TeamRateTest {
  requireTeams("a", a);
  requireTeams("b", b);
  requirePositive("per", per);
  requireLevel(level);
  const df = a.length + b.length - 2;
  if (df < 1) reject("a and b", "three teams or more in all", df + 2);
  const [first, second] = [summarise(a), summarise(b)];
  const variance = ((first.squares + second.squares) / df) * (1 / a.length + 1 / b.length);
  // Rates that are equal but for rounding leave squares of the size of rounding errors.
  const size = Math.max(first.average, second.average);
  if (!(variance > (size * 1e-12) ** 2)) reject("a and b", "teams whose rates vary within their group");
  const difference = first.average - second.average;
  const standardError = Math.sqrt(variance);
  const margin = tQuantile(0.5 + level / 2, df) * standardError;
  const statistic = difference / standardError;
  return {
    estimate: difference * per,
    lower: (difference - margin) * per,
    upper: (difference + margin) * per,
    level,
    method: "t-test of the teams' rates",
    statistic,
    df,
    pValue: 2 * tCdf(-Math.abs(statistic), df),
  };
}

function requireTeams(name: string, teams: readonly Counted[]) {
  if (teams.length === 0) reject(name, "a list with at least one team");
  for (const [index, team] of teams.entries()) requireCounted(`${name}[${index}]`, team);
}

function summarise(teams: readonly Counted[]) {
  const rates = teams.map(({ events, exposure }) => events / exposure);
  const average = mean(rates) ?? Number.NaN;
  return { average, squares: fsum(rates, (rate) => (rate - average) ** 2) };
}
