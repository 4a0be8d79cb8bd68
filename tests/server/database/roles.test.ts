import { randomUUID } from "node:crypto";
import { getTableName, sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { read } from "~db/client.server";
import { tenancy } from "~db/schema/tenancy";
import { maintenance, makeOrganisation, scopeOf, type TestOrganisation } from "../../harness";
import { actors, cases, denied, doorOf, members, outcome, scopeFor, trying } from "./acting";
import { insertOf, makeRow, type Planted, plant, readCodes } from "./plant";

let ours: TestOrganisation;
let own: Planted;
let codes: Map<string, string>;

beforeAll(async () => {
  codes = await readCodes();
  ours = await makeOrganisation();
  own = await plant(ours.id, randomUUID(), codes);
});

/** Written out by hand from who may do what, so that a slip in the tenancy table shows here. */
describe("what the roles must never do", () => {
  const clinicalTables = [
    "injuries",
    "injury_revisions",
    "injury_diagnoses",
    "injury_notes",
    "coach_reports",
    "coach_report_outcomes",
    "encounters",
    "availability_reasons",
    "earlier_injuries",
    "safeguarding_holds",
    "notices",
    "notice_links",
    "notice_events",
    "form_drafts",
  ];

  it.each(clinicalTables)("%s is read by no administrator and no coach", async (name) => {
    for (const actor of ["admin", "coach"] as const)
      expect(await trying(scopeFor(actor, own), (tx) => outcome(tx, `select * from ${name}`))).toBe(0);
  });

  it("keeps the views of injuries from coaches and administrators, and availability with its days from nobody", async () => {
    for (const actor of members) {
      const counts = await read(scopeFor(actor, own), async (tx) => [
        (await tx.execute(sql`select * from current_injuries`)).count,
        (await tx.execute(sql`select * from availability_contributions`)).count,
      ]);
      const seesInjuries = actor === "lead" || actor === "trainer";
      expect([actor, ...counts]).toEqual([actor, seesInjuries ? 1 : 0, 1]);
    }
  });

  it("lets a coach say that an athlete cannot play and never that they can", async () => {
    const entry = tenancy.find(({ table }) => getTableName(table) === "availability_changes");
    if (!entry) throw new Error("No such table.");
    await trying(scopeFor("coach", own), async (tx) => {
      for (const [state, expected] of [
        ["unavailable", 1],
        ["modified", denied],
        ["full", denied],
      ] as const) {
        const { text, values } = insertOf("availability_changes", {
          ...makeRow(entry.table, own, codes),
          state,
        });
        expect([state, await outcome(tx, text, values)]).toEqual([state, expected]);
      }
    });
  });

  it("lets nobody change or remove what is kept for ever", async () => {
    const kept = [
      "audit_events",
      "audit_seals",
      "injury_revisions",
      "injury_diagnoses",
      "injury_notes",
      "coach_reports",
      "coach_report_outcomes",
      "availability_reasons",
      "availability_changes",
      "notice_events",
      "notices",
      "exercises",
    ];
    const all = scopeOf(ours, actors, { personId: own.personId, doorId: doorOf(own, "guardian") });
    await trying(all, async (tx) => {
      for (const name of kept) {
        expect([name, await outcome(tx, `update ${name} set organisation_id = organisation_id`)]).toEqual([
          name,
          denied,
        ]);
        expect([name, await outcome(tx, `delete from ${name}`)]).toEqual([name, denied]);
      }
      expect(await outcome(tx, "delete from injuries")).toBe(denied);
      expect(await outcome(tx, "update injuries set athlete_id = athlete_id")).toBe(denied);
      expect(await outcome(tx, "truncate audit_events")).toBe(denied);
    });
  });

  it("shows a guardian the one notice and none beside it", async () => {
    const second = randomUUID();
    const notice = own.rows.get("notices") ?? {};
    const { text, values } = insertOf("notices", { ...notice, id: second });
    await maintenance().unsafe(text, values as never[]);
    const seen = (doorId: string) =>
      read(scopeOf(ours, ["guardian"], { doorId }), async (tx) =>
        (await tx.execute<{ id: string }>(sql`select id from notices`)).map(({ id }) => id),
      );
    expect(await seen(String(notice.id))).toEqual([notice.id]);
    expect(await seen(second)).toEqual([second]);
    expect(await seen(randomUUID())).toEqual([]);
    const tables = await trying(scopeFor("guardian", own), async (tx) => {
      const met: string[] = [];
      for (const { name } of cases)
        if (Number(await outcome(tx, `select * from ${name}`)) > 0) met.push(name);
      return met.sort();
    });
    expect(tables).toEqual([
      "deliveries",
      "notice_events",
      "notice_links",
      "notices",
      "organisation_keys",
      "organisations",
    ]);
  });

  it("shows a person without an organisation their own memberships only", async () => {
    const ids = await read(scopeFor("person", own), async (tx) => [
      ...(await tx.execute(sql`select organisation_id from organisations`)).map((row) => row.organisation_id),
      ...(await tx.execute(sql`select person_id from memberships`)).map((row) => row.person_id),
    ]);
    expect(ids).toEqual([ours.id, own.personId]);
  });

  it("shows nothing at all without a scope", async () => {
    const bare = scopeOf({ id: "", slug: "", timeZone: "UTC" }, []);
    await trying(bare, async (tx) => {
      for (const { name, allow } of cases)
        expect([name, await outcome(tx, `select * from ${name}`)]).toEqual([name, allow.select ? 0 : denied]);
    });
  });
});
