import { buildScenario } from "~db/seed/scenario/index.ts";
import type { Scenario } from "~db/seed/scenario/types.ts";

export const TODAY = "2026-12-01";

const built = new Map<string, Scenario>();

/** The scenario of a seed on the tests' day, built once per file. */
export function scenarioOf(seed: string): Scenario {
  const known = built.get(seed);
  if (known) return known;
  const scenario = buildScenario({ seed, today: TODAY });
  built.set(seed, scenario);
  return scenario;
}

/** Indexes rows by key; throws when two share one. */
export function indexByKey<T extends { key: string }>(rows: readonly T[]): Map<string, T> {
  const index = new Map(rows.map((row) => [row.key, row]));
  if (index.size !== rows.length) throw new Error("two rows share a key");
  return index;
}

/** The row of a key that must exist. */
export function find<T>(index: ReadonlyMap<string, T>, key: string): T {
  const row = index.get(key);
  if (row === undefined) throw new Error(`nothing has the key ${key}`);
  return row;
}

export function groupBy<T>(rows: readonly T[], keyOf: (row: T) => string): Map<string, T[]> {
  const groups = new Map<string, T[]>();
  for (const row of rows) {
    const group = groups.get(keyOf(row));
    if (group) group.push(row);
    else groups.set(keyOf(row), [row]);
  }
  return groups;
}
