import { and, asc, desc, eq, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { organisations, seasons, teams, venues } from "~db/schema";

const org = (tx: Tx) => tx.scope.organisationId;

export function updateOrganisation(tx: Tx, version: number, set: Partial<typeof organisations.$inferInsert>) {
  return tx
    .update(organisations)
    .set({ ...set, version: sql`${organisations.version} + 1` })
    .where(and(eq(organisations.organisationId, org(tx)), eq(organisations.version, version)))
    .returning({ version: organisations.version });
}

export function listSeasons(tx: Tx) {
  return tx
    .select()
    .from(seasons)
    .where(eq(seasons.organisationId, org(tx)))
    .orderBy(desc(seasons.startsOn));
}

export function insertSeason(tx: Tx, row: Omit<typeof seasons.$inferInsert, "organisationId">) {
  return tx.insert(seasons).values({ organisationId: org(tx), ...row });
}

export function updateSeason(tx: Tx, id: string, set: { name: string; startsOn: string; endsOn: string }) {
  return tx
    .update(seasons)
    .set({ ...set, version: sql`${seasons.version} + 1` })
    .where(and(eq(seasons.organisationId, org(tx)), eq(seasons.id, id)))
    .returning({ id: seasons.id });
}

export function listAllTeams(tx: Tx) {
  return tx
    .select()
    .from(teams)
    .where(eq(teams.organisationId, org(tx)))
    .orderBy(asc(teams.name));
}

export function insertTeam(tx: Tx, row: Omit<typeof teams.$inferInsert, "organisationId">) {
  return tx.insert(teams).values({ organisationId: org(tx), ...row });
}

export function updateTeam(tx: Tx, id: string, set: Partial<typeof teams.$inferInsert>) {
  return tx
    .update(teams)
    .set({ ...set, version: sql`${teams.version} + 1` })
    .where(and(eq(teams.organisationId, org(tx)), eq(teams.id, id)))
    .returning({ id: teams.id });
}

export function listVenues(tx: Tx) {
  return tx
    .select()
    .from(venues)
    .where(eq(venues.organisationId, org(tx)))
    .orderBy(asc(venues.name));
}

export function insertVenue(tx: Tx, row: Omit<typeof venues.$inferInsert, "organisationId">) {
  return tx.insert(venues).values({ organisationId: org(tx), ...row });
}

export function updateVenue(tx: Tx, id: string, set: Partial<typeof venues.$inferInsert>) {
  return tx
    .update(venues)
    .set({ ...set, version: sql`${venues.version} + 1` })
    .where(and(eq(venues.organisationId, org(tx)), eq(venues.id, id)))
    .returning({ id: venues.id });
}
