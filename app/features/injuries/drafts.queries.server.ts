import { and, eq } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { formDrafts, operations } from "~db/schema";

const own = (tx: Tx, personId: string, form: string) =>
  and(
    eq(formDrafts.organisationId, tx.scope.organisationId),
    eq(formDrafts.personId, personId),
    eq(formDrafts.form, form),
  );

export async function findDraft(tx: Tx, personId: string, form: string) {
  const [row] = await tx
    .select()
    .from(formDrafts)
    .where(own(tx, personId, form));
  return row;
}

export async function upsertDraft(
  tx: Tx,
  row: { personId: string; form: string; body: Uint8Array; savedAt: Date },
) {
  const { body, savedAt } = row;
  await tx
    .insert(formDrafts)
    .values({ organisationId: tx.scope.organisationId, ...row })
    .onConflictDoUpdate({
      target: [formDrafts.organisationId, formDrafts.personId, formDrafts.form],
      set: { body, savedAt },
    });
}

export async function removeDraft(tx: Tx, personId: string, form: string) {
  await tx.delete(formDrafts).where(own(tx, personId, form));
}

/** The result of an operation of the person's own; undefined while it was not carried out. */
export async function findResult(tx: Tx, operationId: string) {
  const [row] = await tx
    .select({ result: operations.result })
    .from(operations)
    .where(and(eq(operations.organisationId, tx.scope.organisationId), eq(operations.id, operationId)));
  return row?.result;
}
