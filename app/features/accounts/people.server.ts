import { randomUUID } from "node:crypto";
import type { z } from "zod";
import { audit } from "~/platform/audit.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { read, write } from "~db/client.server";
import type { Role } from "~db/schema/codes";
import { queueDelivery } from "../outbox/outbox.server";
import type { changeTeamsSchema, inviteSchema } from "./accounts.schema";
import {
  confirmRoles,
  deleteRole,
  endMembership,
  findInvitation,
  insertInvitation,
  insertRole,
  listMembers,
  listOpenInvitations,
  replaceTeams,
  updateInvitation,
} from "./people.queries.server";
import { clinicalRoles, may, type Permission } from "./permissions";
import type { MemberScope } from "./scope.server";
import { expiryInDays, hashToken, linkToken } from "./tokens.server";
import { findOwnTeams } from "./viewing.server";

export const invitationDays = 7;

function need(scope: MemberScope, permission: Permission) {
  if (!may(scope.roles, permission)) throw forbidden();
}

/** Members and open invitations, for the administrator and the lead. */
export function listPeople(scope: MemberScope) {
  need(scope, "people.read");
  return read(scope, async (tx) => ({
    members: await listMembers(tx),
    invitations: (await listOpenInvitations(tx)).map(({ tokenHash: _hash, ...shown }) => shown),
    teams: await findOwnTeams(tx, { ...scope, teams: "all" }),
  }));
}

/**
 * Invites a person by e-mail. Clinical roles wait for a lead's confirmation, before or after acceptance.
 * The mail goes through the outbox, in this transaction.
 */
export function invite(scope: MemberScope, input: z.output<typeof inviteSchema>) {
  need(scope, "people.manage");
  return write(scope, async (tx) => {
    const members = await listMembers(tx);
    const email = input.email;
    if (members.some((member) => member.email === email && !member.endedAt))
      throw new DomainError("conflict", "", {
        fields: { email: ["This person is a member already. Change their roles or teams below."] },
      });
    const own = await findOwnTeams(tx, { ...scope, teams: "all" });
    const teamIds = input.reach === "all" ? [] : input.teams;
    if (teamIds.some((id) => !own.some((team) => team.id === id))) throw notFound("That team");
    const id = randomUUID();
    const expiresAt = expiryInDays(invitationDays);
    await insertInvitation(tx, {
      id,
      email,
      name: input.name,
      roles: input.roles,
      allTeams: input.reach === "all",
      teamIds,
      tokenHash: hashToken(linkToken("invitation", id, expiresAt)),
      invitedBy: scope.personId,
      expiresAt,
    });
    await queueDelivery(tx, { template: "invitation", invitationId: id });
    await audit(tx, { action: "invitation.send", subjectId: id, fields: { roles: input.roles } });
    return { id };
  });
}

/** Sends an invitation again with a fresh link; the earlier one stops working. */
export function resendInvitation(scope: MemberScope, id: string) {
  need(scope, "people.manage");
  return write(scope, async (tx) => {
    const invitation = await findInvitation(tx, id);
    if (!invitation || invitation.acceptedAt || invitation.revokedAt) throw notFound("That invitation");
    const expiresAt = expiryInDays(invitationDays);
    await updateInvitation(tx, id, {
      expiresAt,
      tokenHash: hashToken(linkToken("invitation", id, expiresAt)),
    });
    await queueDelivery(tx, { template: "invitation", invitationId: id });
    await audit(tx, { action: "invitation.send", subjectId: id });
  });
}

export function revokeInvitation(scope: MemberScope, id: string) {
  need(scope, "people.manage");
  return write(scope, async (tx) => {
    if (!(await findInvitation(tx, id))) throw notFound("That invitation");
    await updateInvitation(tx, id, { revokedAt: new Date() });
    await audit(tx, { action: "invitation.revoke", subjectId: id });
  });
}

/** A lead confirms the clinical roles of an invitation that has not been accepted yet. */
export function confirmInvitation(scope: MemberScope, id: string) {
  need(scope, "people.confirm");
  return write(scope, async (tx) => {
    const invitation = await findInvitation(tx, id);
    if (!invitation || invitation.acceptedAt || invitation.revokedAt) throw notFound("That invitation");
    await updateInvitation(tx, id, { confirmedBy: scope.personId, confirmedAt: new Date() });
    await audit(tx, { action: "invitation.confirm", subjectId: id });
  });
}

/** A lead confirms a member's waiting clinical roles. Nobody confirms their own. */
export function confirmMember(scope: MemberScope, personId: string) {
  need(scope, "people.confirm");
  if (personId === scope.personId) throw forbidden();
  return write(scope, async (tx) => {
    requireMember(await listMembers(tx), personId);
    await confirmRoles(tx, personId, scope.personId);
    await audit(tx, { action: "role.confirm", subjectId: personId });
  });
}

export function changeTeams(scope: MemberScope, personId: string, input: z.output<typeof changeTeamsSchema>) {
  need(scope, "people.manage");
  return write(scope, async (tx) => {
    requireMember(await listMembers(tx), personId);
    const known = await findOwnTeams(tx, { ...scope, teams: "all" });
    if (input.teams.some((id) => !known.some((team) => team.id === id))) throw notFound("That team");
    await replaceTeams(tx, personId, input.reach === "all", input.teams);
    await audit(tx, { action: "membership.teams", subjectId: personId, fields: { reach: input.reach } });
  });
}

/** Grants one more role; a clinical one waits for a lead. */
export function grantRole(scope: MemberScope, personId: string, role: Role) {
  need(scope, "people.manage");
  return write(scope, async (tx) => {
    requireMember(await listMembers(tx), personId);
    await insertRole(tx, {
      personId,
      role,
      grantedBy: scope.personId,
      confirmedBy: null,
      confirmedAt: null,
    });
    await audit(tx, { action: "role.grant", subjectId: personId, fields: { role } });
  });
}

/** Takes a role away; it is gone on the person's next request. The last administrator and the last lead stay. */
export function removeRole(scope: MemberScope, personId: string, role: Role) {
  need(scope, "people.manage");
  return write(scope, async (tx) => {
    const members = await listMembers(tx);
    requireMember(members, personId);
    refuseLast(members, personId, [role]);
    await deleteRole(tx, personId, role);
    await audit(tx, { action: "role.remove", subjectId: personId, fields: { role } });
  });
}

/** Ends a membership. What the person did stays theirs. */
export function endMember(scope: MemberScope, personId: string) {
  need(scope, "people.manage");
  return write(scope, async (tx) => {
    const members = await listMembers(tx);
    requireMember(members, personId);
    refuseLast(members, personId, ["admin", "lead"]);
    await endMembership(tx, personId);
    await audit(tx, { action: "membership.end", subjectId: personId });
  });
}

type Members = Awaited<ReturnType<typeof listMembers>>;

function requireMember(members: Members, personId: string) {
  if (!members.some((row) => row.personId === personId && !row.endedAt)) throw notFound("That person");
}

function refuseLast(members: Members, personId: string, removed: readonly Role[]) {
  for (const role of removed.filter((name) => name === "admin" || name === "lead")) {
    const holders = members.filter(
      (member) =>
        !member.endedAt &&
        member.roles.some((row) => row.role === role && (!clinicalRoles.includes(role) || row.confirmedAt)),
    );
    if (holders.length === 1 && holders[0]?.personId === personId)
      throw new DomainError(
        "conflict",
        role === "admin"
          ? "This is the last administrator. Make somebody else administrator first."
          : "This is the last medical lead. Have another lead confirmed first.",
      );
  }
}

/** Names of members by person id, ended ones included: an actor keeps their name. */
export { findDisplayNames } from "./people.queries.server";
