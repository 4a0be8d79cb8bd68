import type { RateEstimate } from "../rate-bar";
import { formatTick, niceScale } from "../scale";
import { ticksThatFit } from "./chart-frame";

/** The axis of an interval chart: from `min` to `max`, with the figures written at it. */
export type IntervalAxis = { min: number; max: number; ticks: number[]; logarithmic: boolean };

type Input = { rates: RateEstimate[]; reference?: number; max?: number };

/** From 0 to a round number above every finite upper limit, or to `max`. */
export function linearAxis({ rates, reference = 0, max }: Input): IntervalAxis {
  const figures = rates.flatMap(({ estimate, upper }) => [estimate, upper]).filter(Number.isFinite);
  return { min: 0, ...niceScale(max ?? Math.max(0, reference, ...figures)), logarithmic: false };
}

/** How far an axis of ratios follows a limit: further off the limit ends in an arrow, or all else would be pressed. */
const farthest = 16;
/** A ratio past a million lies at the end. */
const mostPowers = 20;
/** At most this many figures are written at an axis of ratios. */
const mostTicks = 9;

/** Powers of two from below the smallest estimate to above the largest, the same way on both sides of 1 with `max`. */
export function ratioAxis({ rates, reference = 1, max }: Input): IntervalAxis {
  const isLimit = (value: number) => Number.isFinite(value) && value > 0;
  // An estimate keeps some way to the end, for the arrow of a limit that there is none.
  const estimates = rates.map(({ estimate }) => estimate).filter(isLimit);
  const ends = estimates.flatMap((estimate) => [estimate / 1.5, estimate * 1.5]);
  const limits = rates.flatMap(({ lower, upper }) => [lower, upper]).filter(isLimit);
  const near = limits.map((limit) => Math.min(farthest, Math.max(1 / farthest, limit)));
  const fixed = reference > 0 && Number.isFinite(reference) ? [reference] : [];
  const reach = max !== undefined && max > 1 ? { low: 1 / max, high: max } : null;
  const low = reach?.low ?? Math.min(0.5, ...ends, ...near, ...fixed);
  const high = reach?.high ?? Math.max(2, ...ends, ...near, ...fixed);
  const from = Math.max(-mostPowers, Math.floor(Math.log2(low) + 1e-9));
  const to = Math.min(mostPowers, Math.ceil(Math.log2(high) - 1e-9));
  const every = Math.ceil((to - from + 1) / mostTicks);
  const ticks: number[] = [];
  // 1 is always among them.
  for (let power = from; power <= to; power += 1) if (power % every === 0) ticks.push(2 ** power);
  return { min: 2 ** from, max: 2 ** to, ticks, logarithmic: true };
}

/** The figures whose words fit on an axis of this width in px, always with 0 or, of ratios, 1. */
export function shownTicks({ ticks, logarithmic }: IntervalAxis, width: number): number[] {
  const keep = logarithmic ? Math.max(0, ticks.indexOf(1)) : 0;
  const spacing = width / Math.max(1, ticks.length - 1);
  const shown = new Set(ticksThatFit(ticks.map(formatTick), spacing, keep));
  return ticks.filter((_, index) => shown.has(index));
}
