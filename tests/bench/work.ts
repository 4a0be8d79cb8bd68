import { sql } from "drizzle-orm";
import { drizzle } from "drizzle-orm/postgres-js";
import postgres from "postgres";
import { sumExposureCells, sumExposureCellsLive } from "~/features/rates/rollups/exposure.queries.server";
import {
  countInjuriesLive,
  countInjuriesRolled,
} from "~/features/rates/rollups/rollups-injuries.queries.server";
import { countSeasons } from "~/features/rates/view.server";
import type { Scope, Tx } from "~db/client.server";
import * as schema from "~db/schema";

/** What is timed: the queries of the rates page, as they stand in the application. */

export type Range = { from: string; to: string; teamIds: null };

export type Season = { id: string; name: string; startsOn: string; endsOn: string };

/** What every page of rates begins with: the counts of one season, or of all of them. */
export const dashboard = (tx: Tx, seasons: readonly Season[]) => countSeasons(tx, seasons, null);

export const rolled = async (tx: Tx, range: Range) => ({
  cells: await sumExposureCells(tx, range),
  injuries: await countInjuriesRolled(tx, range),
});
export const live = async (tx: Tx, range: Range) => ({
  cells: await sumExposureCellsLive(tx, range),
  injuries: await countInjuriesLive(tx, range),
});

/** One count over an index that holds all it needs. */
export const countParticipations = (tx: Tx) =>
  tx.execute(
    sql`select count(*) from participations where organisation_id = ${tx.scope.organisationId}::uuid`,
  );

/**
 * A connection of one role that stays open, with the scope set as the application sets it. Both roles of a comparison
 * get one, so that nothing but row-level security differs.
 */
export async function connect(url: string, scope: Scope) {
  const client = postgres(url, {
    max: 1,
    onnotice: () => {},
    connection: { jit: "off", max_parallel_workers_per_gather: 0 },
  });
  await client`select set_config('app.organisation_id', ${scope.organisationId}, false),
    set_config('app.person_id', '', false), set_config('app.actors', ${scope.actors.join(",")}, false)`;
  const tx = Object.assign(drizzle(client, { schema }), { scope }) as unknown as Tx;
  const [row] = await client<{ pid: number }[]>`select pg_backend_pid() as pid`;
  return { tx, pid: row?.pid ?? 0, close: () => client.end({ timeout: 5 }) };
}
