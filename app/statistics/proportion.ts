import betaQuantile from "@stdlib/stats-base-dists-beta-quantile";
import { normalDeviate } from "./numeric";
import type { Estimate, Interval, LevelOption } from "./types";
import { defaultLevel, reject, requireCount, requireLevel, requireNonNegative } from "./validate";

export type ProportionMethod = "wilson" | "clopper-pearson";

const solvers = {
  wilson: { solve: wilson, method: "Wilson score" },
  "clopper-pearson": { solve: clopperPearson, method: "exact binomial (Clopper-Pearson)" },
};

/**
 * Share of trials that were successes (sessions with a warm-up, athletes fully available), from 0 to 1.
 * Source: Wilson EB, JASA 1927;22:209-212; Clopper CJ, Pearson ES, Biometrika 1934;26:404-413.
 * @throws RangeError naming `successes`, `trials`, `method` or `level`
 */
export function proportion(
  { successes, trials }: { successes: number; trials: number },
  { method = "wilson", level = defaultLevel }: LevelOption & { method?: ProportionMethod } = {},
): Estimate {
  requireCount("successes", successes);
  requireCount("trials", trials);
  if (trials === 0) reject("trials", "above 0", trials);
  if (successes > trials) reject("successes", `at most trials (${trials})`, successes);
  requireLevel(level);
  if (!Object.hasOwn(solvers, method)) reject("method", `one of ${Object.keys(solvers).join(", ")}`, method);
  const solver = solvers[method];
  return {
    estimate: successes / trials,
    ...solver.solve(successes, trials, level),
    level,
    method: solver.method,
  };
}

/**
 * Mean of values that each lie between 0 and 1 (share of the blocks done in a warm-up, share of the roster that was
 * available on a day). Such a mean varies at most like a proportion of as many trials, so Wilson limits of the sum
 * rounded down (lower) and up (upper) are conservative.
 * @param sum sum of the values, from 0 to `trials`; may be fractional
 * @param trials how many independent values: a whole number above 0
 * @throws RangeError naming `sum`, `trials` or `level`
 */
export function meanShare(
  { sum, trials }: { sum: number; trials: number },
  { level = defaultLevel }: LevelOption = {},
): Estimate {
  requireNonNegative("sum", sum);
  requireCount("trials", trials);
  if (trials === 0) reject("trials", "above 0", trials);
  if (sum > trials * (1 + sumRounding)) reject("sum", `at most trials (${trials})`, sum);
  requireLevel(level);
  const capped = Math.min(sum, trials);
  return {
    estimate: capped / trials,
    lower: wilson(Math.floor(capped + sumRounding), trials, level).lower,
    upper: wilson(Math.min(trials, Math.ceil(capped - sumRounding)), trials, level).upper,
    level,
    method: "Wilson score of the mean share, conservative",
  };
}

// A sum of fifths that is whole on paper may miss it by a hair.
const sumRounding = 1e-9;

function wilson(successes: number, trials: number, level: number): Interval {
  const z = normalDeviate(level);
  const share = successes / trials;
  const shrink = 1 + z ** 2 / trials;
  const centre = (share + z ** 2 / (2 * trials)) / shrink;
  const margin = (z / shrink) * Math.sqrt((share * (1 - share)) / trials + z ** 2 / (4 * trials ** 2));
  // The algebra gives 0 and 1 at the ends; rounding might miss them by a hair.
  return {
    lower: successes === 0 ? 0 : centre - margin,
    upper: successes === trials ? 1 : centre + margin,
  };
}

function clopperPearson(successes: number, trials: number, level: number): Interval {
  const tail = (1 - level) / 2;
  const failures = trials - successes;
  return {
    lower: successes === 0 ? 0 : betaQuantile(tail, successes, failures + 1),
    upper: failures === 0 ? 1 : betaQuantile(1 - tail, successes + 1, failures),
  };
}
