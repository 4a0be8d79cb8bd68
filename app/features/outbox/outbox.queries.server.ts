import { and, eq, inArray, lt, or, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { deliveries, organisations } from "~db/schema";

const org = (tx: Tx) => tx.scope.organisationId;

export type Delivery = typeof deliveries.$inferSelect;

export function insertDelivery(tx: Tx, row: Omit<typeof deliveries.$inferInsert, "organisationId">) {
  return tx.insert(deliveries).values({ organisationId: org(tx), ...row });
}

/** Takes a delivery for sending: one worker at a time, and only while it waits. */
export async function claimDelivery(tx: Tx, id: string): Promise<Delivery | undefined> {
  const [row] = await tx
    .update(deliveries)
    .set({
      state: "sending",
      attempts: sql`${deliveries.attempts} + 1`,
      version: sql`${deliveries.version} + 1`,
    })
    .where(
      and(
        eq(deliveries.organisationId, org(tx)),
        eq(deliveries.id, id),
        or(
          eq(deliveries.state, "waiting"),
          // A worker that died while sending leaves the row behind; the same message id makes a second try harmless.
          and(eq(deliveries.state, "sending"), lt(deliveries.nextAttemptAt, sql`now()`)),
        ),
      ),
    )
    .returning();
  return row;
}

export function updateDelivery(tx: Tx, id: string, set: Partial<typeof deliveries.$inferInsert>) {
  return tx
    .update(deliveries)
    .set({ ...set, version: sql`${deliveries.version} + 1` })
    .where(and(eq(deliveries.organisationId, org(tx)), eq(deliveries.id, id)));
}

export async function findDeliveryByProvider(tx: Tx, providerId: string) {
  const [row] = await tx
    .select()
    .from(deliveries)
    .where(and(eq(deliveries.organisationId, org(tx)), eq(deliveries.providerId, providerId)));
  return row;
}

/** Deliveries that should be under way but have no job: the process died between, or the queue was emptied. */
export function findOverdue(tx: Tx) {
  return tx
    .select({ id: deliveries.id })
    .from(deliveries)
    .where(
      and(
        eq(deliveries.organisationId, org(tx)),
        inArray(deliveries.state, ["waiting", "sending"]),
        sql`coalesce(${deliveries.nextAttemptAt}, ${deliveries.createdAt}) < now() - interval '1 minute'`,
      ),
    )
    .limit(500);
}

export function listOrganisationIds(tx: Tx) {
  return tx.select({ organisationId: organisations.organisationId }).from(organisations);
}
