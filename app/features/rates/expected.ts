import { type Counted, directlyStandardisedRate, type Estimate } from "~/statistics";
import { bandOf, type ExposureCell, type InjuryRow } from "./counting";
import type { RateUnit } from "./filters";
import type { Band } from "./groups";

/**
 * How many injuries an exposure would bring at the rates of a standard: by session kind, or by age band and session
 * kind. Injuries of the standard that have no exposure of their own (gradual ones tied to no session) count over all
 * exposure of their age, or over all of it, so that none is lost and the standard expects of itself what it had. Pure.
 */
export type Standard = {
  /** Events and exposure of the standard, by stratum. */
  strata: Map<string, Counted>;
  keysOf: (cell: Pick<ExposureCell, "age" | "kind">) => string[];
  unit: RateUnit;
};

type By = "kind" | "age-kind";

const whole = "all";

/** The strata an exposure counts in, the finest first: each carries its own events on top of the others. */
function keyMaker(by: By, bands: readonly Band[]) {
  return ({ age, kind }: { age: number | null; kind: string | null }): string[] => {
    if (by === "kind") return [...(kind ? [kind] : []), whole];
    const band = bandOf(age, bands) ?? "unknown";
    return [...(kind ? [`${band} / ${kind}`] : []), band, whole];
  };
}

/** The rates of a standard. */
export function standardOf(
  { cells, counted }: { cells: readonly ExposureCell[]; counted: readonly InjuryRow[] },
  by: By,
  bands: readonly Band[],
  unit: RateUnit,
): Standard {
  const keysOf = keyMaker(by, bands);
  const strata = new Map<string, Counted>();
  for (const cell of cells)
    for (const key of keysOf(cell)) {
      const stratum = strata.get(key) ?? { events: 0, exposure: 0 };
      stratum.exposure += cell[unit];
      strata.set(key, stratum);
    }
  for (const { age, sessionKind } of counted) {
    const key = keysOf({ age, kind: sessionKind }).find((each) => (strata.get(each)?.exposure ?? 0) > 0);
    const stratum = key === undefined ? undefined : strata.get(key);
    if (stratum) stratum.events += 1;
  }
  return { strata, keysOf, unit };
}

/**
 * Injuries expected in some exposure at the standard's rates, with the limits that the standard's own counts give
 * (Fay-Feuer); null without exposure on either side. Exposure in strata where the standard has none expects nothing
 * beyond the coarser strata.
 */
export function expectedIn(
  { strata, keysOf, unit }: Standard,
  cells: readonly Pick<ExposureCell, "age" | "kind" | "aes" | "hours">[],
): Estimate | null {
  const weights = new Map<string, number>();
  for (const cell of cells)
    for (const key of keysOf(cell)) weights.set(key, (weights.get(key) ?? 0) + cell[unit]);
  const used = [...weights].flatMap(([key, weight]) => {
    const stratum = strata.get(key);
    return stratum && stratum.exposure > 0 && weight > 0 ? [{ stratum, weight }] : [];
  });
  const per = used.reduce((sum, { weight }) => sum + weight, 0);
  if (!(per > 0)) return null;
  return directlyStandardisedRate(
    used.map(({ stratum }) => stratum),
    used.map(({ weight }) => weight),
    { per },
  );
}
