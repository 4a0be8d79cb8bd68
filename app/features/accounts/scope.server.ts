import { dayIn } from "~/platform/clock";
import { personScope, read, type Scope } from "~db/client.server";
import { type Role, roles } from "~db/schema/codes";
import { findOwnMembership, findOwnOrganisations } from "./membership.queries.server";
import { clinicalRoles } from "./permissions";

export type MemberScope = Scope & {
  personId: string;
  displayName: string;
  organisationName: string;
  /** Clinical roles that a lead has not confirmed yet: they count for nothing, and the page says so. */
  unconfirmed: readonly Role[];
};

const isRole = (text: string): text is Role => (roles as readonly string[]).includes(text);

/**
 * The scope of a person in an organisation, read anew for each request: a removed role is gone on the next one.
 * @returns undefined for a foreign organisation as for an absent one
 */
export async function resolveMemberScope(
  personId: string,
  slug: string,
  requestId?: string,
): Promise<MemberScope | undefined> {
  const found = await read(personScope(personId, requestId), (tx) => findOwnMembership(tx, personId, slug));
  if (!found) return undefined;
  const counts = ({ role, confirmedAt }: { role: string; confirmedAt: Date | null }) =>
    isRole(role) && (!clinicalRoles.includes(role) || confirmedAt !== null);
  const active = found.roles.filter(counts).map(({ role }) => role as Role);
  const waiting = found.roles.filter((row) => !counts(row)).map(({ role }) => role as Role);
  return {
    organisationId: found.organisationId,
    slug: found.slug,
    organisationName: found.name,
    timeZone: found.timeZone,
    today: dayIn(found.timeZone),
    personId,
    displayName: found.displayName,
    roles: active,
    unconfirmed: waiting,
    actors: active,
    teams: found.allTeams ? "all" : found.teamIds,
    ...(requestId ? { requestId } : {}),
  };
}

export function listOwnOrganisations(personId: string) {
  return read(personScope(personId), (tx) => findOwnOrganisations(tx, personId));
}
