import postgres from "postgres";
import { closeIdentity } from "~/features/accounts/identity.server";
import { stopQueue } from "~/platform/jobs/queue.server";
import { closeDatabase } from "~db/client.server";
import { atEnd } from "./closing";

/**
 * Connections that go round the application, for what a test plants or inspects. The application's own `read` and
 * `write` (~db/client.server) run in the same database as its restricted role.
 */

type Door = "DATABASE_URL" | "DATABASE_OWNER_URL" | "DATABASE_AUTH_URL" | "DATABASE_MAINTENANCE_URL";

const clients = new Map<Door, postgres.Sql>();

atEnd(async () => {
  await stopQueue();
  await closeIdentity();
  await closeDatabase();
});

/** A connection of one of the four roles to the file's database; closed at the end of the file. */
function clientOf(door: Door): postgres.Sql {
  const known = clients.get(door);
  if (known) return known;
  const url = process.env[door];
  if (!url) throw new Error(`${door} is not set: this test does not run in the server or browser project.`);
  const client = postgres(url, { max: 2, onnotice: () => {} });
  clients.set(door, client);
  atEnd(() => client.end({ timeout: 5 }));
  return client;
}

/** Sees and changes everything (BYPASSRLS). */
export const maintenance = () => clientOf("DATABASE_MAINTENANCE_URL");
/** Owns the tables; row-level security binds it too. */
export const owner = () => clientOf("DATABASE_OWNER_URL");
/** The identity tables. */
export const authDatabase = () => clientOf("DATABASE_AUTH_URL");
/** The application's role without a scope. */
export const application = () => clientOf("DATABASE_URL");
