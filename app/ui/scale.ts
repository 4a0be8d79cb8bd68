import { nice, ticks } from "d3-array";

export type NiceScale = { max: number; ticks: number[] };

/**
 * An axis from 0 to a round number at or above `max`, with about `count` steps between. Anything that is not a
 * positive number gives an axis to 1, so that a column without estimates still has one.
 */
export function niceScale(max: number, count = 5): NiceScale {
  const reach = Number.isFinite(max) && max > 0 ? max : 1;
  const [, top = reach] = nice(0, reach, count);
  return { max: top, ticks: ticks(0, top, count) };
}

/** A tick's words without false precision: 0.5, 2, 1,000. */
export function formatTick(value: number): string {
  return value.toLocaleString("en-GB", { maximumFractionDigits: 6 });
}
