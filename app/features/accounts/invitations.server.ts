import { audit } from "~/platform/audit.server";
import { env } from "~/platform/env.server";
import { DomainError, notFound } from "~/platform/errors";
import type { ComposedMail } from "~/platform/mail/email-layout";
import { type Scope, type Tx, write } from "~db/client.server";
import type { Role } from "~db/schema/codes";
import { countAttempt } from "./attempts.server";
import { openDoor } from "./doors.server";
import { composeInvitation } from "./emails/invitation-email";
import { identity, type Person, passwordLength } from "./identity.server";
import { passwordProblem } from "./passwords.server";
import {
  findDisplayNames,
  findInvitation,
  findOrganisation,
  insertMembershipTeams,
  insertRole,
  updateInvitation,
  upsertMembership,
} from "./people.queries.server";
import { clinicalRoles } from "./permissions";
import { hashToken, linkToken } from "./tokens.server";
import { findOwnTeams } from "./viewing.server";

/** The address of an invitation: its id and token travel as one path part. */
export function invitationPath(organisationId: string, id: string, expiresAt: Date) {
  return `/invitations/${organisationId}/${id}.${linkToken("invitation", id, expiresAt)}`;
}

const spent = () =>
  new DomainError(
    "gone",
    "This invitation has been used, withdrawn or has expired. Ask the person who invited you to send it again.",
  );

/** Opens an invitation by its link. @throws DomainError gone or not_found; the answer never tells which part was wrong */
export async function readInvitation(organisationId: string, part: string, clientAddress: string) {
  await countAttempt("invitation", { clientAddress });
  const [id = "", token = ""] = part.split(".");
  if (!/^[0-9a-f-]{36}$/.test(id) || !/^[0-9a-f-]{36}$/.test(organisationId))
    throw notFound("This invitation");
  const scope = await openDoor("invitee", organisationId, { doorId: id });
  return write(scope, async (tx) => {
    const invitation = await findInvitation(tx, id);
    if (!invitation || invitation.tokenHash !== hashToken(token)) throw notFound("This invitation");
    if (invitation.acceptedAt || invitation.revokedAt || invitation.expiresAt < new Date()) throw spent();
    const organisation = await findOrganisation(tx);
    const teams = await findOwnTeams(tx, { ...scope, teams: "all" });
    return {
      id,
      email: invitation.email,
      name: invitation.name,
      roles: invitation.roles as Role[],
      needsConfirmation:
        !invitation.confirmedAt && invitation.roles.some((role) => clinicalRoles.includes(role as Role)),
      organisation: organisation?.name ?? "",
      slug: organisation?.slug ?? "",
      teams: invitation.allTeams
        ? ("all" as const)
        : teams.filter((team) => invitation.teamIds.includes(team.id)).map((team) => team.name),
    };
  });
}

/** Whether somebody signs in with this address already: they accept with their own password. */
export async function hasAccount(email: string) {
  const context = await identity().auth.$context;
  return (await context.internalAdapter.findUserByEmail(email)) !== null;
}

/**
 * Makes the account of an invited person. The link came by mail to this very address, so its possession verifies it.
 * No organisation's transaction is open: hashing takes its time.
 */
export async function createInvitedPerson(email: string, input: { name: string; password: string }) {
  const problem = passwordProblem(input.password, { email, name: input.name }, passwordLength);
  if (problem) throw new DomainError("invalid", problem, { fields: { password: [problem] } });
  if (await hasAccount(email))
    throw new DomainError("conflict", "There is an account with this address already. Sign in to accept.");
  const context = await identity().auth.$context;
  const user = await context.internalAdapter.createUser(
    { email, name: input.name, emailVerified: true },
    { method: "admin" },
  );
  await context.internalAdapter.linkAccount({
    userId: user.id,
    providerId: "credential",
    accountId: user.id,
    password: await context.password.hash(input.password),
  });
  return { id: user.id, email: user.email, name: user.name };
}

/** Accepts an invitation for the signed-in or newly made person, whose address must be the invited one. */
export async function acceptInvitation(
  organisationId: string,
  part: string,
  person: Pick<Person, "id" | "email" | "name">,
  clientAddress: string,
) {
  const { id, email } = await readInvitation(organisationId, part, clientAddress);
  if (person.email.toLowerCase() !== email)
    throw new DomainError(
      "forbidden",
      `This invitation is for another address. Sign in as ${email} to accept it.`,
    );
  const scope = await openDoor("invitee", organisationId, { doorId: id, personId: person.id });
  await write(scope, async (tx) => {
    const invitation = await findInvitation(tx, id);
    if (!invitation || invitation.acceptedAt || invitation.revokedAt) throw spent();
    await upsertMembership(tx, {
      personId: person.id,
      displayName: person.name,
      email,
      allTeams: invitation.allTeams,
    });
    for (const role of invitation.roles as Role[]) {
      const confirmed = clinicalRoles.includes(role) ? invitation.confirmedAt : null;
      await insertRole(tx, {
        personId: person.id,
        role,
        grantedBy: invitation.invitedBy,
        confirmedBy: confirmed ? invitation.confirmedBy : null,
        confirmedAt: confirmed,
      });
    }
    await insertMembershipTeams(tx, person.id, invitation.teamIds);
    await updateInvitation(tx, id, { acceptedBy: person.id, acceptedAt: new Date() });
    await audit(tx, { action: "invitation.accept", subjectId: id });
  });
  return scope.slug;
}

/** The mail of an invitation, composed by the outbox when it is sent; undefined when there is nothing left to say. */
export async function composeInvitationDelivery(
  tx: Tx,
  scope: Scope,
  invitationId: string,
): Promise<{ to: string; mail: ComposedMail } | undefined> {
  const invitation = await findInvitation(tx, invitationId);
  if (!invitation || invitation.acceptedAt || invitation.revokedAt || invitation.expiresAt < new Date())
    return undefined;
  const organisation = await findOrganisation(tx);
  const names = await findDisplayNames(tx, [invitation.invitedBy]);
  const teams = await findOwnTeams(tx, { ...scope, teams: "all" });
  const mail = await composeInvitation({
    language: "en",
    inviter: names.get(invitation.invitedBy ?? "") ?? organisation?.name ?? "Haleside",
    organisation: organisation?.name ?? "",
    email: invitation.email,
    roles: invitation.roles as Role[],
    teams: invitation.allTeams
      ? "all"
      : teams.filter((team) => invitation.teamIds.includes(team.id)).map((team) => team.name),
    linkUrl: env().APP_ORIGIN + invitationPath(scope.organisationId, invitation.id, invitation.expiresAt),
    expiresAt: invitation.expiresAt,
    timeZone: scope.timeZone,
  });
  return { to: invitation.email, mail };
}
