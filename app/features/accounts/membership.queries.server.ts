import { and, eq, isNull } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { membershipRoles, memberships, membershipTeams, organisations } from "~db/schema";

/** The organisations of the person of this transaction, current memberships only. */
export function findOwnOrganisations(tx: Tx, personId: string) {
  return tx
    .select({
      organisationId: organisations.organisationId,
      slug: organisations.slug,
      name: organisations.name,
      kind: organisations.kind,
    })
    .from(memberships)
    .innerJoin(organisations, eq(organisations.organisationId, memberships.organisationId))
    .where(and(eq(memberships.personId, personId), isNull(memberships.endedAt)))
    .orderBy(organisations.name);
}

/** The person's current membership of the organisation with this slug, with roles and teams. */
export async function findOwnMembership(tx: Tx, personId: string, slug: string) {
  const [row] = await tx
    .select({
      organisationId: organisations.organisationId,
      slug: organisations.slug,
      name: organisations.name,
      timeZone: organisations.timeZone,
      displayName: memberships.displayName,
      allTeams: memberships.allTeams,
    })
    .from(memberships)
    .innerJoin(organisations, eq(organisations.organisationId, memberships.organisationId))
    .where(
      and(eq(memberships.personId, personId), isNull(memberships.endedAt), eq(organisations.slug, slug)),
    );
  if (!row) return undefined;
  const { organisationId } = row;
  const roleRows = await tx
    .select({ role: membershipRoles.role, confirmedAt: membershipRoles.confirmedAt })
    .from(membershipRoles)
    .where(and(eq(membershipRoles.organisationId, organisationId), eq(membershipRoles.personId, personId)));
  const teamRows = await tx
    .select({ teamId: membershipTeams.teamId })
    .from(membershipTeams)
    .where(and(eq(membershipTeams.organisationId, organisationId), eq(membershipTeams.personId, personId)));
  return { ...row, roles: roleRows, teamIds: teamRows.map(({ teamId }) => teamId) };
}
