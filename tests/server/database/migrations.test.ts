import { randomBytes, randomUUID } from "node:crypto";
import { cpSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { getTableName } from "drizzle-orm";
import { drizzle } from "drizzle-orm/postgres-js";
import { migrate } from "drizzle-orm/postgres-js/migrator";
import postgres from "postgres";
import { expect, it } from "vitest";
import { tool } from "../../../app/platform/launch/modules.mjs";
import { run } from "../../../app/platform/machine/command.mjs";
import { privateFolder, ROOT } from "../../../app/platform/machine/places.mjs";
import { migrateDatabase } from "../../../db/migrate";
import { tenancy } from "../../../db/schema/tenancy";
import { tenancySql } from "../../../db/schema/tenancy-sql";
import { owner } from "../../harness";
import { inDatabase } from "../../harness/cluster";
import { listPolicies } from "./catalogue.queries";

it("has a migration for everything the schema says", async () => {
  // The generator takes a path relative to the checkout only.
  const name = `migrations.${process.pid}`;
  const copy = join(privateFolder("test-migrations"), name);
  cpSync(join(ROOT, "db/migrations"), copy, { recursive: true });
  try {
    const before = readdirSync(copy);
    const { output } = await run(
      tool("drizzle-kit"),
      [
        "generate",
        "--dialect=postgresql",
        "--schema=db/schema/index.ts",
        `--out=.haleside/test-migrations/${name}`,
      ],
      { cwd: ROOT },
    );
    expect(output).toContain("No schema changes");
    expect(readdirSync(copy)).toEqual(before);
  } finally {
    rmSync(copy, { recursive: true, force: true });
  }
});

it("changes nothing when it is run again, and refuses a key that is not the database's", async () => {
  const urls = {
    owner: process.env.DATABASE_OWNER_URL ?? "",
    maintenance: process.env.DATABASE_MAINTENANCE_URL ?? "",
  };
  const shape = () => owner()`select table_name, column_name, data_type, is_nullable, column_default
    from information_schema.columns where table_schema in ('public', 'auth', 'installation') order by 1, 2`;
  const before = [await shape(), await listPolicies()];
  await migrateDatabase(urls, Buffer.from(process.env.HALESIDE_MASTER_KEY ?? "", "base64"));
  expect([await shape(), await listPolicies()]).toEqual(before);
  await expect(migrateDatabase(urls, Buffer.alloc(32, 7))).rejects.toThrow("does not open this database");
});

/** A database with the migrations before the named one, as an earlier release left it, until `use` has ended. */
async function withEarlierDatabase(
  before: string,
  use: (urls: { owner: string; maintenance: string }, client: postgres.Sql) => Promise<void>,
) {
  const folder = join(privateFolder("test-migrations"), `earlier.${process.pid}`);
  cpSync(join(ROOT, "db/migrations"), folder, { recursive: true });
  const path = join(folder, "meta/_journal.json");
  const journal = JSON.parse(readFileSync(path, "utf8")) as { entries: { tag: string }[] };
  const at = journal.entries.findIndex(({ tag }) => tag === before);
  expect(at).toBeGreaterThan(0);
  writeFileSync(path, JSON.stringify({ ...journal, entries: journal.entries.slice(0, at) }));
  const name = `t${process.pid}_${randomBytes(4).toString("hex")}`;
  const [ownerUrl, maintenanceUrl] = [
    process.env.DATABASE_OWNER_URL ?? "",
    process.env.DATABASE_MAINTENANCE_URL ?? "",
  ];
  const server = postgres(inDatabase(ownerUrl, "postgres"), { max: 1, onnotice: () => {} });
  try {
    // Empty but for the extensions, which only a superuser makes.
    await server.unsafe(`create database ${name} template haleside`);
    await server.unsafe(`grant connect on database ${name} to haleside_maintenance`);
    const client = postgres(inDatabase(ownerUrl, name), { max: 1, onnotice: () => {} });
    await migrate(drizzle(client), { migrationsFolder: folder });
    const there = await client<
      { name: string }[]
    >`select relname as name from pg_class where relnamespace = 'public'::regnamespace and relkind = 'r'`;
    const known = tenancy.filter(({ table }) => there.some(({ name: each }) => each === getTableName(table)));
    for (const statement of known.flatMap(tenancySql)) await client.unsafe(statement);
    await client.unsafe("grant usage on schema public to haleside_maintenance");
    await client.end();
    const urls = { owner: inDatabase(ownerUrl, name), maintenance: inDatabase(maintenanceUrl, name) };
    const maintenance = postgres(urls.maintenance, { max: 1, onnotice: () => {} });
    await use(urls, maintenance).finally(() => maintenance.end());
  } finally {
    // Not by force: the owner may not end the other roles' connections, and all are closed.
    await server.unsafe(`drop database if exists ${name}`);
    await server.end();
    rmSync(folder, { recursive: true, force: true });
  }
}

it("marks what was recorded before there were roll-ups, in every organisation", async () => {
  await withEarlierDatabase("0003_rollups", async (urls, client) => {
    const clubs = [randomUUID(), randomUUID()];
    const [team, athlete, session, injury] = [randomUUID(), randomUUID(), randomUUID(), randomUUID()];
    for (const club of clubs) {
      await client`insert into organisations (organisation_id, slug, name, kind, time_zone, phone, age_bands)
        values (${club}, ${`a-${club}`}, 'A', 'club', 'Europe/London', '1', '[]')`;
      await client`insert into teams (organisation_id, id, name, name_key, sport, sex) values (${club}, ${team}, 'A', 'a', 'soccer', 'girls')`;
      await client`insert into athletes (organisation_id, id, given_name, family_name, name_key) values (${club}, ${athlete}, 'A', 'B', 'a b')`;
      await client`insert into sessions (organisation_id, id, team_id, day, kind, state, exposure_grade)
        values (${club}, ${session}, ${team}, '2025-03-04', 'match', 'held', 'recorded'),
          (${club}, ${randomUUID()}, ${team}, '2025-03-05', 'match', 'planned', 'none')`;
      await client`insert into injuries (organisation_id, id, athlete_id) values (${club}, ${injury}, ${athlete})`;
    }
    await migrateDatabase(urls, Buffer.from(process.env.HALESIDE_MASTER_KEY ?? "", "base64"));
    // A later migration may mark again what it makes anew.
    const marks =
      await client`select distinct organisation_id, cause, team_id, from_day::text, injury_id from rollup_marks order by 1, 2`;
    expect([...marks]).toEqual(
      clubs.sort().flatMap((organisation_id) => [
        { organisation_id, cause: "injury", team_id: null, from_day: null, injury_id: injury },
        { organisation_id, cause: "session", team_id: team, from_day: "2025-03-04", injury_id: null },
      ]),
    );
    const unforced = await client`select relname from pg_class
      where relnamespace = 'public'::regnamespace and relkind = 'r' and not relforcerowsecurity`;
    expect([...unforced]).toEqual([]);
  });
});
