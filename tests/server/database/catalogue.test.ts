import { getTableName } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { tenancy } from "~db/schema/tenancy";
import { tenancySql } from "~db/schema/tenancy-sql";
import { owner } from "../../harness";
import {
  listForeignKeys,
  listGrants,
  listIndexes,
  listPolicies,
  listRoles,
  listTables,
  listViews,
  type PolicyRow,
} from "./catalogue.queries";

/** The database is asked, not the schema's source: what it says of every table must be what the tenancy table says. */

const named = tenancy.map((entry) => ({ ...entry, name: getTableName(entry.table) }));
const names = named.map(({ name }) => name).sort();

/** Indexes that may not begin with the organisation, and why. */
const acrossOrganisations: Record<string, string> = {
  organisations_slug_unique: "an address names one organisation among all",
  memberships_person_idx: "a person's organisations are found before one is chosen",
};

describe("tables", () => {
  it("are those of the tenancy table, each entered once", async () => {
    expect((await listTables()).map(({ name }) => name)).toEqual(names);
    expect(new Set(names).size).toBe(names.length);
  });

  it("have row-level security enabled and forced, and belong to the owner", async () => {
    for (const table of await listTables())
      expect(table).toMatchObject({ secured: true, forced: true, owner: "haleside_owner" });
  });

  it("have organisation_id first in the primary key and in every other index", async () => {
    const indexes = await listIndexes();
    const keyed = indexes.filter(({ primary }) => primary).map(({ table }) => table);
    expect(keyed.sort()).toEqual(names);
    const loose = indexes.filter(({ columns }) => columns[0] !== "organisation_id").map(({ name }) => name);
    expect(loose.sort()).toEqual(Object.keys(acrossOrganisations).sort());
  });

  it("refer to each other with the organisation on both sides, first", async () => {
    const keys = await listForeignKeys();
    for (const key of keys) {
      const place = `${key.table}.${key.name}`;
      expect([place, key.columns[0], key.targets[0]]).toEqual([place, "organisation_id", "organisation_id"]);
      expect([place, key.schema]).toEqual([place, "public"]);
    }
    // Every table hangs on an organisation, by however many steps.
    const reached = new Set(["organisations"]);
    for (let found = 0; found !== reached.size; ) {
      found = reached.size;
      for (const { table, target } of keys) if (reached.has(target)) reached.add(table);
    }
    expect([...reached].sort()).toEqual(names);
  });

  it("require the organisation", async () => {
    const rows = await owner()<{ table: string }[]>`
      select c.relname as table from pg_attribute a join pg_class c on c.oid = a.attrelid
      where a.attname = 'organisation_id' and a.attnotnull and a.atttypid = 'uuid'::regtype
        and c.relnamespace = 'public'::regnamespace and c.relkind = 'r' order by 1`;
    expect(rows.map(({ table }) => table)).toEqual(names);
  });
});

describe("policies", () => {
  it("are the ones the tenancy table calls for and no others", async () => {
    const expected = named.flatMap(({ name, allow }) => [
      { table: name, name: "tenancy", permissive: "PERMISSIVE", roles: ["public"], command: "all" },
      ...(["select", "insert", "update", "delete"] as const)
        .filter((command) => allow[command])
        .map((command) => ({
          table: name,
          name: `${command}_actors`,
          permissive: "RESTRICTIVE",
          roles: ["public"],
          command,
        })),
    ]);
    const found = (await listPolicies()).map(({ using: _u, check: _c, ...rest }) => rest);
    const order = (a: { table: string; name: string }, b: { table: string; name: string }) =>
      `${a.table} ${a.name}` < `${b.table} ${b.name}` ? -1 : 1;
    expect(found.toSorted(order)).toEqual(expected.toSorted(order));
  });

  it("say what the tenancy table generates", async () => {
    const before = await listPolicies();
    let generated: PolicyRow[] = [];
    // Undone again, so that nothing is mended before the tests below have looked.
    await owner()
      .begin(async (sql) => {
        for (const statement of tenancy.flatMap(tenancySql)) await sql.unsafe(statement);
        generated = await listPolicies(sql);
        throw new Error("undo");
      })
      .catch((error: Error) => {
        if (error.message !== "undo") throw error;
      });
    expect(before).toEqual([...generated]);
  });

  it("bind rows that are read and rows that are written", async () => {
    for (const policy of await listPolicies()) {
      const place = `${policy.table} ${policy.name}`;
      const reads = policy.command !== "insert";
      const writes = ["all", "insert", "update"].includes(policy.command);
      expect([place, policy.using !== null, policy.check !== null]).toEqual([place, reads, writes]);
      // A setting read without a sub-select is evaluated for each row.
      const bare = `${policy.using} ${policy.check}`.match(/(?<!SELECT [^)]{0,60})current_setting/g) ?? [];
      expect([place, bare]).toEqual([place, []]);
      if (policy.name === "tenancy" && policy.check)
        expect(policy.check).toMatch(/^\(organisation_id = \( ?SELECT .*app\.organisation_id/s);
    }
  });
});

describe("grants", () => {
  let grants: Awaited<ReturnType<typeof listGrants>>;
  let views: string[];
  beforeAll(async () => {
    grants = await listGrants();
    views = (await listViews()).map(({ name }) => name);
  });
  const of = (role: string) =>
    grants
      .filter(({ grantee }) => grantee === role)
      .map(({ table, column, privilege }) => `${privilege} ${table}${column ? `.${column}` : ""}`)
      .sort();

  it("to the application are the ones of the tenancy table and no others", () => {
    const expected = named.flatMap(({ name, allow, updateColumns }) =>
      Object.keys(allow).flatMap((command) =>
        command === "update" && updateColumns
          ? updateColumns.map((column) => `update ${name}.${column}`)
          : [`${command} ${name}`],
      ),
    );
    expect(of("haleside_app")).toEqual([...expected, ...views.map((view) => `select ${view}`)].sort());
  });

  it("to maintenance are those of backup and erasure", () => {
    const commands = ["select", "insert", "update", "delete", "truncate"];
    const expected = names.flatMap((name) => commands.map((command) => `${command} ${name}`));
    expect(of("haleside_maintenance")).toEqual(
      [...expected, ...views.map((view) => `select ${view}`)].sort(),
    );
  });

  it("go to nobody else, now or by default", async () => {
    expect([...new Set(grants.map(({ grantee }) => grantee))].sort()).toEqual([
      "haleside_app",
      "haleside_maintenance",
    ]);
    expect(await owner()`select defaclrole from pg_default_acl`).toHaveLength(0);
  });

  it("keep the sign-in tables from the application", async () => {
    const [row] = await owner()<{ usage: boolean; reads: boolean }[]>`select
      has_schema_privilege('haleside_app', 'auth', 'usage') as usage,
      exists (select 1 from pg_class where relnamespace = 'auth'::regnamespace and relkind = 'r'
        and has_table_privilege('haleside_app', oid, 'select, insert, update, delete')) as reads`;
    expect(row).toEqual({ usage: false, reads: false });
  });

  it("let the sign-in role reach nothing of an organisation", async () => {
    const [row] = await owner()<{ usage: boolean }[]>`
      select has_schema_privilege('haleside_auth', 'public', 'usage') as usage`;
    expect(row).toEqual({ usage: false });
    expect(of("haleside_auth")).toEqual([]);
  });
});

it("gives the application's role no power, no membership, and nothing to own or to make", async () => {
  const roles = new Map((await listRoles()).map(({ name, ...rest }) => [name, rest]));
  const bare = { powers: [], member: false, owns: [], schemas: [] };
  expect(roles.get("haleside_app")).toEqual(bare);
  expect(roles.get("haleside_auth")).toEqual(bare);
  expect(roles.get("haleside_maintenance")).toEqual({ ...bare, powers: ["bypassrls"] });
  expect(roles.get("haleside_owner")?.powers).toEqual(["createdb"]);
});

it("has only views that read with the reader's own rights, and no materialised ones", async () => {
  for (const view of await listViews())
    expect(view).toMatchObject({ kind: "v", options: expect.arrayContaining(["security_invoker=true"]) });
});

it("has no function that runs with another's rights", async () => {
  const rows = await owner()`select p.proname from pg_proc p
    where p.prosecdef and p.pronamespace not in ('pg_catalog'::regnamespace, 'information_schema'::regnamespace)`;
  expect(rows).toHaveLength(0);
});
