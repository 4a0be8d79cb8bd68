import { and, asc, eq, inArray, isNull, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { invitations, membershipRoles, memberships, membershipTeams, organisations, teams } from "~db/schema";
import type { Role } from "~db/schema/codes";

const org = (tx: Tx) => tx.scope.organisationId;

export async function findOrganisation(tx: Tx) {
  const [row] = await tx
    .select()
    .from(organisations)
    .where(eq(organisations.organisationId, org(tx)));
  return row;
}

export async function listMembers(tx: Tx) {
  const people = await tx
    .select({
      personId: memberships.personId,
      displayName: memberships.displayName,
      email: memberships.email,
      allTeams: memberships.allTeams,
      endedAt: memberships.endedAt,
      version: memberships.version,
    })
    .from(memberships)
    .where(eq(memberships.organisationId, org(tx)))
    .orderBy(asc(memberships.displayName));
  const roleRows = await tx
    .select()
    .from(membershipRoles)
    .where(eq(membershipRoles.organisationId, org(tx)));
  const teamRows = await tx
    .select({ personId: membershipTeams.personId, id: teams.id, name: teams.name })
    .from(membershipTeams)
    .innerJoin(
      teams,
      and(eq(teams.organisationId, membershipTeams.organisationId), eq(teams.id, membershipTeams.teamId)),
    )
    .where(eq(membershipTeams.organisationId, org(tx)))
    .orderBy(asc(teams.name));
  return people.map((person) => ({
    ...person,
    roles: roleRows.filter(({ personId }) => personId === person.personId),
    teams: teamRows.filter(({ personId }) => personId === person.personId),
  }));
}

/** Names of members by person id, ended ones included: an actor keeps their name. */
export async function findDisplayNames(tx: Tx, personIds: readonly (string | null)[]) {
  const ids = [...new Set(personIds.filter((id) => id !== null))];
  if (ids.length === 0) return new Map<string, string>();
  const rows = await tx
    .select({ personId: memberships.personId, displayName: memberships.displayName })
    .from(memberships)
    .where(and(eq(memberships.organisationId, org(tx)), inArray(memberships.personId, ids)));
  return new Map(rows.map(({ personId, displayName }) => [personId, displayName]));
}

export function listOpenInvitations(tx: Tx) {
  return tx
    .select()
    .from(invitations)
    .where(
      and(
        eq(invitations.organisationId, org(tx)),
        isNull(invitations.acceptedAt),
        isNull(invitations.revokedAt),
      ),
    )
    .orderBy(asc(invitations.createdAt));
}

export async function findInvitation(tx: Tx, id: string) {
  const [row] = await tx
    .select()
    .from(invitations)
    .where(and(eq(invitations.organisationId, org(tx)), eq(invitations.id, id)));
  return row;
}

export function insertInvitation(tx: Tx, row: Omit<typeof invitations.$inferInsert, "organisationId">) {
  return tx.insert(invitations).values({ organisationId: org(tx), ...row });
}

export function updateInvitation(
  tx: Tx,
  id: string,
  set: Partial<
    Pick<
      typeof invitations.$inferInsert,
      "confirmedBy" | "confirmedAt" | "acceptedBy" | "acceptedAt" | "revokedAt" | "tokenHash" | "expiresAt"
    >
  >,
) {
  return tx
    .update(invitations)
    .set(set)
    .where(and(eq(invitations.organisationId, org(tx)), eq(invitations.id, id)));
}

export function upsertMembership(
  tx: Tx,
  row: { personId: string; displayName: string; email: string; allTeams: boolean },
) {
  return tx
    .insert(memberships)
    .values({ organisationId: org(tx), ...row })
    .onConflictDoUpdate({
      target: [memberships.organisationId, memberships.personId],
      set: {
        allTeams: sql`${memberships.allTeams} or excluded.all_teams`,
        endedAt: null,
        version: sql`${memberships.version} + 1`,
      },
    });
}

export function insertRole(
  tx: Tx,
  row: {
    personId: string;
    role: Role;
    grantedBy: string | null;
    confirmedBy: string | null;
    confirmedAt: Date | null;
  },
) {
  return tx
    .insert(membershipRoles)
    .values({ organisationId: org(tx), ...row })
    .onConflictDoNothing();
}

export function insertMembershipTeams(tx: Tx, personId: string, teamIds: readonly string[]) {
  if (teamIds.length === 0) return Promise.resolve();
  return tx
    .insert(membershipTeams)
    .values(teamIds.map((teamId) => ({ organisationId: org(tx), personId, teamId })))
    .onConflictDoNothing()
    .then(() => undefined);
}

export async function replaceTeams(tx: Tx, personId: string, allTeams: boolean, teamIds: readonly string[]) {
  await tx
    .update(memberships)
    .set({ allTeams, version: sql`${memberships.version} + 1` })
    .where(and(eq(memberships.organisationId, org(tx)), eq(memberships.personId, personId)));
  await tx
    .delete(membershipTeams)
    .where(and(eq(membershipTeams.organisationId, org(tx)), eq(membershipTeams.personId, personId)));
  if (!allTeams) await insertMembershipTeams(tx, personId, teamIds);
}

export function deleteRole(tx: Tx, personId: string, role: Role) {
  return tx
    .delete(membershipRoles)
    .where(
      and(
        eq(membershipRoles.organisationId, org(tx)),
        eq(membershipRoles.personId, personId),
        eq(membershipRoles.role, role),
      ),
    );
}

export function confirmRoles(tx: Tx, personId: string, confirmedBy: string) {
  return tx
    .update(membershipRoles)
    .set({ confirmedBy, confirmedAt: new Date() })
    .where(
      and(
        eq(membershipRoles.organisationId, org(tx)),
        eq(membershipRoles.personId, personId),
        isNull(membershipRoles.confirmedAt),
      ),
    );
}

/** Ends a membership with its roles and teams, so that a later invitation gives what it says and nothing of before. */
export async function endMembership(tx: Tx, personId: string) {
  await tx
    .delete(membershipRoles)
    .where(and(eq(membershipRoles.organisationId, org(tx)), eq(membershipRoles.personId, personId)));
  await replaceTeams(tx, personId, false, []);
  await tx
    .update(memberships)
    .set({ endedAt: new Date(), version: sql`${memberships.version} + 1` })
    .where(and(eq(memberships.organisationId, org(tx)), eq(memberships.personId, personId)));
}
