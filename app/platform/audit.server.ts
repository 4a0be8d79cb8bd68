import { randomUUID } from "node:crypto";
import type { Tx } from "~db/client.server";
import { auditEvents } from "~db/schema";

export type AuditEntry = {
  /** The trade's object and verb: "injury.read", "roster.import", "notice.send". */
  action: string;
  subjectId?: string;
  athleteId?: string;
  /** Codes, ids and names of changed fields; never clinical text, names or addresses. */
  fields?: Record<string, string | number | boolean | string[]>;
};

/**
 * Records who did or saw what, in the transaction of the deed: without the record there is no deed.
 * A clinical read is audited in a write transaction for the same reason.
 */
export async function audit(tx: Tx, entry: AuditEntry) {
  const { organisationId, personId, actors, requestId } = tx.scope;
  await tx.insert(auditEvents).values({
    organisationId,
    id: randomUUID(),
    personId,
    actingAs: actors.join(","),
    action: entry.action,
    subjectId: entry.subjectId ?? null,
    athleteId: entry.athleteId ?? null,
    requestId: requestId ?? null,
    fields: entry.fields ?? {},
  });
}
