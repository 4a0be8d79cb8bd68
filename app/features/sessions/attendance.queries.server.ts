import { and, asc, eq, gte, inArray, isNull, lte, or, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { actionAlerts, athletes, participations, rosterEntries } from "~db/schema";
import type { Presence } from "~db/schema/codes";

const org = (tx: Tx) => tx.scope.organisationId;

const person = { id: athletes.id, givenName: athletes.givenName, familyName: athletes.familyName };

/** The team's roster of a day, in the order of names. */
export function findRosterOfDay(tx: Tx, teamId: string, day: string) {
  return tx
    .selectDistinct({ ...person, visitor: athletes.visitor })
    .from(rosterEntries)
    .innerJoin(
      athletes,
      and(
        eq(athletes.organisationId, rosterEntries.organisationId),
        eq(athletes.id, rosterEntries.athleteId),
      ),
    )
    .where(
      and(
        eq(rosterEntries.organisationId, org(tx)),
        eq(rosterEntries.teamId, teamId),
        lte(rosterEntries.fromDay, day),
        or(isNull(rosterEntries.toDay), gte(rosterEntries.toDay, day)),
      ),
    )
    .orderBy(asc(athletes.givenName), asc(athletes.familyName));
}

export function findParticipations(tx: Tx, sessionId: string) {
  return tx
    .select({
      ...person,
      visitor: athletes.visitor,
      presence: sql<Presence>`${participations.presence}`,
      minutes: participations.minutes,
    })
    .from(participations)
    .innerJoin(
      athletes,
      and(
        eq(athletes.organisationId, participations.organisationId),
        eq(athletes.id, participations.athleteId),
      ),
    )
    .where(and(eq(participations.organisationId, org(tx)), eq(participations.sessionId, sessionId)))
    .orderBy(asc(athletes.givenName), asc(athletes.familyName));
}

/** What families let coaches see and act on, by athlete. */
export async function findActionAlerts(tx: Tx, athleteIds: readonly string[]) {
  if (athleteIds.length === 0) return [];
  return tx
    .select({ athleteId: actionAlerts.athleteId, text: actionAlerts.text })
    .from(actionAlerts)
    .where(
      and(
        eq(actionAlerts.organisationId, org(tx)),
        inArray(actionAlerts.athleteId, [...athleteIds]),
        isNull(actionAlerts.endedAt),
      ),
    )
    .orderBy(asc(actionAlerts.setAt));
}

/**
 * Athletes of the organisation by the start of a normalised name, for a visitor who trains with the team today.
 * Names only, so that a coach can find a player of another team without learning more about them.
 */
export function findAthletesByName(tx: Tx, nameKey: string, limit = 8) {
  return tx
    .select({ ...person, visitor: athletes.visitor })
    .from(athletes)
    .where(
      and(
        eq(athletes.organisationId, org(tx)),
        isNull(athletes.archivedAt),
        sql`position(${nameKey} in ${athletes.nameKey}) > 0`,
      ),
    )
    .orderBy(asc(athletes.givenName), asc(athletes.familyName))
    .limit(limit);
}

/** The ids among these that are athletes of the organisation. */
export async function findKnownAthletes(tx: Tx, athleteIds: readonly string[]) {
  if (athleteIds.length === 0) return [];
  const rows = await tx
    .select({ id: athletes.id })
    .from(athletes)
    .where(
      and(
        eq(athletes.organisationId, org(tx)),
        inArray(athletes.id, [...athleteIds]),
        isNull(athletes.archivedAt),
      ),
    );
  return rows.map(({ id }) => id);
}

export async function upsertParticipation(
  tx: Tx,
  row: { sessionId: string; athleteId: string; presence: Presence; minutes: number },
) {
  const entered = { recordedBy: tx.scope.personId, recordedAt: new Date() };
  await tx
    .insert(participations)
    .values({ organisationId: org(tx), ...row, ...entered })
    .onConflictDoUpdate({
      target: [participations.organisationId, participations.sessionId, participations.athleteId],
      set: {
        presence: row.presence,
        minutes: row.minutes,
        ...entered,
        version: sql`${participations.version} + 1`,
      },
    });
}

export async function deleteParticipation(tx: Tx, sessionId: string, athleteId: string) {
  await tx
    .delete(participations)
    .where(
      and(
        eq(participations.organisationId, org(tx)),
        eq(participations.sessionId, sessionId),
        eq(participations.athleteId, athleteId),
      ),
    );
}
