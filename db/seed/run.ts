/**
 * The demo of the local cluster: two invented organisations with three seasons of records.
 *
 *   npm run seed                 loads what is not there yet; loading again changes nothing
 *   npm run seed -- --people     whom one may sign in as, as JSON
 *
 * Runs only with HALESIDE_LOCAL=1, which the launcher sets for its own cluster: everybody of the demo has a password
 * that stands in the source.
 */
import { parseArgs } from "node:util";
import postgres from "postgres";
import { listDemoPeople } from "./load/demo-people";
import { listMissing } from "./load/state";
import { buildScenario } from "./scenario";

function refuse(message: string): never {
  console.error(message);
  process.exit(1);
}

/** Every start asks; so the application's modules are loaded only when there is something to do. */
async function isThere(maintenanceUrl: string) {
  const client = postgres(maintenanceUrl, { max: 1, onnotice: () => {} });
  try {
    return (await listMissing(client)).length === 0;
  } finally {
    await client.end();
  }
}

async function load(maintenanceUrl: string) {
  const { loadDemo } = await import("./load");
  const { closeIdentity } = await import("~/features/accounts/identity.server");
  const { closeDatabase } = await import("~db/client.server");
  try {
    await loadDemo({ maintenanceUrl, onStep: (line) => console.log(line) });
  } finally {
    await closeIdentity();
    await closeDatabase();
  }
}

const { values } = parseArgs({ options: { people: { type: "boolean", default: false } } });

if (process.env.HALESIDE_LOCAL !== "1")
  refuse(
    "Demo people exist only in our own cluster. Run `npm start`, or found an organisation with `npm run operator`.",
  );

if (values.people) {
  console.log(JSON.stringify(listDemoPeople(buildScenario()), null, 2));
} else {
  const maintenanceUrl =
    process.env.DATABASE_MAINTENANCE_URL ?? refuse("DATABASE_MAINTENANCE_URL is missing.");
  try {
    if (!(await isThere(maintenanceUrl))) await load(maintenanceUrl);
  } catch (error) {
    const cause = error instanceof Error && error.cause instanceof Error ? error.cause : error;
    console.error(`The demo was not loaded: ${cause instanceof Error ? cause.message : String(cause)}`);
    process.exitCode = 1;
  }
}
