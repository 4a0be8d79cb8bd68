export { type AgeBand, ageBand, ageOn } from "./ages";
export { type Burden, burden } from "./burden";
export { type GChart, gChart, type UChart, uChart } from "./charts";
export { type ClusterRobustRateRatio, type ClusterRow, clusterRobustRateRatio } from "./cluster-robust";
export { coefficientRatio, designEffect } from "./coefficient-ratio";
export { cusumReference, cusumRunLength, type PoissonCusum, poissonCusum } from "./cusum";
export { smallestDetectableRatio } from "./detectable";
export { type ExchangeableRegression, exchangeableRegression } from "./exchangeable";
export { funnelLimits } from "./funnel";
export { exceedance, poissonByarInterval, poissonInterval, poissonMidPInterval } from "./intervals";
export { limbSymmetryIndex } from "./limb-symmetry";
export {
  mantelHaenszel,
  mantelHaenszelDifference,
  type StratifiedRatio,
  type Stratum,
} from "./mantel-haenszel";
export { meanShare, type ProportionMethod, proportion } from "./proportion";
export { quantile, tertiles } from "./quantiles";
export { incidenceRate, rateDifference } from "./rates";
export { type RateRatio, type RateRatioMethod, rateRatio } from "./ratios";
export {
  type Coefficient,
  type PoissonRegression,
  poissonRegression,
  type RegressionRow,
} from "./regression";
export { type ShrunkenRates, shrunkenRates } from "./shrinkage";
export {
  directlyStandardisedRate,
  type RatioToExpectedMethod,
  standardisedIncidenceRatio,
} from "./standardisation";
export {
  type FollowUp,
  kaplanMeier,
  logRank,
  type SurvivalCurve,
  type SurvivalMedian,
  type SurvivalStep,
} from "./survival";
export { type TeamRateTest, teamRateTest } from "./team-rates";
export { type SeverityBand, severityBand, severityBands, type TimeLoss, timeLoss } from "./time-loss";
export { type RateTrend, rateTrend } from "./trend";
export type { ChiSquaredTest, Counted, Estimate, Interval, LevelOption, RateOptions } from "./types";
