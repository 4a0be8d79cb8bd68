import { and, eq } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { injuries, injuryDiagnoses, injuryNotes, injuryRevisions } from "~db/schema";
import type { Revision } from "./injuries.queries.server";

const org = (tx: Tx) => tx.scope.organisationId;

export async function insertInjury(tx: Tx, row: { id: string; athleteId: string }) {
  await tx.insert(injuries).values({ organisationId: org(tx), ...row, createdBy: tx.scope.personId });
}

export type NewRevision = Omit<Revision, "organisationId" | "recordedBy" | "recordedAt">;

export async function insertRevision(tx: Tx, row: NewRevision) {
  await tx.insert(injuryRevisions).values({ organisationId: org(tx), ...row, recordedBy: tx.scope.personId });
}

/** Points the injury to its next revision. @returns false when another edit came first */
export async function advanceVersion(tx: Tx, injuryId: string, from: number) {
  const rows = await tx
    .update(injuries)
    .set({ version: from + 1 })
    .where(and(eq(injuries.organisationId, org(tx)), eq(injuries.id, injuryId), eq(injuries.version, from)))
    .returning({ id: injuries.id });
  return rows.length === 1;
}

export async function insertDiagnoses(
  tx: Tx,
  rows: Omit<typeof injuryDiagnoses.$inferInsert, "organisationId">[],
) {
  if (rows.length === 0) return;
  await tx.insert(injuryDiagnoses).values(rows.map((row) => ({ organisationId: org(tx), ...row })));
}

export async function insertNote(tx: Tx, row: { id: string; injuryId: string; text: Uint8Array }) {
  await tx.insert(injuryNotes).values({ organisationId: org(tx), ...row, writtenBy: tx.scope.personId });
}
