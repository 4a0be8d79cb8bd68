import { randomUUID } from "node:crypto";
import { foundOrganisation } from "~/features/accounts/founding.server";
import { acceptInvitation, createInvitedPerson } from "~/features/accounts/invitations.server";
import { clinicalRoles } from "~/features/accounts/permissions";
import { type MemberScope, resolveMemberScope } from "~/features/accounts/scope.server";
import { expiryInDays, hashToken, linkToken } from "~/features/accounts/tokens.server";
import { masterKey } from "~/platform/crypto/keys.server";
import type { Role } from "~db/schema/codes";
import { maintenance } from "./database";

export type TestOrganisation = { id: string; slug: string; name: string; timeZone: string };
export type TestPerson = { id: string; email: string; name: string; password: string };

let count = 0;
const next = () => {
  count += 1;
  return count;
};

/** An organisation with its key and defaults, by the operator's own write. */
export async function makeOrganisation(
  given: Partial<Omit<TestOrganisation, "id">> & { kind?: "club" | "school"; phone?: string } = {},
): Promise<TestOrganisation> {
  const number = next();
  const slug = given.slug ?? `club-${number}`;
  const name = given.name ?? `Club ${number}`;
  const timeZone = given.timeZone ?? "Europe/London";
  const founding = {
    slug,
    name,
    timeZone,
    kind: given.kind ?? "club",
    phone: given.phone ?? "+44 1632 960100",
  };
  const id = await maintenance().begin((sql) => foundOrganisation(sql, masterKey(), founding));
  return { id, slug, name, timeZone };
}

const password = "four unrelated test words";

/** An account that belongs to no organisation. */
export async function makeAccount(given: { email?: string; name?: string } = {}): Promise<TestPerson> {
  const number = next();
  const email = given.email ?? `person-${number}@example.org`;
  const made = await createInvitedPerson(email, { name: given.name ?? `Person ${number}`, password });
  return { ...made, password };
}

type Membership = {
  roles: readonly Role[];
  /** Left out: all teams. */
  teams?: readonly string[];
  /** Left out: clinical roles are confirmed. */
  confirmed?: boolean;
};

/**
 * A person with an account and a membership, who has accepted an invitation of the operator's. Sign-in works with
 * `person.email` and `person.password`.
 */
export async function makePerson(
  organisation: TestOrganisation,
  { email, name, ...membership }: Membership & { email?: string; name?: string },
): Promise<TestPerson> {
  const person = await makeAccount({ ...(email ? { email } : {}), ...(name ? { name } : {}) });
  await join(person, organisation, membership);
  return person;
}

/** Makes a person a member of one more organisation, through an invitation that they accept. */
export async function join(person: TestPerson, organisation: TestOrganisation, membership: Membership) {
  const link = await makeInvitation(organisation, { email: person.email, ...membership });
  // An address of documentation (RFC 5737) of its own, so that no limit of attempts is met.
  await acceptInvitation(organisation.id, link.part, person, `203.0.113.${next()}`);
}

/** An open invitation, as the operator writes it; `part` is the link's last path part. */
export async function makeInvitation(
  organisation: TestOrganisation,
  {
    email,
    roles,
    teams,
    confirmed = true,
    expiresAt = expiryInDays(7),
  }: Membership & { email: string; expiresAt?: Date },
) {
  const id = randomUUID();
  const confirmedAt = confirmed && roles.some((role) => clinicalRoles.includes(role)) ? new Date() : null;
  const token = linkToken("invitation", id, expiresAt);
  await maintenance()`insert into invitations
    (organisation_id, id, email, name, roles, all_teams, team_ids, token_hash, expires_at, confirmed_at)
    values (${organisation.id}, ${id}, ${email}, 'Invited', ${[...roles]}, ${teams === undefined},
      ${[...(teams ?? [])]}, ${hashToken(token)}, ${expiresAt}, ${confirmedAt})`;
  return { id, token, part: `${id}.${token}`, path: `/invitations/${organisation.id}/${id}.${token}` };
}

/** The scope that the middleware would make for this person now. */
export async function memberScope(
  person: { id: string },
  organisation: TestOrganisation,
): Promise<MemberScope> {
  const scope = await resolveMemberScope(person.id, organisation.slug);
  if (!scope) throw new Error(`The person is no member of ${organisation.slug}.`);
  return scope;
}
