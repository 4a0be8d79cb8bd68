import { randomBytes } from "node:crypto";
import postgres from "postgres";
import { afterAll, inject } from "vitest";
import { runClosers } from "./closing";
import { inDatabase, makeDatabase } from "./cluster";
import { findPort } from "./ports";

/**
 * Before each test file: a fresh copy of the template, and the environment that names it, set before any module of the
 * application is loaded. A file may therefore count on an empty database and need not clean up.
 */

const cluster = inject("cluster");
const database = `${cluster.prefix}${randomBytes(4).toString("hex")}`;
const superuser = postgres(cluster.superuser, { max: 1, onnotice: () => {} });
await makeDatabase(superuser, database, cluster.template);

for (const [name, value] of Object.entries(cluster.environment)) {
  if (name === "MAIL_FAKE_PORT" || name === "TEST_SUPERUSER_URL") continue;
  process.env[name] =
    name.startsWith("DATABASE_") && name.endsWith("URL") ? inDatabase(value, database) : value;
}
Object.assign(process.env, {
  NODE_ENV: "production",
  APP_ORIGIN: "http://localhost:3000",
  TRUSTED_PROXIES: "",
  LOG_LEVEL: "silent",
  // Where the worker's own mail service listens once a test asks for its mailbox.
  RESEND_BASE_URL: `http://127.0.0.1:${await findPort()}`,
});
delete process.env.MAIL_FAKE_PORT;

afterAll(async () => {
  await runClosers();
  await superuser.unsafe(`drop database if exists ${database} with (force)`);
  await superuser.end();
});
