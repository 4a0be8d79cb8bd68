import { createHash } from "node:crypto";
import postgres from "postgres";
import type { TestProject } from "vitest/node";
import { hashOf } from "../../app/platform/launch/stamps.mjs";
import { bornOf } from "../../app/platform/machine/lock.mjs";
import { openCluster } from "../../db/local-server/cluster.mjs";
import { databaseStatements } from "../../db/local-server/roles.mjs";
import { testEnvironment } from "../../db/local-server/test-cluster.mjs";
import { migrateDatabase } from "../../db/migrate";

/**
 * Before the first test: a PostgreSQL cluster (the one `npm test` made, else this checkout's lasting test cluster), and
 * in it a template database per hash of all that makes the schema. Each test file copies the template.
 */

export type TestCluster = {
  /** The variables of a program, for the database that each worker puts in the place of `haleside`. */
  environment: Record<string, string>;
  superuser: string;
  template: string;
  /** Begins the name of every database of this run. */
  prefix: string;
};

declare module "vitest" {
  interface ProvidedContext {
    cluster: TestCluster;
  }
}

const names = [
  "APP_ORIGIN",
  "BETTER_AUTH_SECRET",
  "DATABASE_AUTH_URL",
  "DATABASE_MAINTENANCE_URL",
  "DATABASE_OWNER_URL",
  "DATABASE_URL",
  "HALESIDE_MASTER_KEY",
  "RESEND_API_KEY",
  "RESEND_WEBHOOK_SECRET",
  "TEST_SUPERUSER_URL",
];

export default async function setup(project: TestProject) {
  const environment = process.env.TEST_SUPERUSER_URL ? given() : await lasting();
  const superuser = environment.TEST_SUPERUSER_URL ?? "";
  const prefix = `t${process.pid}_`;
  await dropLeftovers(superuser);
  const template = await ensureTemplate(superuser, environment);
  project.provide("cluster", { environment, superuser, template, prefix });
  return () => dropDatabases(superuser, (name) => name.startsWith(prefix));
}

function given(): Record<string, string> {
  return Object.fromEntries(names.map((name) => [name, process.env[name] ?? ""]));
}

/** Stays up for the next run: `node db/local-server/cli.mjs down test` stops it. */
async function lasting(): Promise<Record<string, string>> {
  return testEnvironment(await openCluster({ name: "test", lasting: false, keep: true }));
}

/** The same cluster, in another database. */
export function inDatabase(url: string, database: string) {
  const address = new URL(url);
  address.pathname = `/${database}`;
  return address.href;
}

const schemaInputs = [
  "db/migrations",
  "db/schema",
  "db/migrate.ts",
  "db/local-server/roles.mjs",
  "app/platform/jobs/queue-schema.server.ts",
  "app/platform/crypto/sealing.server.ts",
];

/** The migrated database that test files copy. Made aside and renamed, so that a killed run leaves no half of it. */
async function ensureTemplate(superuser: string, environment: Record<string, string>) {
  const key = createHash("sha256")
    .update(environment.HALESIDE_MASTER_KEY ?? "")
    .digest("hex");
  const name = `template_${hashOf(schemaInputs, [key]).slice(0, 16)}`;
  const client = postgres(superuser, { max: 1, onnotice: () => {} });
  try {
    // Two runs at once: the second waits and then finds it made.
    await client`select pg_advisory_lock(hashtext('haleside test template'))`;
    const [known] = await client`select 1 from pg_database where datname = ${name}`;
    if (known) return name;
    const aside = `${name}_new`;
    await client.unsafe(`drop database if exists ${aside} with (force)`);
    await makeDatabase(client, aside, "template0");
    const inside = postgres(inDatabase(superuser, aside), { max: 1, onnotice: () => {} });
    for (const statement of databaseStatements()) await inside.unsafe(statement);
    await inside.end();
    await migrateDatabase(
      {
        owner: inDatabase(environment.DATABASE_OWNER_URL ?? "", aside),
        maintenance: inDatabase(environment.DATABASE_MAINTENANCE_URL ?? "", aside),
      },
      Buffer.from(environment.HALESIDE_MASTER_KEY ?? "", "base64"),
    );
    await client.unsafe(`alter database ${aside} rename to ${name}`);
    return name;
  } finally {
    await client.end();
  }
}

/** A database with the rights that the real one has; a copy takes the content of its template but not its rights. */
export async function makeDatabase(client: postgres.Sql, name: string, template: string) {
  await client.unsafe(`create database ${name} owner haleside_owner template ${template}`);
  await client.unsafe(`revoke all on database ${name} from public`);
  await client.unsafe(
    `grant connect on database ${name} to haleside_app, haleside_auth, haleside_maintenance`,
  );
}

/** What runs left that were killed. */
function dropLeftovers(superuser: string) {
  return dropDatabases(superuser, (name) => {
    const pid = /^t(\d+)_/.exec(name)?.[1];
    return pid !== undefined && bornOf(Number(pid)) === "";
  });
}

async function dropDatabases(superuser: string, picks: (name: string) => boolean) {
  const client = postgres(superuser, { max: 1, onnotice: () => {} });
  try {
    const rows = await client<{ datname: string }[]>`select datname from pg_database`;
    for (const { datname } of rows.filter((row) => picks(row.datname)))
      await client.unsafe(`drop database if exists ${datname} with (force)`);
  } finally {
    await client.end();
  }
}
