import betaCdf from "@stdlib/stats-base-dists-beta-cdf";
import betaQuantile from "@stdlib/stats-base-dists-beta-quantile";
import { findRoot, normalDeviate, normalPValue } from "./numeric";
import type { Counted, Estimate, Interval, LevelOption } from "./types";
import { defaultLevel, reject, requireCounted, requireLevel } from "./validate";

export type RateRatioMethod = "mid-p" | "exact" | "wald";
export type RateRatio = Estimate & { pValue: number };

const methods: Record<RateRatioMethod, string> = {
  "mid-p": "mid-P (conditional binomial)",
  exact: "exact (conditional binomial)",
  wald: "Wald (log scale)",
};

/**
 * Rate of `a` over the rate of `b`. The estimate is always the crude ratio. Given the total of events, those of
 * `a` are binomial; `exact` takes the Clopper-Pearson limits of that share, `mid-p` (the default) counts half the
 * probability of the observed split, `wald` is normal on the log scale.
 *
 * Where one side has no events, every method gives the exact limits and p, and says so: without events in `a` the
 * ratio and its lower limit are 0; without events in `b` the ratio and its upper limit are Infinity, to be shown
 * as "no upper limit". The p-value is that of no difference: for `exact` the outcomes no more likely than the
 * observed one, for `mid-p` twice the smaller mid tail, for `wald` normal.
 * Source: Rothman KJ, Greenland S, Modern Epidemiology, chapter on person-time data; Berry G, Armitage P,
 * The Statistician 1995;44:417-423 for mid-P.
 * @throws RangeError naming `a.events`, `a.exposure`, `b.events`, `b.exposure`, `method` or `level`, or when
 *   neither side has an event
 */
export function rateRatio(
  a: Counted,
  b: Counted,
  { method = "mid-p", level = defaultLevel }: LevelOption & { method?: RateRatioMethod } = {},
): RateRatio {
  requireCounted("a", a);
  requireCounted("b", b);
  requireLevel(level);
  if (!Object.hasOwn(methods, method)) reject("method", `one of ${Object.keys(methods).join(", ")}`, method);
  if (a.events + b.events === 0) reject("a.events and b.events", "above 0 on at least one side");
  const used = a.events === 0 || b.events === 0 ? "exact" : method;
  const estimate = b.events === 0 ? Infinity : a.events / a.exposure / (b.events / b.exposure);
  const solve = { exact: exactLimits, "mid-p": midPLimits, wald: waldLimits }[used];
  const test = { exact: exactPValue, "mid-p": midPValue, wald: waldPValue }[used];
  return { estimate, ...solve(a, b, level), level, method: methods[used], pValue: test(a, b) };
}

function exactLimits(a: Counted, b: Counted, level: number): Interval {
  const tail = (1 - level) / 2;
  const exposureRatio = b.exposure / a.exposure;
  return {
    lower: a.events === 0 ? 0 : exposureRatio * betaOdds(tail, a.events, b.events + 1),
    upper: b.events === 0 ? Infinity : exposureRatio * betaOdds(1 - tail, a.events + 1, b.events),
  };
}

// p / (1 - p), each from its own quantile so that neither cancels near 1.
function betaOdds(p: number, alpha: number, beta: number) {
  return betaQuantile(p, alpha, beta) / betaQuantile(1 - p, beta, alpha);
}

function midPLimits(a: Counted, b: Counted, level: number): Interval {
  const tail = (1 - level) / 2;
  const exact = exactLimits(a, b, level);
  // On the log scale, and between the exact limits, which always bracket both roots.
  const low = Math.log(exact.lower);
  const high = Math.log(exact.upper);
  const share = (logRatio: number) => shareOf(a, b, Math.exp(logRatio));
  return {
    lower: Math.exp(findRoot((x) => midUpperTail(a.events, b.events, share(x)) - tail, low, high)),
    upper: Math.exp(findRoot((x) => midLowerTail(a.events, b.events, share(x)) - tail, low, high)),
  };
}

function waldLimits(a: Counted, b: Counted, level: number): Interval {
  const logRatio = Math.log(a.events / a.exposure / (b.events / b.exposure));
  const margin = normalDeviate(level) * Math.sqrt(1 / a.events + 1 / b.events);
  return { lower: Math.exp(logRatio - margin), upper: Math.exp(logRatio + margin) };
}

function waldPValue(a: Counted, b: Counted) {
  const logRatio = Math.log(a.events / a.exposure / (b.events / b.exposure));
  return normalPValue(logRatio / Math.sqrt(1 / a.events + 1 / b.events));
}

function midPValue(a: Counted, b: Counted) {
  const share = shareOf(a, b, 1);
  const upper = midUpperTail(a.events, b.events, share);
  const lower = midLowerTail(a.events, b.events, share);
  return Math.min(1, 2 * Math.min(upper, lower));
}

/** Both tails of outcomes no more likely than the observed one, with the tolerance R uses for ties. */
function exactPValue(a: Counted, b: Counted) {
  const total = a.events + b.events;
  const share = shareOf(a, b, 1);
  const mode = total * share;
  if (a.events === mode) return 1;
  return a.events < mode
    ? twoTails(a.events, total, share)
    : // Seen from the other side the observed count is again the one below its mode.
      twoTails(b.events, total, shareOf(b, a, 1));
}

function twoTails(events: number, total: number, share: number) {
  const lower = atMost(events, total, share);
  const logOdds = Math.log(share) - Math.log1p(-share);
  const tie = 1e-7;
  let logRelative = 0;
  for (let count = events + 1; count <= total; count++) {
    logRelative += Math.log((total - count + 1) / count) + logOdds;
    if (count > total * share && logRelative <= tie) return Math.min(1, lower + atLeast(count, total, share));
  }
  return lower;
}

/** Share of all events expected in `a` if its rate were `ratio` times that of `b`. */
function shareOf(a: Counted, b: Counted, ratio: number) {
  return 1 / (1 + b.exposure / (ratio * a.exposure));
}

function midUpperTail(events: number, others: number, share: number) {
  const total = events + others;
  return (atLeast(events, total, share) + atLeast(events + 1, total, share)) / 2;
}

function midLowerTail(events: number, others: number, share: number) {
  const total = events + others;
  return (atMost(events, total, share) + atMost(events - 1, total, share)) / 2;
}

// Binomial tails through the beta distribution, which keeps the digits of a small tail.
function atLeast(count: number, total: number, share: number) {
  if (count <= 0) return 1;
  return count > total ? 0 : betaCdf(share, count, total - count + 1);
}

function atMost(count: number, total: number, share: number) {
  if (count < 0) return 0;
  return count >= total ? 1 : betaCdf(1 - share, total - count, count + 1);
}
