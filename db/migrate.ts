/**
 * Brings a database to the newest schema, as the owner: Drizzle's migrations, then the policies and grants that
 * db/schema/tenancy-sql.ts generates, then the job queue's own schema. Running it again changes nothing.
 * Run by `npm run migrate` with DATABASE_OWNER_URL (and DATABASE_MAINTENANCE_URL for the key check).
 */
import { fileURLToPath } from "node:url";
import { drizzle } from "drizzle-orm/postgres-js";
import { migrate } from "drizzle-orm/postgres-js/migrator";
import postgres from "postgres";
import { keyOpens, makeKeyCheck } from "~/platform/crypto/sealing.server";
import { migrateQueue } from "~/platform/jobs/queue-schema.server";
import { tenancy } from "./schema/tenancy";
import { platformSql, tenancySql } from "./schema/tenancy-sql";

const migrationsFolder = fileURLToPath(new URL("./migrations", import.meta.url));

/** @param urls owner and maintenance connections of one database */
export async function migrateDatabase(urls: { owner: string; maintenance: string }, masterKey: Buffer) {
  const owner = postgres(urls.owner, { max: 1, onnotice: () => {} });
  try {
    await migrate(drizzle(owner), { migrationsFolder });
    await owner.begin(async (tx) => {
      for (const statement of [...tenancy.flatMap(tenancySql), ...platformSql()]) await tx.unsafe(statement);
    });
  } finally {
    await owner.end();
  }
  await migrateQueue(urls.owner);
  await checkKey(urls.maintenance, masterKey);
}

/** Stores the key check with a new database; refuses a key that does not open an existing one. */
async function checkKey(maintenanceUrl: string, masterKey: Buffer) {
  const client = postgres(maintenanceUrl, { max: 1, onnotice: () => {} });
  try {
    await client`insert into installation.key_check (name, value) values ('master', ${makeKeyCheck(masterKey)})
      on conflict (name) do nothing`;
    const [row] = await client<
      { value: string }[]
    >`select value from installation.key_check where name = 'master'`;
    if (!row || !keyOpens(masterKey, row.value))
      throw new Error(
        "HALESIDE_MASTER_KEY does not open this database. Restore the key it was made with (it is kept beside the cluster and in your secret store), or begin again with `npm run reset`.",
      );
  } finally {
    await client.end();
  }
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const {
    DATABASE_OWNER_URL: owner,
    DATABASE_MAINTENANCE_URL: maintenance,
    HALESIDE_MASTER_KEY,
  } = process.env;
  if (!owner || !maintenance || !HALESIDE_MASTER_KEY) {
    console.error("Set DATABASE_OWNER_URL, DATABASE_MAINTENANCE_URL and HALESIDE_MASTER_KEY to migrate.");
    process.exit(1);
  }
  try {
    await migrateDatabase({ owner, maintenance }, Buffer.from(HALESIDE_MASTER_KEY, "base64"));
  } catch (error) {
    const cause = error instanceof Error && error.cause instanceof Error ? error.cause : error;
    console.error(`The migration failed: ${cause instanceof Error ? cause.message : String(cause)}`);
    process.exit(1);
  }
}
