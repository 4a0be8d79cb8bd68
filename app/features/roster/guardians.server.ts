import { randomUUID } from "node:crypto";
import type { z } from "zod";
import { audit } from "~/platform/audit.server";
import { sealer } from "~/platform/crypto/keys.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { once } from "~/platform/operations.server";
import { write } from "~db/client.server";
import { may, type Permission } from "../accounts/permissions";
import type { MemberScope } from "../accounts/scope.server";
import {
  insertGuardian,
  insertGuardianship,
  listGuardians,
  updateGuardian,
  updateGuardianship,
} from "./guardians.queries.server";
import type { guardianSchema } from "./roster.schema";
import { requireAthlete } from "./roster.server";

function need(scope: MemberScope, permission: Permission) {
  if (!may(scope.roles, permission)) throw forbidden();
}

/** Where the sealed legal limits of a guardianship belong. */
export const limitsPlace = (athleteId: string, guardianId: string, version: number) => ({
  table: "guardianships",
  column: "legal_limits",
  row: `${athleteId} ${guardianId}`,
  version,
});

/** The guardians with their legal limits in clear, for the roles that keep contacts. */
export function readGuardians(scope: MemberScope, athleteId: string) {
  need(scope, "roster.contacts");
  return write(scope, async (tx) => {
    const athlete = await requireAthlete(tx, athleteId);
    const { open } = await sealer(tx);
    const rows = await listGuardians(tx, athleteId);
    await audit(tx, { action: "guardians.read", subjectId: athleteId, athleteId });
    return {
      athlete: { id: athlete.id, name: `${athlete.givenName} ${athlete.familyName}` },
      guardians: rows.map(({ legalLimits, ...row }) => ({
        ...row,
        legalLimits: open(limitsPlace(athleteId, row.id, 1), legalLimits),
      })),
    };
  });
}

type GuardianInput = z.output<typeof guardianSchema>;

function splitGuardian(input: GuardianInput) {
  const { name, email, phone, language, wantsEmail } = input;
  const { relation, mayBeTold, mayDecide, phoneOrder, limitsReviewOn } = input;
  return {
    person: { name, email, phone, language, wantsEmail },
    bond: { relation, mayBeTold, mayDecide, phoneOrder, limitsReviewOn },
  };
}

/**
 * Adds a guardian, once per operation: whoever stands there twice is told twice.
 * @param operation the form's id
 */
export function addGuardian(
  scope: MemberScope,
  athleteId: string,
  input: GuardianInput,
  operation: string = randomUUID(),
): Promise<string> {
  need(scope, "roster.write");
  return write(scope, (tx) =>
    once(tx, operation, { guardian: input, athleteId }, async () => {
      await requireAthlete(tx, athleteId);
      const { seal } = await sealer(tx);
      const guardianId = randomUUID();
      const { person, bond } = splitGuardian(input);
      await insertGuardian(tx, { id: guardianId, ...person });
      const legalLimits = seal(limitsPlace(athleteId, guardianId, 1), input.legalLimits);
      await insertGuardianship(tx, { athleteId, guardianId, ...bond, legalLimits });
      await audit(tx, { action: "guardian.add", subjectId: guardianId, athleteId });
      return { id: guardianId };
    }),
  ).then(({ id }) => id);
}

/** What a form for editing a guardian was opened with: the versions of the contact and of the bond. */
export const guardianVersionOf = (row: { guardianVersion: number; version: number }) =>
  `${row.guardianVersion}.${row.version}`;

/**
 * Changes a guardian's contact and bond. A new address starts fresh: an earlier stop was of the old one.
 * @param seen the version the form was opened with: a page left open must not take back a limit entered since
 * @throws DomainError conflict when somebody else, or the guardian's own wish, changed it meanwhile
 */
export function editGuardian(
  scope: MemberScope,
  athleteId: string,
  guardianId: string,
  seen: string,
  input: GuardianInput,
) {
  need(scope, "roster.write");
  return write(scope, async (tx) => {
    await requireAthlete(tx, athleteId);
    const before = (await listGuardians(tx, athleteId)).find(({ id }) => id === guardianId);
    if (!before) throw notFound("That guardian");
    const { seal } = await sealer(tx);
    const { person, bond } = splitGuardian(input);
    const emailStoppedAt = person.email === before.email ? before.emailStoppedAt : null;
    const contact = { ...person, emailStoppedAt };
    const legalLimits = seal(limitsPlace(athleteId, guardianId, 1), input.legalLimits);
    const saved =
      seen === guardianVersionOf(before) &&
      (await updateGuardian(tx, guardianId, before.guardianVersion, contact)) &&
      (await updateGuardianship(tx, athleteId, guardianId, before.version, { ...bond, legalLimits }));
    if (!saved)
      throw new DomainError(
        "conflict",
        "This guardian was changed since you opened the page, perhaps by the guardian's own wish. What you typed is still here and nothing is saved: open the page anew, look at what stands there, and enter it again.",
      );
    await audit(tx, { action: "guardian.edit", subjectId: guardianId, athleteId });
  });
}

/** Ends the bond between an athlete and a guardian; what was sent stays on record. */
export function endGuardianship(scope: MemberScope, athleteId: string, guardianId: string) {
  need(scope, "roster.write");
  return write(scope, async (tx) => {
    await requireAthlete(tx, athleteId);
    const before = (await listGuardians(tx, athleteId)).find(({ id }) => id === guardianId);
    if (!before) throw notFound("That guardian");
    const ended = { endedAt: new Date() };
    if (!(await updateGuardianship(tx, athleteId, guardianId, before.version, ended)))
      throw new DomainError("conflict", "Somebody else changed this at the same moment. Try again.");
    await audit(tx, { action: "guardian.end", subjectId: guardianId, athleteId });
  });
}
