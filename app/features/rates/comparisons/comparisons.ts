import {
  type ClusterRobustRateRatio,
  clusterRobustRateRatio,
  directlyStandardisedRate,
  type Estimate,
  mantelHaenszel,
  mantelHaenszelDifference,
  type RateRatio,
  rateDifference,
  rateRatio,
  type StratifiedRatio,
} from "~/statistics";
import { attempt } from "../attempt";
import type { RatesFilters } from "../filters";
import type { RateRow } from "../rates";
import type { Counts, Selection } from "../selection";
import {
  type ComparedStratum,
  clusterRows,
  type Dimension,
  type Held,
  heldEqual,
  type Sides,
  stratify,
} from "./comparisons-strata";

/** Two groups held against each other: crude, allowing for teams, and within the same ages and session kinds. Pure. */

export type Robust = {
  ratio: ClusterRobustRateRatio | null;
  /** Why there is none: in a clause, and in a word or two for a table. */
  reason: string | null;
  short: string | null;
  dropped: number;
};

/** Sums of what could not be held against the other side, by why. */
export type SetAside = Record<
  "oneSide" | "noKind" | "noAge" | "noExposure",
  { events: number; exposure: number }
>;

export type Adjusted = {
  ratio: StratifiedRatio;
  difference: Estimate | null;
  /** The crude ratio of what could be adjusted: what adjusting itself changed shows against this one. */
  sameCrude: RateRatio;
  robust: Robust;
  standardised: { a: Estimate; b: Estimate };
  strata: number;
};

export type Pair = {
  dimension: Dimension;
  /** What the adjusted figures hold equal. */
  held: Held[];
  first: RateRow;
  second: RateRow;
  /** Null when neither side has an injury. */
  ratio: RateRatio | null;
  difference: Estimate | null;
  robust: Robust;
  strata: ComparedStratum[];
  setAside: SetAside;
  adjusted: Adjusted | null;
  notAdjusted: string | null;
};

export type Choice = {
  options: { key: string; label: string }[];
  first: RateRow | null;
  second: RateRow | null;
  /** Why nothing can be compared, in words. */
  problem: string | null;
};

const byRate = (a: RateRow, b: RateRow) => (b.rate?.estimate ?? 0) - (a.rate?.estimate ?? 0);

/** Girls and women against boys and men; else the two groups with the most exposure, the higher rate first. */
function usualPair(rows: readonly RateRow[]): RateRow[] {
  const sexes = ["female", "male"].flatMap((sex) => rows.filter(({ key }) => key === sex));
  if (sexes.length === 2) return sexes;
  const largest = [...rows].sort((a, b) => (b.denominator ?? 0) - (a.denominator ?? 0)).slice(0, 2);
  return largest.sort(byRate);
}

/** The two groups that an address asks for, among those with exposure. */
export function choosePair(rows: readonly RateRow[], asked: { a?: string; b?: string }): Choice {
  const exposed = rows.filter(({ denominator }) => (denominator ?? 0) > 0);
  const options = exposed.map(({ key, label }) => ({ key, label }));
  const none = (problem: string): Choice => ({ options, first: null, second: null, problem });
  if (exposed.length < 2) return none("There are no two groups with exposure to compare here.");
  const find = (key?: string) => exposed.find((row) => row.key === key);
  const lost = [asked.a, asked.b].some((key) => key !== undefined && !find(key));
  if (lost)
    return none("A group that this address asks for has no exposure under these filters. Choose another.");
  const usual = usualPair(exposed);
  const other = (taken?: RateRow) =>
    usual.find((row) => row !== taken) ?? exposed.find((row) => row !== taken) ?? null;
  const [a, b] = [find(asked.a), find(asked.b)];
  const first = a ?? (b ? other(b) : (usual[0] ?? null));
  const second = b ?? other(first ?? undefined);
  if (first && first === second) return none("Choose two different groups.");
  return { options, first, second, problem: null };
}

export const sideOf = ({ injuries, denominator }: RateRow) => ({
  events: injuries ?? 0,
  exposure: denominator ?? 0,
});

const singleTeams =
  "each side is a single team, and one team cannot show how much teams differ. Read the interval as too narrow";
const tooFewTeams = "a side has no injury or only one team, so that teams cannot be told from the groups";

export function robustOf({ rows, dropped }: ReturnType<typeof clusterRows>, dimension: Dimension): Robust {
  const none = (reason: string, short: string): Robust => ({ ratio: null, reason, short, dropped });
  if (dimension === "team") return none(singleTeams, "single teams");
  const sides = new Set(rows.map(({ group }) => group)).size;
  const hasEvents = rows.some(({ events }) => events > 0);
  const ratio = sides === 2 && hasEvents ? attempt(() => clusterRobustRateRatio(rows)) : null;
  // Without a robust variance the statistics fall back to limits that do not account for teams.
  if (ratio?.varianceInflation == null) return none(tooFewTeams, "too few teams or injuries");
  return { ratio, reason: null, short: null, dropped };
}

function setAsideOf(strata: readonly ComparedStratum[]): SetAside {
  const sum = (states: readonly ComparedStratum["state"][]) =>
    strata
      .filter(({ state }) => states.includes(state))
      .reduce(
        (all, { a, b }) => ({
          events: all.events + a.events + b.events,
          exposure: all.exposure + a.exposure + b.exposure,
        }),
        { events: 0, exposure: 0 },
      );
  return {
    oneSide: sum(["only-a", "only-b"]),
    noKind: sum(["no-kind"]),
    noAge: sum(["no-age"]),
    noExposure: sum(["no-exposure"]),
  };
}

export type Material = { counts: Counts; selection: Selection; filters: RatesFilters };

function adjust({ counts, selection, filters }: Material, sides: Sides, strata: readonly ComparedStratum[]) {
  const shared = strata.filter(({ state }) => state === "both");
  const events = shared.reduce((sum, { a, b }) => sum + a.events + b.events, 0);
  if (shared.length === 0) return { reason: "no age band and session kind has exposure on both sides" };
  if (shared.length === 1)
    return {
      reason: "both sides meet in one age band and session kind only, so there is nothing to hold equal",
    };
  if (events === 0) return { reason: "no injury falls where both sides have exposure" };
  const total = (side: "a" | "b") => ({
    events: shared.reduce((sum, row) => sum + row[side].events, 0),
    exposure: shared.reduce((sum, row) => sum + row[side].exposure, 0),
  });
  const weights = shared.map(({ a, b }) => a.exposure + b.exposure);
  const keys = new Set(shared.map(({ key }) => key));
  const adjusted: Adjusted = {
    ratio: mantelHaenszel(shared),
    difference: total("a").events > 0 && total("b").events > 0 ? mantelHaenszelDifference(shared) : null,
    sameCrude: rateRatio(total("a"), total("b")),
    robust: robustOf(clusterRows(counts, selection, filters.per, sides, keys), sides.dimension),
    standardised: {
      a: directlyStandardisedRate(
        shared.map(({ a }) => a),
        weights,
      ),
      b: directlyStandardisedRate(
        shared.map(({ b }) => b),
        weights,
      ),
    },
    strata: shared.length,
  };
  return { adjusted };
}

/** Everything that is said of two groups; both must have a rate. */
export function comparePair(material: Material, dimension: Dimension, first: RateRow, second: RateRow): Pair {
  const { counts, selection, filters } = material;
  const unit = filters.per;
  const held = heldEqual(dimension, filters.sessions);
  const sides: Sides = { dimension, a: first.key, b: second.key, held };
  const [a, b] = [sideOf(first), sideOf(second)];
  const strata = stratify(counts, selection, unit, sides);
  const { adjusted = null, reason = null } = adjust(material, sides, strata);
  return {
    dimension,
    held,
    first,
    second,
    ratio: a.events + b.events === 0 ? null : rateRatio(a, b),
    difference: rateDifference(a, b),
    robust: robustOf(clusterRows(counts, selection, unit, sides), dimension),
    strata,
    setAside: setAsideOf(strata),
    adjusted,
    notAdjusted: reason,
  };
}
