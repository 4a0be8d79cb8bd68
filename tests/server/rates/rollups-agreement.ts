import { expect } from "vitest";
import type { ExposureCell } from "~/features/rates/counting";
import { sumExposureCells, sumExposureCellsLive } from "~/features/rates/rollups/exposure.queries.server";
import { listInjuryRows, listInjuryRowsLive } from "~/features/rates/rollups/injury-rows.queries.server";
import type { RolledInjuries } from "~/features/rates/rollups/rollups";
import {
  countInjuriesLive,
  countInjuriesRolled,
} from "~/features/rates/rollups/rollups-injuries.queries.server";
import { read, type Scope } from "~db/client.server";
import { maintenance } from "../../harness";

export type Range = { from: string; to: string; teamIds: readonly string[] | null };

const sorted = <T extends object>(rows: readonly T[], keys: readonly (keyof T)[]) =>
  rows
    .map((row) => ({ key: keys.map((key) => String(row[key])).join(" "), row }))
    .sort((a, b) => (a.key < b.key ? -1 : 1));

function expectSameExposure(found: ExposureCell[], live: ExposureCell[], name: string) {
  const keys = ["day", "teamId", "kind", "grade", "sex", "age"] as const;
  const [a, b] = [sorted(found, keys), sorted(live, keys)];
  expect(
    a.map(({ key }) => key),
    name,
  ).toEqual(b.map(({ key }) => key));
  for (const [index, { key, row }] of a.entries()) {
    expect(Math.abs(row.aes - (b[index]?.row.aes ?? Number.NaN)), `${name} ${key}`).toBeLessThan(1e-9);
    expect(Math.abs(row.hours - (b[index]?.row.hours ?? Number.NaN)), `${name} ${key}`).toBeLessThan(1e-9);
  }
}

const injuryKeys = [
  ...([
    "day",
    "teamId",
    "kind",
    "sex",
    "age",
    "gradual",
    "leftOut",
    "aes",
    "hours",
    "timeLoss",
    "injuries",
  ] as const),
];
const byId = <T extends { id: string }>(rows: readonly T[]) =>
  rows.toSorted((a, b) => (a.id < b.id ? -1 : 1));
const sortedInjuries = (rows: RolledInjuries[]) => sorted(rows, injuryKeys).map(({ key }) => key);

/** Roll-ups answer as the records themselves do, over every range. */
export async function expectAgreement(scope: Scope, ranges: readonly Range[], name: string) {
  await read(scope, async (tx) => {
    for (const range of ranges) {
      const place = `${name} ${range.from} ${range.to} ${range.teamIds?.length ?? "all"}`;
      expectSameExposure(await sumExposureCells(tx, range), await sumExposureCellsLive(tx, range), place);
      expect(byId(await listInjuryRows(tx, range)), place).toEqual(byId(await listInjuryRowsLive(tx, range)));
      const rolled = sortedInjuries(await countInjuriesRolled(tx, range));
      expect(rolled, place).toEqual(sortedInjuries(await countInjuriesLive(tx, range)));
    }
  });
}

export async function countMarks(organisationId: string) {
  const [row] = await maintenance()<{ marks: number }[]>`
    select count(*)::int as marks from rollup_marks where organisation_id = ${organisationId}`;
  return row?.marks ?? Number.NaN;
}
