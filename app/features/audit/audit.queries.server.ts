import { and, asc, desc, eq, isNull } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { auditEvents, auditSeals, organisations } from "~db/schema";

const org = (tx: Tx) => tx.scope.organisationId;

export async function findHead(tx: Tx) {
  const [head] = await tx
    .select({ position: auditSeals.position, hash: auditSeals.hash })
    .from(auditSeals)
    .where(eq(auditSeals.organisationId, org(tx)))
    .orderBy(desc(auditSeals.position))
    .limit(1);
  return head;
}

/** Events that are not in the chain yet, in the order in which they enter it. */
export function findUnsealed(tx: Tx, limit: number) {
  return tx
    .select({ event: auditEvents })
    .from(auditEvents)
    .leftJoin(
      auditSeals,
      and(eq(auditSeals.organisationId, auditEvents.organisationId), eq(auditSeals.eventId, auditEvents.id)),
    )
    .where(and(eq(auditEvents.organisationId, org(tx)), isNull(auditSeals.eventId)))
    .orderBy(asc(auditEvents.at), asc(auditEvents.id))
    .limit(limit);
}

export function insertSeals(tx: Tx, rows: { position: number; eventId: string; hash: string }[]) {
  return tx.insert(auditSeals).values(rows.map((row) => ({ organisationId: org(tx), ...row })));
}

/** The chain in order, with what each link was made of. */
export function findChain(tx: Tx) {
  return tx
    .select({ position: auditSeals.position, hash: auditSeals.hash, event: auditEvents })
    .from(auditSeals)
    .leftJoin(
      auditEvents,
      and(eq(auditEvents.organisationId, auditSeals.organisationId), eq(auditEvents.id, auditSeals.eventId)),
    )
    .where(eq(auditSeals.organisationId, org(tx)))
    .orderBy(asc(auditSeals.position));
}

export function listOrganisationIds(tx: Tx) {
  return tx.select({ organisationId: organisations.organisationId }).from(organisations);
}
