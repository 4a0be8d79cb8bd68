import postgres from "postgres";
import { openCluster } from "../../db/local-server/cluster.mjs";
import { databaseStatements } from "../../db/local-server/roles.mjs";
import { testEnvironment } from "../../db/local-server/test-cluster.mjs";
import { migrateDatabase } from "../../db/migrate";
import { inDatabase, makeDatabase } from "../harness/cluster";

/** A database of the bench's own in the test cluster, with the application's environment pointing at it. */

export type Bench = {
  /** Superuser, triggers off: for building at the speed of a COPY. */
  superuser: postgres.Sql;
  close: () => Promise<void>;
};

export async function openBench(): Promise<Bench> {
  const cluster = await testEnvironment(await openCluster({ name: "test", lasting: false, keep: true }));
  // The process id lets the next run of the tests drop what a killed bench left behind.
  const name = `t${process.pid}_bench`;
  const address = cluster.TEST_SUPERUSER_URL ?? "";
  const server = postgres(address, { max: 1, onnotice: () => {} });
  await makeDatabase(server, name, "template0");
  const superuser = postgres(inDatabase(address, name), {
    max: 1,
    onnotice: () => {},
    connection: {
      session_replication_role: "replica",
      synchronous_commit: "off",
      maintenance_work_mem: "256MB",
    },
  });
  const close = async () => {
    await superuser.end({ timeout: 5 });
    await server.unsafe(`drop database if exists ${name} with (force)`);
    await server.end({ timeout: 5 });
  };
  try {
    for (const statement of databaseStatements()) await superuser.unsafe(statement);
    for (const [key, value] of Object.entries(cluster))
      process.env[key] = key.startsWith("DATABASE_") && key.endsWith("URL") ? inDatabase(value, name) : value;
    delete process.env.MAIL_FAKE_PORT;
    Object.assign(process.env, {
      NODE_ENV: "production",
      APP_ORIGIN: "http://localhost:3000",
      LOG_LEVEL: "silent",
    });
    await migrateDatabase(
      {
        owner: process.env.DATABASE_OWNER_URL ?? "",
        maintenance: process.env.DATABASE_MAINTENANCE_URL ?? "",
      },
      Buffer.from(process.env.HALESIDE_MASTER_KEY ?? "", "base64"),
    );
    return { superuser, close };
  } catch (error) {
    await close();
    throw error;
  }
}
