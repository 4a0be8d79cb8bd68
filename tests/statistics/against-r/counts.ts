import {
  burden,
  directlyStandardisedRate,
  exceedance,
  funnelLimits,
  incidenceRate,
  mantelHaenszel,
  mantelHaenszelDifference,
  meanShare,
  poissonByarInterval,
  poissonMidPInterval,
  proportion,
  rateDifference,
  rateRatio,
  smallestDetectableRatio,
  standardisedIncidenceRatio,
} from "~/statistics";
import { type Comparison, comparison, type Draw, limits, rowsOf } from "./draw";

const single = (d: Draw) => ({ events: d.events(), exposure: d.exposure(), per: d.per(), level: d.level() });
const pair = (d: Draw) => ({
  events: [d.events(), d.events()],
  exposure: [d.exposure(), d.exposure()],
  level: d.level(),
});
type Pair = ReturnType<typeof pair>;
const twoOf = (input: Pair) => {
  const [a, b] = rowsOf(input);
  if (!a || !b) throw new Error("a pair has two rows");
  return [a, b] as const;
};
const strata = (d: Draw) => {
  const size = d.integer(2, 7);
  const exposure = d.list(2 * size, () => d.real(80, 40_000));
  const events = exposure.map((value) => d.count(value, d.real(2e-4, 8e-3), 2));
  return { events, exposure, size, level: d.level() };
};
/** The first half of the columns is a, the second b. */
const stratified = (input: ReturnType<typeof strata>) => {
  const rows = rowsOf(input);
  return rows.slice(0, input.size).flatMap((a, index) => {
    const b = rows[index + input.size];
    return b ? [{ a, b }] : [];
  });
};

function ratioBy(method: "exact" | "mid-p" | "wald") {
  return (input: Pair) => {
    const [a, b] = twoOf(input);
    const ratio = rateRatio(a, b, { method, level: input.level });
    return { ...limits(ratio), pValue: ratio.pValue };
  };
}

export const counts: Comparison[] = [
  comparison("incidenceRate", single, ({ per, level, ...row }) => limits(incidenceRate(row, { per, level }))),
  comparison("poissonMidPInterval", single, ({ events, level }) => ({
    ...poissonMidPInterval(events, { level }),
  })),
  comparison("poissonByarInterval", single, ({ events, level }) => ({
    ...poissonByarInterval(events, { level }),
  })),
  comparison(
    "exceedance",
    (d) => ({ events: d.events(), expected: d.real(0.05, 2000) }),
    ({ events, expected }) => ({ chance: exceedance(events, expected) }),
  ),
  comparison("rateRatio exact", pair, ratioBy("exact")),
  comparison("rateRatio mid-p", pair, ratioBy("mid-p")),
  comparison("rateRatio wald", pair, ratioBy("wald")),
  comparison("rateDifference", pair, (input) =>
    limits(rateDifference(...twoOf(input), { level: input.level })),
  ),
  comparison("mantelHaenszel", strata, (input) => {
    const { association, heterogeneity, ...pooled } = mantelHaenszel(stratified(input), {
      level: input.level,
    });
    return {
      ...limits(pooled),
      association: association.statistic,
      heterogeneity: heterogeneity.statistic,
      heterogeneityP: heterogeneity.pValue,
    };
  }),
  comparison("mantelHaenszelDifference", strata, (input) =>
    limits(mantelHaenszelDifference(stratified(input), { level: input.level })),
  ),
  comparison(
    "directlyStandardisedRate",
    (d) => {
      const exposure = d.list(d.integer(2, 8), () => d.real(100, 50_000));
      return {
        exposure,
        events: exposure.map((value) => d.count(value, 3e-3, 3)),
        weights: exposure.map(() => d.real(1, 1000)),
        level: d.level(),
      };
    },
    ({ weights, level, ...columns }) => limits(directlyStandardisedRate(rowsOf(columns), weights, { level })),
  ),
  comparison(
    "standardisedIncidenceRatio",
    (d) => ({ observed: d.events(), expected: d.real(0.1, 3000), level: d.level() }),
    ({ level, ...counted }) => limits(standardisedIncidenceRatio(counted, { level })),
  ),
  comparison(
    "burden",
    (d) => ({
      days: d.list(d.integer(2, 40), () => d.pick([d.integer(0, 7), d.integer(0, 28), d.integer(20, 300)])),
      hours: d.real(50, 50_000),
      level: d.level(),
    }),
    ({ days, hours, level }) => limits(burden({ daysLost: days, exposureHours: hours }, { level })),
  ),
  ...(["wilson", "clopper-pearson"] as const).map((method) =>
    comparison(
      `proportion ${method}`,
      (d) => {
        const trials = d.pick([d.integer(1, 12), d.integer(1, 200), d.integer(200, 5000)]);
        return { successes: d.integer(0, trials), trials, level: d.level() };
      },
      ({ level, ...counted }) => limits(proportion(counted, { method, level })),
    ),
  ),
  comparison(
    "meanShare",
    (d) => {
      const trials = d.integer(1, 400);
      return { sum: Math.round(d.random() * trials * 100) / 100, trials, level: d.level() };
    },
    ({ level, ...share }) => limits(meanShare(share, { level })),
  ),
  comparison(
    "funnelLimits",
    (d) => ({ rate: d.real(0.05, 30), exposure: d.real(20, 1e6), level: d.level() }),
    (input) => ({ ...funnelLimits(input) }),
  ),
  comparison(
    "smallestDetectableRatio",
    (d) => ({
      exposureA: d.real(1000, 1e6),
      exposureB: d.real(1000, 1e6),
      rate: d.real(0.5, 20),
      power: d.pick([0.8, 0.9, 0.7]),
      level: d.level(),
    }),
    (input) => ({ ratio: smallestDetectableRatio(input) }),
  ),
];
