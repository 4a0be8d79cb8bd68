import { and, asc, eq, isNull, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { guardians, guardianships } from "~db/schema";

const org = (tx: Tx) => tx.scope.organisationId;

/** Guardians of an athlete, whom to call first on top; legal limits stay sealed here. */
export function listGuardians(tx: Tx, athleteId: string) {
  return tx
    .select({
      id: guardians.id,
      name: guardians.name,
      email: guardians.email,
      phone: guardians.phone,
      language: guardians.language,
      wantsEmail: guardians.wantsEmail,
      emailStoppedAt: guardians.emailStoppedAt,
      guardianVersion: guardians.version,
      relation: guardianships.relation,
      mayBeTold: guardianships.mayBeTold,
      mayDecide: guardianships.mayDecide,
      phoneOrder: guardianships.phoneOrder,
      legalLimits: guardianships.legalLimits,
      limitsReviewOn: guardianships.limitsReviewOn,
      version: guardianships.version,
    })
    .from(guardianships)
    .innerJoin(
      guardians,
      and(
        eq(guardians.organisationId, guardianships.organisationId),
        eq(guardians.id, guardianships.guardianId),
      ),
    )
    .where(
      and(
        eq(guardianships.organisationId, org(tx)),
        eq(guardianships.athleteId, athleteId),
        isNull(guardianships.endedAt),
      ),
    )
    .orderBy(asc(guardianships.phoneOrder), asc(guardians.name));
}

export function insertGuardian(tx: Tx, row: Omit<typeof guardians.$inferInsert, "organisationId">) {
  return tx.insert(guardians).values({ organisationId: org(tx), ...row });
}

export function insertGuardianship(tx: Tx, row: Omit<typeof guardianships.$inferInsert, "organisationId">) {
  return tx.insert(guardianships).values({ organisationId: org(tx), ...row });
}

/** @returns false when the version is no longer the one that was seen */
export async function updateGuardian(
  tx: Tx,
  id: string,
  version: number,
  set: Partial<typeof guardians.$inferInsert>,
) {
  const rows = await tx
    .update(guardians)
    .set({ ...set, version: sql`${guardians.version} + 1` })
    .where(and(eq(guardians.organisationId, org(tx)), eq(guardians.id, id), eq(guardians.version, version)))
    .returning({ id: guardians.id });
  return rows.length === 1;
}

/** @returns false when the version is no longer the one that was seen */
export async function updateGuardianship(
  tx: Tx,
  athleteId: string,
  guardianId: string,
  version: number,
  set: Partial<typeof guardianships.$inferInsert>,
) {
  const rows = await tx
    .update(guardianships)
    .set({ ...set, version: sql`${guardianships.version} + 1` })
    .where(
      and(
        eq(guardianships.organisationId, org(tx)),
        eq(guardianships.athleteId, athleteId),
        eq(guardianships.guardianId, guardianId),
        eq(guardianships.version, version),
      ),
    )
    .returning({ id: guardianships.guardianId });
  return rows.length === 1;
}
