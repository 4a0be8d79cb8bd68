import { createHash } from "node:crypto";
import { and, eq } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { operations } from "~db/schema";
import { DomainError } from "./errors";

/** JSON with sorted keys, so that the same answers give the same hash however a client orders them. */
function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join(",")}]`;
  if (value === null || typeof value !== "object") return JSON.stringify(value) ?? "null";
  const entries = Object.entries(value)
    .filter(([, item]) => item !== undefined)
    .sort(([a], [b]) => (a < b ? -1 : 1));
  return `{${entries.map(([key, item]) => `${JSON.stringify(key)}:${canonical(item)}`).join(",")}}`;
}

/**
 * Runs a write once under a client-made id, inside the write's own transaction. A replay returns the first result;
 * another body, or another person's id, is refused and changes nothing.
 * @param body everything the write depends on
 * @throws DomainError operation_mismatch
 */
export async function once<R extends Record<string, unknown>>(
  tx: Tx,
  id: string,
  body: unknown,
  run: () => Promise<R>,
): Promise<R> {
  const { organisationId, personId } = tx.scope;
  if (!personId) throw new DomainError("not_signed_in", "Sign in to save this.");
  const bodyHash = createHash("sha256").update(canonical(body)).digest("base64url");
  // The insert takes the id first, so that a simultaneous replay waits for this transaction and then finds it.
  const taken = await tx
    .insert(operations)
    .values({ organisationId, id, personId, bodyHash, result: {} })
    .onConflictDoNothing()
    .returning({ id: operations.id });
  if (taken.length === 0) {
    const [first] = await tx
      .select()
      .from(operations)
      .where(and(eq(operations.organisationId, organisationId), eq(operations.id, id)));
    if (!first || first.bodyHash !== bodyHash || first.personId !== personId)
      throw new DomainError(
        "operation_mismatch",
        "This entry was already saved with other values. Open it again to see what is stored.",
      );
    return first.result as R;
  }
  const result = await run();
  await tx
    .update(operations)
    .set({ result })
    .where(and(eq(operations.organisationId, organisationId), eq(operations.id, id)));
  return result;
}
