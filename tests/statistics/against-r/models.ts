import {
  clusterRobustRateRatio,
  exchangeableRegression,
  kaplanMeier,
  logRank,
  type PoissonRegression,
  poissonRegression,
  rateTrend,
  shrunkenRates,
  teamRateTest,
} from "~/statistics";
import { type Comparison, comparison, type Draw, type Figures, limits, rowsOf } from "./draw";

/** Teams with several months each, in two groups, their true rates apart; with strata (session kinds) or not. */
const teams = (d: Draw) => {
  const teamCount = d.integer(6, 16);
  const strata = d.pick([1, 1, 2, 3]);
  const crossed = d.random() < 0.4;
  const rows = d
    .list(teamCount, (team) => ({ team, rate: d.real(1e-3, 1.2e-2) }))
    .flatMap(({ team, rate }) =>
      d.list(d.integer(2, 4), () => {
        const exposure = d.integer(80, 900);
        const group = crossed ? d.integer(0, 1) : team % 2;
        const events = d.count(exposure, rate, 1.3);
        return { team, group, stratum: d.integer(1, strata), exposure, events };
      }),
    );
  const column = (key: "team" | "group" | "stratum" | "exposure" | "events") => rows.map((row) => row[key]);
  return {
    team: column("team"),
    group: column("group"),
    stratum: column("stratum"),
    exposure: column("exposure"),
    events: column("events"),
    level: d.level(),
  };
};
type Teams = ReturnType<typeof teams>;

const regression = (input: Teams & { x: number[] }) =>
  rowsOf(input).map((row, index) => ({
    ...row,
    x: [input.group[index] ?? 0, input.x[index] ?? 0],
    cluster: String(input.team[index]),
  }));

function figuresOf(model: PoissonRegression): Figures {
  const figures: Figures = { deviance: model.deviance, pearson: model.pearson };
  for (const [index, coefficient] of model.coefficients.entries()) {
    figures[`estimate${index}`] = coefficient.estimate;
    figures[`model${index}`] = coefficient.standardError;
    figures[`quasi${index}`] = coefficient.quasiStandardError;
    figures[`robust${index}`] = coefficient.robustStandardError;
  }
  return figures;
}

const followed = (d: Draw) => {
  const size = d.integer(4, 60);
  return {
    time: d.list(size, () => d.integer(1, d.pick([12, 60, 200]))),
    event: d.list(size, () => (d.random() < 0.75 ? 1 : 0)),
    group: d.list(size, () => d.integer(0, 1)),
    level: d.level(),
  };
};
const followUps = ({ time, event }: { time: number[]; event: number[] }) =>
  time.map((value, index) => ({ time: value, event: event[index] === 1 }));

export const models: Comparison[] = [
  comparison(
    "poissonRegression",
    (d) => {
      const drawn = teams(d);
      return { ...drawn, x: drawn.team.map(() => d.integer(-20, 20) / 10) };
    },
    (input) => figuresOf(poissonRegression({ rows: regression(input), names: ["group", "x"] })),
  ),
  comparison("clusterRobustRateRatio", teams, (input) => {
    const ratio = clusterRobustRateRatio(
      rowsOf(input).map((row, index) => ({
        ...row,
        group: input.group[index] === 1 ? "a" : "b",
        stratum: String(input.stratum[index]),
        cluster: String(input.team[index]),
      })),
      { level: input.level },
    );
    const { varianceInflation, smallSample } = ratio;
    // Limits that do not account for teams are compared under rateRatio and mantelHaenszel.
    if (varianceInflation === null) throw new RangeError("rows: must be fit for a sandwich");
    return {
      ...limits(ratio),
      pValue: ratio.pValue,
      varianceInflation,
      df: smallSample?.df ?? null,
      smallLower: smallSample?.lower ?? null,
      smallUpper: smallSample?.upper ?? null,
      smallP: smallSample?.pValue ?? null,
    };
  }),
  comparison("exchangeableRegression", teams, (input) => {
    const { coefficients, correlation, dispersion } = exchangeableRegression({
      rows: regression({ ...input, x: [] }).map((row) => ({ ...row, x: row.x.slice(0, 1) })),
      names: ["group"],
    });
    const [intercept, group] = coefficients;
    return {
      correlation,
      dispersion,
      intercept: intercept?.estimate ?? null,
      group: group?.estimate ?? null,
      robust: group?.robustStandardError ?? null,
    };
  }),
  comparison("teamRateTest", teams, (input) => {
    const of = (which: number) => rowsOf(input).filter((_, index) => input.group[index] === which);
    const { statistic, pValue, ...difference } = teamRateTest(of(1), of(0), { level: input.level });
    return { ...limits(difference), statistic, pValue };
  }),
  comparison(
    "rateTrend",
    (d) => {
      const exposure = d.list(d.integer(3, 14), () => d.integer(500, 20_000));
      const slope = d.real(0.8, 1.25);
      const events = exposure.map((value, index) => d.count(value, 3e-3 * slope ** index, 1.5));
      return { events, exposure, level: d.level() };
    },
    (input) => {
      const rows = rowsOf(input).map((row, index) => ({ ...row, period: 2019 + index }));
      const trend = rateTrend(rows, { level: input.level });
      return { ...limits(trend), pValue: trend.pValue, dispersion: trend.dispersion };
    },
  ),
  comparison(
    "shrunkenRates",
    (d) => {
      const exposure = d.list(d.integer(5, 25), () => d.integer(300, 4000));
      return { exposure, events: exposure.map((value) => d.count(value, 4e-3, 3)), level: d.level() };
    },
    (input) => {
      const { mean, shape, groups } = shrunkenRates(rowsOf(input), { level: input.level });
      const [first] = groups;
      const last = groups.at(-1);
      if (!first || !last || shape === Infinity) throw new RangeError("groups: must be overdispersed here");
      return { mean, shape, ...limits(first), lastEstimate: last.estimate, lastUpper: last.upper };
    },
  ),
  comparison("kaplanMeier", followed, (input) => {
    const { steps, median } = kaplanMeier(followUps(input), { level: input.level });
    const figures: Figures = { median: median.estimate, steps: steps.length };
    for (const [index, step] of steps.entries()) {
      figures[`survival${index}`] = step.survival;
      figures[`error${index}`] = step.standardError;
      // R has no limits once nobody is left.
      figures[`lower${index}`] = step.survival === 0 ? null : step.lower;
      figures[`upper${index}`] = step.survival === 0 ? null : step.upper;
    }
    return figures;
  }),
  comparison("logRank", followed, (input) => {
    const of = (which: number) => followUps(input).filter((_, index) => input.group[index] === which);
    const { statistic, pValue } = logRank(of(0), of(1));
    return { statistic, pValue };
  }),
];
