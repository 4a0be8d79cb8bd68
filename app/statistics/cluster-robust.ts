import { fsum, group } from "d3-array";
import { coefficientRatio } from "./coefficient-ratio";
import { mantelHaenszel } from "./mantel-haenszel";
import { rateRatio } from "./ratios";
import { poissonRegression } from "./regression";
import { type SmallSampleRatio, smallSampleRatio } from "./small-sample";
import type { Counted, Estimate, LevelOption } from "./types";
import {
  defaultLevel,
  reject,
  requireCount,
  requireLevel,
  requireNonEmpty,
  requireNonNegative,
} from "./validate";

/** One count of a team: its events and exposure (0 or more) in one group and, if it has any, one stratum. */
export type ClusterRow = Counted & {
  group: "a" | "b";
  /** session kind, age band, ...: given on every row or on none */
  stratum?: string;
  /** the team */
  cluster: string;
};

export type ClusterRobustRateRatio = Estimate & {
  pValue: number;
  /** teams in the comparison */
  clusters: number;
  /** robust variance over the model's: how many times wider than for independent athletes; null without one */
  varianceInflation: number | null;
  /** below 40 teams even the robust limits are optimistic, which has to be said */
  fewClusters: boolean;
  /** bias-reduced variance (CR2) with t limits, for few teams; null when it cannot be made */
  smallSample: SmallSampleRatio | null;
};

/** Sandwich limits come out too narrow below about this many clusters. */
const enoughClusters = 40;

const crude = "";

/**
 * Rate ratio of `a` over `b` where teams are clusters: Poisson regression with a dummy per stratum and the clustered
 * sandwich HC0. Limits are never narrower than those for independent athletes (`method` says when that was
 * used). Rows of the same team, stratum and group count together; their order does not matter. Strata without an
 * event or with only one of the groups say nothing about the ratio and are left out.
 *
 * Where the sandwich cannot be made (a group without events or with a single team, or no more teams than
 * coefficients) the limits do not account for teams and `method` says so: the exact ones of `rateRatio`, or with
 * several strata those of `mantelHaenszel`. Without events in `b` estimate and upper limit are Infinity.
 * Source: Liang KY, Zeger SL, Biometrika 1986;73:13-22; the bound of 40: Murray DM, Design and Analysis of
 * Group-Randomized Trials (from memory).
 * @param rows exposure 0 with no events is dropped
 * @throws RangeError naming `rows`, a field of a row or `level`; also when a group has no exposure, or no group an event
 */
export function clusterRobustRateRatio(
  rows: readonly ClusterRow[],
  { level = defaultLevel }: LevelOption = {},
): ClusterRobustRateRatio {
  requireLevel(level);
  requireClusterRows(rows);
  const all = aggregate(rows);
  if (total(all, "a").exposure === 0 || total(all, "b").exposure === 0)
    reject("rows", "a list with exposure in both groups");
  if (!all.some(({ events }) => events > 0)) reject("rows", "a list with at least one event");
  const cells = informative(all);
  const clusters = new Set(cells.map(({ cluster }) => cluster)).size;
  const robust = fitRobust(cells, clusters, level);
  if (robust) return { ...robust, clusters, fewClusters: clusters < enoughClusters };
  const teams = new Set(all.map(({ cluster }) => cluster)).size;
  return {
    ...withoutTeams(all, cells, level),
    clusters: teams,
    fewClusters: teams < enoughClusters,
    varianceInflation: null,
    smallSample: null,
  };
}

type Cell = Counted & { group: "a" | "b"; stratum: string; cluster: string };

function requireClusterRows(rows: readonly ClusterRow[]) {
  requireNonEmpty("rows", rows);
  const stratified = rows[0]?.stratum !== undefined;
  for (const [index, row] of rows.entries()) {
    const name = `rows[${index}]`;
    requireCount(`${name}.events`, row.events);
    requireNonNegative(`${name}.exposure`, row.exposure);
    if (row.exposure === 0 && row.events > 0) reject(`${name}.exposure`, "above 0 where there are events", 0);
    if (row.group !== "a" && row.group !== "b") reject(`${name}.group`, "a or b", row.group);
    if (typeof row.cluster !== "string") reject(`${name}.cluster`, "a text that names the team", row.cluster);
    if ((row.stratum !== undefined) !== stratified)
      reject(`${name}.stratum`, "given on every row or on none");
  }
}

/** One cell per stratum, team and group, in an order that depends on their names only. */
function aggregate(rows: readonly ClusterRow[]): Cell[] {
  const keyOf = (row: ClusterRow) => JSON.stringify([row.stratum ?? crude, row.cluster, row.group]);
  return [
    ...group(
      rows.filter(({ exposure }) => exposure > 0),
      keyOf,
    ),
  ]
    .sort(([first], [second]) => (first < second ? -1 : 1))
    .flatMap(([, same]) => {
      const [first] = same;
      if (first === undefined) return [];
      const { cluster, stratum = crude } = first;
      return [{ ...sum(same), group: first.group, stratum, cluster }];
    });
}

function sum(rows: readonly Counted[]): Counted {
  return { events: fsum(rows, (row) => row.events), exposure: fsum(rows, (row) => row.exposure) };
}

function total(cells: readonly Cell[], which: "a" | "b") {
  return sum(cells.filter(({ group }) => group === which));
}

function informative(cells: readonly Cell[]) {
  return [...group(cells, ({ stratum }) => stratum).values()]
    .filter((stratum) => sum(stratum).events > 0 && new Set(stratum.map(({ group }) => group)).size === 2)
    .flat();
}

function fitRobust(cells: readonly Cell[], clusters: number, level: number) {
  const lacking = (["a", "b"] as const).some((which) => {
    const own = cells.filter(({ group }) => group === which);
    return sum(own).events === 0 || own.length < 2 || new Set(own.map(({ cluster }) => cluster)).size < 2;
  });
  const strata = [...new Set(cells.map(({ stratum }) => stratum))].slice(1);
  if (lacking || clusters <= strata.length + 2) return null;
  const rows = cells.map(({ events, exposure, cluster, ...cell }) => ({
    events,
    exposure,
    cluster,
    x: [cell.group === "a" ? 1 : 0, ...strata.map((stratum) => (cell.stratum === stratum ? 1 : 0))],
  }));
  const names = ["group", ...strata.map((_, index) => `stratum ${index + 1}`)];
  const coefficient = poissonRegression({ rows, names }).coefficients[1];
  if (!coefficient || coefficient.robustStandardError === null) return null;
  return {
    ...coefficientRatio(coefficient, { level }),
    varianceInflation: (coefficient.robustStandardError / coefficient.standardError) ** 2,
    smallSample: smallSampleRatio(rows, 0, { level }),
  };
}

const blind = "teams not accounted for";

function withoutTeams(all: readonly Cell[], cells: readonly Cell[], level: number) {
  const strata = [...group(cells, ({ stratum }) => stratum).values()].map((own) => ({
    a: total(own, "a"),
    b: total(own, "b"),
  }));
  const [first] = strata;
  // Nothing can be compared within strata: the crude ratio is what is left, and says that it is.
  if (first === undefined)
    return name(
      rateRatio(total(all, "a"), total(all, "b"), { method: "exact", level }),
      `strata and ${blind}`,
    );
  if (strata.length === 1) return name(rateRatio(first.a, first.b, { method: "exact", level }), blind);
  const { association, heterogeneity: _, ...pooled } = mantelHaenszel(strata, { level });
  return name({ ...pooled, pValue: association.pValue }, blind);
}

function name<T extends Estimate>(ratio: T, without: string): T {
  return { ...ratio, method: `${ratio.method}; ${without}` };
}
