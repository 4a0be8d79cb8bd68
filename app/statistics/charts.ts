import { fsum } from "d3-array";
import type { Counted } from "./types";
import { requireCount, requireCounted, requireNonEmpty } from "./validate";

export type UChart = {
  centre: number;
  points: { rate: number; lower: number; upper: number; signal: boolean }[];
};

/**
 * u chart: each rate against the whole, with 3-sigma limits for its own exposure; rates are per unit of exposure.
 * The lower limit is never below 0. With many points one stands out by luck alone.
 * Source: Montgomery DC, Introduction to Statistical Quality Control.
 * @throws RangeError naming `rows`
 */
export function uChart(rows: readonly Counted[]): UChart {
  requireNonEmpty("rows", rows);
  for (const [index, row] of rows.entries()) requireCounted(`rows[${index}]`, row);
  const centre = fsum(rows, (row) => row.events) / fsum(rows, (row) => row.exposure);
  return {
    centre,
    points: rows.map(({ events, exposure }) => {
      const rate = events / exposure;
      const margin = 3 * Math.sqrt(centre / exposure);
      const lower = Math.max(0, centre - margin);
      const upper = centre + margin;
      return { rate, lower, upper, signal: rate < lower || rate > upper };
    }),
  };
}

export type GChart = { centre: number; upper: number; points: { gap: number; signal: boolean }[] };

/**
 * g chart for rare injuries: the number of exposures (or days) between one and the next, upper limit
 * mean + 3 sqrt(mean (mean + 1)). A signal is a gap longer than chance allows, so fewer injuries; shortening gaps
 * have no limit here (it would be below 0).
 * Source: Benneyan JC, Health Care Management Science 2001;4:305-318.
 * @param gaps whole numbers of 0 or more
 * @throws RangeError naming `gaps`
 */
export function gChart(gaps: readonly number[]): GChart {
  requireNonEmpty("gaps", gaps);
  for (const [index, gap] of gaps.entries()) requireCount(`gaps[${index}]`, gap);
  const centre = fsum(gaps) / gaps.length;
  const upper = centre + 3 * Math.sqrt(centre * (centre + 1));
  return { centre, upper, points: gaps.map((gap) => ({ gap, signal: gap > upper })) };
}
