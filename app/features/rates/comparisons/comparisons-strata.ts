import type { ClusterRow, Counted } from "~/statistics";
import { bandOf, type ExposureCell, type InjuryRow } from "../counting";
import type { RateUnit, SessionChoice } from "../filters";
import { bandWords, groupKey, placeCell, placeInjury } from "../groups";
import type { Counts, Selection } from "../selection";

/** What can be compared, and how: two groups of a dimension, within strata of age band and session kind. Pure. */
export const dimensions = ["sex", "sport", "age", "team", "kind", "season"] as const;
export type Dimension = (typeof dimensions)[number];

export type SideName = "a" | "b";
export type Held = "age" | "kind";
export type Sides = { dimension: Dimension; a: string; b: string; held: readonly Held[] };

/** What is held equal: age band and session kind, less the one that is compared or that does not vary. */
export const heldEqual = (dimension: Dimension, sessions: SessionChoice): Held[] =>
  (["age", "kind"] as const).filter(
    (held) => held !== dimension && (held === "age" || sessions === "training-and-matches"),
  );

export type StratumState = "both" | "only-a" | "only-b" | "no-kind" | "no-age" | "no-exposure";
export type ComparedStratum = { key: string; label: string; a: Counted; b: Counted; state: StratumState };

/** Between the parts of a stratum's key: no label of a band holds it. */
const between = "\u001f";

type Placed = { side: SideName; stratum: string; teamId: string | null };

function placer(counts: Counts, { dimension, a, b, held }: Sides) {
  const keyOf = groupKey(dimension, counts);
  const place = (at: ReturnType<typeof placeCell>): Placed | null => {
    const key = keyOf(at);
    if (key !== a && key !== b) return null;
    const parts = { age: bandOf(at.age, counts.bands) ?? "unknown", kind: at.kind ?? "none" };
    const stratum = held.map((name) => parts[name]).join(between);
    return { side: key === a ? "a" : "b", stratum, teamId: at.teamId };
  };
  return {
    cell: (cell: ExposureCell) => place(placeCell(cell)),
    injury: (injury: InjuryRow) => place(placeInjury(injury)),
  };
}

const kindLabels: Record<string, string> = {
  training: "training",
  match: "matches",
  none: "gradual, no session",
};

function labelOf(key: string, held: readonly Held[]) {
  if (held.length === 0) return "all of them";
  const words = key.split(between).map((part, index) => {
    if (held[index] === "kind") return kindLabels[part] ?? part;
    return part === "unknown" ? "age not known" : bandWords(part);
  });
  return words.join(", ");
}

/** Whether both sides can be held against each other in a stratum, or why not. */
function stateOf(key: string, held: readonly Held[], a: Counted, b: Counted): StratumState {
  const parts = key.split(between);
  if (parts[held.indexOf("kind")] === "none") return "no-kind";
  if (parts[held.indexOf("age")] === "unknown") return "no-age";
  if (a.exposure > 0 && b.exposure > 0) return "both";
  if (a.exposure <= 0 && b.exposure <= 0) return "no-exposure";
  return a.exposure > 0 ? "only-a" : "only-b";
}

/** Both sides by stratum, in the order of ages and kinds. Exposure in the given unit, never mixed. */
export function stratify(
  counts: Counts,
  { cells, counted }: Pick<Selection, "cells" | "counted">,
  unit: RateUnit,
  sides: Sides,
): ComparedStratum[] {
  const place = placer(counts, sides);
  const { held } = sides;
  const sums = new Map<string, Record<SideName, Counted>>();
  const add = (placed: Placed | null, events: number, exposure: number) => {
    if (!placed) return;
    const sum = sums.get(placed.stratum) ?? {
      a: { events: 0, exposure: 0 },
      b: { events: 0, exposure: 0 },
    };
    sum[placed.side].events += events;
    sum[placed.side].exposure += exposure;
    sums.set(placed.stratum, sum);
  };
  for (const cell of cells) add(place.cell(cell), 0, cell[unit]);
  for (const injury of counted) add(place.injury(injury), 1, 0);
  const orders = {
    age: [...counts.bands.map(({ label }) => label), "unknown"],
    kind: ["training", "match", "none"],
  };
  const ranks = (key: string) =>
    key.split(between).map((part, at) => orders[held[at] ?? "age"].indexOf(part));
  const byOrder = (x: string, y: string) => {
    const [first, second] = [ranks(x), ranks(y)];
    const at = first.findIndex((rank, index) => rank !== second[index]);
    return at < 0 ? 0 : (first[at] ?? 0) - (second[at] ?? 0);
  };
  return [...sums]
    .map(([key, { a, b }]) => ({ key, label: labelOf(key, held), a, b, state: stateOf(key, held, a, b) }))
    .filter(({ a, b }) => a.events + b.events + a.exposure + b.exposure > 0)
    .sort((x, y) => byOrder(x.key, y.key));
}

/**
 * Counts of each team on each side, for intervals that allow for teams. What a team has no exposure for (a gradual
 * injury of somebody who did not take part) cannot enter and is counted.
 * @param strata only these strata, each as one of the model's; all in one without
 */
export function clusterRows(
  counts: Counts,
  { cells, counted }: Pick<Selection, "cells" | "counted">,
  unit: RateUnit,
  sides: Sides,
  strata?: ReadonlySet<string>,
): { rows: ClusterRow[]; dropped: number } {
  const place = placer(counts, sides);
  const sums = new Map<string, ClusterRow>();
  const add = (placed: Placed | null, events: number, exposure: number) => {
    if (!placed || (strata && !strata.has(placed.stratum))) return;
    const { side: group, stratum, teamId } = placed;
    const cluster = teamId ?? "none";
    const key = JSON.stringify([group, cluster, strata ? stratum : ""]);
    const row = sums.get(key) ?? {
      ...{ events: 0, exposure: 0, group, cluster },
      ...(strata ? { stratum } : {}),
    };
    row.events += events;
    row.exposure += exposure;
    sums.set(key, row);
  };
  for (const cell of cells) add(place.cell(cell), 0, cell[unit]);
  for (const injury of counted) add(place.injury(injury), 1, 0);
  const all = [...sums.values()];
  const rows = all.filter(({ exposure }) => exposure > 0);
  const dropped = all.reduce((sum, { events, exposure }) => sum + (exposure > 0 ? 0 : events), 0);
  return { rows, dropped };
}
