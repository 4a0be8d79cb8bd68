/** Events (injuries) over an exposure: athlete-exposures or hours, never both in one calculation. */
export type Counted = {
  /** whole number of 0 or more */
  events: number;
  /** athlete-exposures or hours, above 0 */
  exposure: number;
};

export type Interval = { lower: number; upper: number };

/** A figure that is fit to show: never without its limits, its level and how they were made. */
export type Estimate = Interval & {
  estimate: number;
  /** coverage asked for, such as 0.95 */
  level: number;
  /** how the limits were made, in words for the screen, the CSV and the API */
  method: string;
};

export type LevelOption = {
  /** coverage of the interval, between 0 and 1; 0.95 if not given */
  level?: number;
};

export type RateOptions = LevelOption & {
  /** exposure that the rate is expressed per; 1000 if not given */
  per?: number;
};

/** A chi-squared test; with `df` 0 nothing could be tested and `pValue` is 1. */
export type ChiSquaredTest = { statistic: number; df: number; pValue: number };
