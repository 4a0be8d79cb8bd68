import type { ExposureCell } from "~/features/rates/counting";
import type { RolledInjuries } from "~/features/rates/rollups/rollups";

type Answer = { cells: ExposureCell[]; injuries: RolledInjuries[] };

const cellsByKey = (cells: readonly ExposureCell[]) =>
  new Map(cells.map(({ aes, hours, ...key }) => [Object.values(key).join(" "), { aes, hours }]));
const lines = (rows: readonly RolledInjuries[]) =>
  rows
    .map((row) => Object.values(row).join(" "))
    .sort()
    .join("\n");

/** @throws Error naming the first difference */
export function expectEqual(rolled: Answer, live: Answer) {
  const expected = cellsByKey(live.cells);
  if (rolled.cells.length !== live.cells.length) throw new Error("Roll-ups and records have other cells.");
  for (const [key, { aes, hours }] of cellsByKey(rolled.cells)) {
    const other = expected.get(key);
    if (!other || Math.abs(other.aes - aes) > 1e-9 || Math.abs(other.hours - hours) > 1e-9)
      throw new Error(`Roll-ups and records disagree over the exposure of ${key}.`);
  }
  if (lines(rolled.injuries) !== lines(live.injuries))
    throw new Error("Roll-ups and records disagree over injuries.");
}
