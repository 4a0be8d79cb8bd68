import { group } from "d3-array";
import {
  type ClusterRobustRateRatio,
  type Counted,
  clusterRobustRateRatio,
  type Estimate,
  incidenceRate,
  mantelHaenszel,
  type RateRatio,
  rateRatio,
  type StratifiedRatio,
  smallestDetectableRatio,
} from "~/statistics";
import { attempt } from "../attempt";
import { type CountedKind, countedKinds, type InjuryRow } from "../counting";

/**
 * Does the warm-up programme work: injuries against athlete-exposures, warmed up and not, and by thirds of compliance.
 * Pure; the counts come from programme.queries.server.ts, every figure from ~/statistics.
 */

export const warmUpClasses = ["warmed_up", "not_warmed_up", "not_recorded"] as const;
export type WarmUpClass = (typeof warmUpClasses)[number];
/** "early": fewer earlier participations than say anything about an athlete's compliance. */
export const thirds = ["lowest", "middle", "highest", "early"] as const;
export type Third = (typeof thirds)[number];

/** What the records say of the warm-up behind one injury. */
export type InjuryPlace = {
  injuryId: string;
  hasSession: boolean;
  /** Whether the session's participations are recorded: only those are athlete-exposures here. */
  isRecorded: boolean;
  outside: "before_start" | "no_programme" | null;
  /** By the session's record; a late arrival and an injury during the warm-up are not warmed up. */
  byRecord: WarmUpClass;
  /** Earlier participations of the athlete with a warm-up record, and those of them that were warmed up. */
  known: number;
  done: number;
};

/**
 * Whether an injured athlete had been warmed up. Where the session has a record, the injury's own answer comes before it.
 * Where it has none, the injury stays with its exposure: to take only the injured out of "not recorded" would add
 * injuries without their athlete-exposures and make the other rates too high.
 * @param own the injury's own answer; null: not said
 */
export function classOf({ byRecord }: Pick<InjuryPlace, "byRecord">, own: boolean | null): WarmUpClass {
  if (byRecord === "not_recorded" || own === null) return byRecord;
  return own ? "warmed_up" : "not_warmed_up";
}

/**
 * The third that a history falls in, by the share of its known participations that were warmed up.
 * @param cuts up to and with the first is the lowest third, from the second on the highest
 * @param enough fewer known participations are too early to say
 */
export function thirdOf(
  { known, done }: Pick<InjuryPlace, "known" | "done">,
  cuts: readonly [number, number],
  enough: number,
): Third {
  if (known < enough) return "early";
  const share = done / known;
  if (share <= cuts[0]) return "lowest";
  return share >= cuts[1] ? "highest" : "middle";
}

/** Injuries and athlete-exposures of one team, session kind and group. */
export type Tally<G extends string = string> = {
  teamId: string;
  kind: CountedKind;
  group: G;
  events: number;
  aes: number;
};

export type PlacedInjury = {
  injury: Pick<InjuryRow, "id" | "teamId" | "sessionKind" | "warmedUp">;
  place: InjuryPlace;
};

export type Unplaced = { noSession: number; noParticipations: number; outside: number };

/** The injuries that can stand over recorded athlete-exposures of the programme, and how many cannot, by reason. */
export function splitPlaced(injuries: readonly PlacedInjury[]) {
  const unplaced: Unplaced = { noSession: 0, noParticipations: 0, outside: 0 };
  const placed = injuries.filter(({ injury, place }) => {
    const isCounted = injury.teamId !== null && countedKinds.some((kind) => kind === injury.sessionKind);
    if (!place.hasSession || !isCounted) unplaced.noSession += 1;
    else if (!place.isRecorded) unplaced.noParticipations += 1;
    else if (place.outside !== null) unplaced.outside += 1;
    else return true;
    return false;
  });
  return { placed, unplaced };
}

/** Adds injuries to their group's athlete-exposures. */
export function tally<G extends string>(
  exposures: readonly { teamId: string; kind: CountedKind; group: G; aes: number }[],
  injuries: readonly PlacedInjury[],
  groupOf: (injury: PlacedInjury) => G,
): Tally<G>[] {
  const rows = new Map<string, Tally<G>>();
  const at = (place: Pick<Tally<G>, "teamId" | "kind" | "group">) => {
    const key = `${place.teamId} ${place.kind} ${place.group}`;
    const row = rows.get(key) ?? { ...place, events: 0, aes: 0 };
    rows.set(key, row);
    return row;
  };
  for (const { aes, ...place } of exposures) at(place).aes += aes;
  for (const each of injuries) {
    const { teamId, sessionKind } = each.injury;
    if (teamId !== null && (sessionKind === "training" || sessionKind === "match"))
      at({ teamId, kind: sessionKind, group: groupOf(each) }).events += 1;
  }
  return [...rows.values()];
}

/** Injuries and athlete-exposures of some tallies together. */
export function sumOf(tallies: readonly Tally[]): Counted {
  const add = (pick: (row: Tally) => number) => tallies.reduce((sum, row) => sum + pick(row), 0);
  return { events: add(({ events }) => events), exposure: add(({ aes }) => aes) };
}

export type KindRatio = { kind: CountedKind; a: Counted; b: Counted; ratio: RateRatio | null };

export type Contrast = {
  a: Counted;
  b: Counted;
  /** Within session kind, teams as clusters; null with its reason. */
  robust: ClusterRobustRateRatio | null;
  /** Mantel-Haenszel over session kind, as if athletes were independent. */
  pooled: StratifiedRatio | null;
  byKind: KindRatio[];
  /** Injuries of a team that has no exposure of their group and session kind: they enter no ratio. */
  withoutExposure: number;
  reason: string | null;
  smallest: Smallest | null;
};

/** The smallest effect that could have been shown. */
export type Smallest = {
  /** The ratio; null: no reduction, however large. */
  ratio: number | null;
  /** Rate of both groups together, per 1000: what was to be expected without an effect. */
  rate: Estimate;
  /** How many times wider the variance was because athletes come in teams; at least 1. */
  designEffect: number;
};

/** How often a true effect of the smallest size would have been shown. */
export const power = 0.8;

/**
 * Compares two groups of tallies within session kind.
 * @param a the group hoped to have the lower rate
 * @param b the reference
 */
export function contrast<G extends string>(tallies: readonly Tally<G>[], a: G, b: G): Contrast {
  const both = tallies.filter((row) => row.group === a || row.group === b);
  const usable = both.filter(({ aes }) => aes > 0);
  const of = (rows: readonly Tally<G>[], which: G) => sumOf(rows.filter((row) => row.group === which));
  const sums = { a: of(usable, a), b: of(usable, b) };
  const byKind = countedKinds.flatMap((kind): KindRatio[] => {
    const own = usable.filter((row) => row.kind === kind);
    return own.length === 0 ? [] : [kindRatio(kind, of(own, a), of(own, b))];
  });
  const base = {
    ...sums,
    byKind,
    withoutExposure: sumOf(both).events - sumOf(usable).events,
  };
  const reason = whyNone(sums);
  if (reason) return { ...base, robust: null, pooled: null, reason, smallest: smallestOf(sums, 1) };
  const rows = usable.map(({ teamId, kind, group: which, events, aes }) => ({
    ...{ events, exposure: aes, stratum: kind, cluster: teamId },
    group: which === a ? ("a" as const) : ("b" as const),
  }));
  const robust = attempt(() => clusterRobustRateRatio(rows));
  const strata = byKind.filter((each) => each.a.exposure > 0 && each.b.exposure > 0);
  const pooled = strata.some((each) => each.a.events + each.b.events > 0) ? mantelHaenszel(strata) : null;
  const designEffect = Math.max(1, robust?.varianceInflation ?? 1);
  return {
    ...base,
    robust,
    pooled,
    reason: robust ? null : "the counts do not determine a ratio",
    smallest: smallestOf(sums, designEffect),
  };
}

function whyNone({ a, b }: Pick<Contrast, "a" | "b">): string | null {
  if (a.exposure === 0 || b.exposure === 0) return "one of the two has no athlete-exposures";
  return a.events + b.events === 0 ? "no injury of this kind in either" : null;
}

function kindRatio(kind: CountedKind, a: Counted, b: Counted): KindRatio {
  return { kind, a, b, ratio: whyNone({ a, b }) ? null : rateRatio(a, b) };
}

function smallestOf({ a, b }: Pick<Contrast, "a" | "b">, designEffect: number): Smallest | null {
  if (a.exposure === 0 || b.exposure === 0 || a.events + b.events === 0) return null;
  const rate = incidenceRate({ events: a.events + b.events, exposure: a.exposure + b.exposure });
  const ratio = smallestDetectableRatio({
    exposureA: a.exposure / designEffect,
    exposureB: b.exposure / designEffect,
    rate: rate.estimate,
    power,
  });
  return { ratio, rate, designEffect };
}

/** Tallies by group and session kind, with those of each group together, in the order of the groups. */
export function byGroup<G extends string>(tallies: readonly Tally<G>[], groups: readonly G[]) {
  const keyed = group(tallies, (row) => row.group);
  return groups.flatMap((each) => {
    const own = keyed.get(each);
    if (!own) return [];
    const kinds = countedKinds.flatMap((kind) => {
      const some = own.filter((row) => row.kind === kind);
      return some.length === 0 ? [] : [{ kind, ...sumOf(some) }];
    });
    return [{ group: each, kinds, ...sumOf(own) }];
  });
}
