import { exactPoisson, poissonInterval } from "./intervals";
import { normalDeviate } from "./numeric";
import type { Counted, Estimate, RateOptions } from "./types";
import { defaultLevel, defaultPer, requireCounted, requireLevel, requirePositive } from "./validate";

/**
 * Events per `per` units of exposure (athlete-exposures or hours) with exact limits. No events: rate 0, lower 0,
 * exact upper.
 * @throws RangeError naming `events`, `exposure`, `per` or `level`
 */
export function incidenceRate(
  counted: Counted,
  { per = defaultPer, level = defaultLevel }: RateOptions = {},
): Estimate {
  requireCounted("", counted);
  requirePositive("per", per);
  const { lower, upper } = poissonInterval(counted.events, { level });
  const scale = per / counted.exposure;
  return {
    estimate: counted.events * scale,
    lower: lower * scale,
    upper: upper * scale,
    level,
    method: exactPoisson,
  };
}

/**
 * Rate of `a` less the rate of `b`, per `per` units of exposure. Normal limits, as usually published; where
 * either side has no events their standard error would be too small (0 if both have none), so that the exact
 * limits of the two rates are combined instead and the method says so.
 * Source: Rothman KJ, Greenland S, Modern Epidemiology; Zou GY, Donner A, Statistics in Medicine
 * 2008;27:1693-1702 for the combined limits.
 * @throws RangeError naming `a.events`, `a.exposure`, `b.events`, `b.exposure`, `per` or `level`
 */
export function rateDifference(
  a: Counted,
  b: Counted,
  { per = defaultPer, level = defaultLevel }: RateOptions = {},
): Estimate {
  requireCounted("a", a);
  requireCounted("b", b);
  requirePositive("per", per);
  requireLevel(level);
  if (a.events === 0 || b.events === 0) return combineExactLimits(a, b, { per, level });
  const estimate = per * (a.events / a.exposure - b.events / b.exposure);
  const margin =
    normalDeviate(level) *
    per *
    Math.hypot(Math.sqrt(a.events) / a.exposure, Math.sqrt(b.events) / b.exposure);
  return {
    estimate,
    lower: estimate - margin,
    upper: estimate + margin,
    level,
    method: "normal (difference of rates)",
  };
}

function combineExactLimits(a: Counted, b: Counted, options: Required<RateOptions>): Estimate {
  const first = incidenceRate(a, options);
  const second = incidenceRate(b, options);
  const estimate = first.estimate - second.estimate;
  return {
    estimate,
    lower: estimate - Math.hypot(first.estimate - first.lower, second.upper - second.estimate),
    upper: estimate + Math.hypot(first.upper - first.estimate, second.estimate - second.lower),
    level: options.level,
    method: "exact limits of both rates combined (Zou-Donner)",
  };
}
