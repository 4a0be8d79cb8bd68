import { count, sql } from "drizzle-orm";
import postgres from "postgres";
import { resolveMemberScope } from "~/features/accounts/scope.server";
import { rollUpMarked } from "~/features/rates/rollups/rollups.server";
import { audit } from "~/platform/audit.server";
import { type Tx, write } from "~db/client.server";
import { athletes, seasons } from "~db/schema";
import { buildScenario } from "../scenario";
import type { Role, Scenario } from "../scenario/types";
import { loadAvailability } from "./availability";
import { foundDemoOrganisation } from "./founding";
import { loadInjuries } from "./injuries";
import { find, type Loading, type OwnScenario, openLoading, scenarioOf } from "./loading";
import { loadNotices } from "./notices";
import { ensurePeople } from "./people";
import { loadPlans } from "./plans";
import { loadReports } from "./reports";
import { loadRoster } from "./roster";
import { loadSessions } from "./sessions";
import { loadSettings } from "./settings";
import { listMissing } from "./state";
import { loadWarmUps } from "./warm-ups";

/**
 * Loads the demo's organisations that are not there yet. An organisation comes in three transactions, each of which
 * happens whole or not at all and is passed over when it has happened: founded with its members (maintenance role),
 * settings (as its administrator), records (as its medical lead). So a load that was broken off goes on where it
 * stopped, and nothing is ever removed. An organisation of somebody's own under the same address is left alone.
 * @returns the addresses of the organisations that were loaded now
 */
export async function loadDemo({
  maintenanceUrl,
  today,
  onStep = () => {},
}: {
  maintenanceUrl: string;
  /** ISO day; left out: today. */
  today?: string;
  onStep?: (line: string) => void;
}): Promise<string[]> {
  const client = postgres(maintenanceUrl, { max: 1, onnotice: () => {} });
  try {
    const missing = await listMissing(client);
    if (missing.length === 0) return [];
    const scenario: Scenario = buildScenario(today === undefined ? {} : { today });
    const people = await ensurePeople(scenario.people);
    for (const { slug, founded } of missing) {
      const own = scenarioOf(scenario, slug);
      onStep(`${own.organisation.name}: ${own.athletes.length} athletes, ${own.sessions.length} sessions`);
      if (!founded) await foundDemoOrganisation(client, own, people);
      await writeAs("admin", own, people, seasons, loadSettings);
      await writeAs("lead", own, people, athletes, loadRecords);
    }
    await rollUpMarked();
    return missing.map(({ slug }) => slug);
  } finally {
    await client.end();
  }
}

async function loadRecords(loading: Loading) {
  await loadRoster(loading);
  await loadSessions(loading);
  await loadWarmUps(loading);
  await loadPlans(loading);
  await loadInjuries(loading);
  await loadReports(loading);
  await loadAvailability(loading);
  await loadNotices(loading);
}

/** One transaction in the scope of the member who holds a role; passed over when the table has rows already. */
async function writeAs(
  role: Role,
  own: OwnScenario,
  people: ReadonlyMap<string, string>,
  done: typeof seasons | typeof athletes,
  load: (loading: Loading) => Promise<void>,
) {
  const { key: slug } = own.organisation;
  const member = own.memberships.find((each) => each.role === role)?.person ?? "";
  const scope = await resolveMemberScope(find(people, member), slug);
  if (!scope) throw new Error(`The demo's ${role} is no member of ${slug}.`);
  await write(scope, async (tx: Tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`demo ${slug}`}, 0))`);
    const [row] = await tx.select({ rows: count() }).from(done);
    if ((row?.rows ?? 0) > 0) return;
    await load(await openLoading(tx, own, people));
    await audit(tx, { action: "demo.load", fields: { today: own.today, as: role } });
  });
}
