import { randomUUID } from "node:crypto";
import { beforeAll, describe, expect, it } from "vitest";
import { maintenance, makeOrganisation, scopeOf, type TestOrganisation } from "../../harness";
import {
  actors,
  cases,
  commands,
  denied,
  doorOf,
  outcome,
  outside,
  scopeFor,
  statement,
  trying,
  Undone,
} from "./acting";
import {
  inOrder,
  insertOf,
  makeRow,
  type Planted,
  plant,
  primaryKeyOf,
  readCodes,
  referencesOf,
} from "./plant";

/**
 * Every table of the tenancy table, with a row in two organisations: nobody of the one reaches the other's, and each
 * actor runs the commands that the table allows and no others. All as the application's own role, through read and
 * write.
 */

let ours: TestOrganisation;
let theirs: TestOrganisation;
let own: Planted;
let foreign: Planted;
let codes: Map<string, string>;

beforeAll(async () => {
  codes = await readCodes();
  ours = await makeOrganisation();
  theirs = await makeOrganisation();
  own = await plant(ours.id, randomUUID(), codes);
  foreign = await plant(theirs.id, randomUUID(), codes);
});

describe.each(cases)("$name", ({ table, name, allow, only, updateColumns, personRows, sweeperSees }) => {
  const updates = updateColumns ?? ["organisation_id"];

  it("shows and gives nothing of another organisation, whoever asks", async () => {
    // All who act in an organisation at once, bound to the other's records as if an id had leaked.
    for (const actor of actors.filter((one) => !outside.includes(one))) {
      const scope = scopeOf(ours, [actor], {
        personId: foreign.personId,
        doorId: doorOf(foreign, actor),
      });
      await trying(scope, async (tx) => {
        for (const command of ["select", "update", "delete"] as const) {
          const { text, values } = statement(name, command, foreign, updates);
          const met = await outcome(tx, text, values);
          expect([actor, command, met]).toEqual([actor, command, allow[command] ? 0 : denied]);
        }
        const everything = await outcome(
          tx,
          `select 1 from ${name} where organisation_id is distinct from $1`,
          [ours.id],
        );
        expect([actor, everything]).toEqual([actor, allow.select ? 0 : denied]);
        const row = insertOf(name, makeRow(table, foreign, codes));
        expect([actor, "insert", await outcome(tx, row.text, row.values)]).toEqual([actor, "insert", denied]);
        const moved = await outcome(tx, `update ${name} set organisation_id = $1`, [theirs.id]);
        // Refused by the policy or the grant; nothing to move for who sees nothing.
        expect([denied, 0]).toContain(moved);
      });
    }
    const [kept] = await maintenance().unsafe(
      `select count(*)::int as rows from ${name} where organisation_id = $1`,
      [theirs.id],
    );
    expect(kept?.rows).toBeGreaterThan(0);
  });

  it("runs for each actor what the tenancy table allows, and nothing else", async () => {
    for (const actor of actors) {
      await trying(scopeFor(actor, own), async (tx) => {
        for (const command of commands) {
          const sees =
            command === "select" &&
            ((actor === "person" && personRows) || (actor === "sweeper" && sweeperSees));
          const may = Boolean(allow[command]?.includes(actor) || sees);
          const { text, values } =
            command === "insert"
              ? insertOf(name, { ...makeRow(table, own, codes), ...permitted[`${actor} ${name}`] })
              : statement(name, command, own, updates);
          const met = await outcome(tx, text, values);
          const place = `${actor} ${command}`;
          // A key or a constraint refused it: that is asked after the policies, which let it through.
          const passed = met === 1 || /^23/.test(String(met));
          const refusal = !allow[command] || command === "insert" ? denied : 0;
          expect([place, passed, met]).toEqual([place, may, may ? met : refusal]);
        }
      });
    }
  });

  it("refuses a record of ours that hangs on another organisation's", async () => {
    for (const { columns, target, targets } of referencesOf(table)) {
      if (columns.length < 2) continue;
      const row = makeRow(table, own, codes);
      for (const key of primaryKeyOf(table))
        if (key === "person_id" && !columns.includes(key)) row[key] = randomUUID();
      for (const [index, column] of columns.entries())
        if (column !== "organisation_id") row[column] = foreign.rows.get(target)?.[targets[index] ?? ""];
      const refused = await insertAsMaintenance(name, row);
      expect([`${name} (${columns}) to ${target}`, refused]).toEqual([
        `${name} (${columns}) to ${target}`,
        "23503",
      ]);
    }
  });

  const limited = actors.filter((actor) => only?.[actor]);
  if (limited.length === 0) return;
  it("shows an actor who is bound to one record or person no other", async () => {
    for (const actor of limited) {
      const scope = { ...scopeFor(actor, own), personId: randomUUID(), doorId: randomUUID() };
      await trying(scope, async (tx) => {
        for (const command of ["select", "update", "delete"] as const) {
          if (!only?.[actor]?.[command] || !allow[command]) continue;
          const { text, values } = statement(name, command, own, updates);
          expect([actor, command, await outcome(tx, text, values)]).toEqual([actor, command, 0]);
        }
        if (!only?.[actor]?.insert) return;
        const { text, values } = insertOf(name, makeRow(table, own, codes));
        expect([actor, "insert", await outcome(tx, text, values)]).toEqual([actor, "insert", denied]);
      });
    }
  });
});

/**
 * What an insert is refused with by the keys alone: maintenance is bound by no policy. Our planted row goes first,
 * where nothing hangs on it, so that its own key is free.
 */
async function insertAsMaintenance(name: string, row: Record<string, unknown>) {
  let answer = "accepted";
  await maintenance()
    .begin(async (tx) => {
      const planted = statement(name, "delete", own, []);
      await tx.savepoint((sp) => sp.unsafe(planted.text, planted.values as never[])).catch(() => {});
      const { text, values } = insertOf(name, row);
      await tx
        .savepoint((sp) => sp.unsafe(text, values as never[]))
        .catch((error: { code?: string }) => {
          answer = error.code ?? "another error";
        });
      throw new Undone();
    })
    .catch((error: unknown) => {
      if (!(error instanceof Undone)) throw error;
    });
  return answer;
}

/** What a row must be for an actor whose inserts are limited to one kind. */
const permitted: Record<string, Record<string, unknown>> = {
  "coach availability_reasons": { cause: "coach_report" },
  "coach availability_changes": { state: "unavailable" },
};

it("plants every table", () => {
  expect([...own.rows.keys()].sort()).toEqual(
    inOrder()
      .map(({ name }) => name)
      .sort(),
  );
});
