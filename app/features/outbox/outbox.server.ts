import { randomUUID } from "node:crypto";
import { enqueue } from "~/platform/jobs/queue.server";
import { log } from "~/platform/log.server";
import { mailTransport } from "~/platform/mail/configured.server";
import type { ComposedMail } from "~/platform/mail/email-layout";
import { MailFailure } from "~/platform/mail/failure.server";
import { read, type Scope, type Tx, write } from "~db/client.server";
import { openDoor, sweeperScope } from "../accounts/doors.server";
import {
  claimDelivery,
  type Delivery,
  findDeliveryByProvider,
  findOverdue,
  insertDelivery,
  listOrganisationIds,
  updateDelivery,
} from "./outbox.queries.server";

export type Template = "invitation" | "notice" | "fresh-link";

/** What a composer answers: the mail and its one address, or why there is nothing to send any more. */
export type Composed = { to: string; mail: ComposedMail } | { stopped: string };
export type Composer = (tx: Tx, scope: Scope, delivery: Delivery) => Promise<Composed>;

type NewDelivery = {
  template: Template;
  noticeId?: string;
  invitationId?: string;
  guardianId?: string;
  urgent?: boolean;
  parameters?: Record<string, string | number | boolean>;
};

/** Puts a mail into the outbox in the caller's transaction: it goes out exactly when the cause was saved. */
export async function queueDelivery(tx: Tx, delivery: NewDelivery) {
  const id = randomUUID();
  await insertDelivery(tx, { id, ...delivery, parameters: delivery.parameters ?? {} });
  await enqueue(tx, "deliver", { organisationId: tx.scope.organisationId, deliveryId: id });
  return id;
}

/** The mail service forgets its idempotency keys after a day; before that we stop and make it a phone task. */
const giveUpAfterMs = 23 * 3600 * 1000;
const sendingLeaseSeconds = 120;

/** Seconds until the next attempt: doubling from 10 s to at most an hour. */
export const backoffSeconds = (attempts: number) => Math.min(3600, 10 * 2 ** Math.min(attempts - 1, 10));

/**
 * Sends one delivery. Composing reads the guardian's choices and limits at this very moment; the send itself runs
 * outside any transaction, under the delivery's own id as the message id, so that a retry is never a second mail.
 */
export async function deliver(
  organisationId: string,
  deliveryId: string,
  composers: Record<Template, Composer>,
) {
  const scope = await openDoor("job", organisationId);
  const claimed = await write(scope, async (tx) => {
    const delivery = await claimDelivery(tx, deliveryId);
    if (!delivery) return undefined;
    await updateDelivery(tx, deliveryId, {
      nextAttemptAt: new Date(Date.now() + sendingLeaseSeconds * 1000),
    });
    const composer = composers[delivery.template as Template];
    return { delivery, composed: await composer(tx, scope, delivery) };
  });
  if (!claimed) return;
  const { delivery, composed } = claimed;
  if ("stopped" in composed) {
    await write(scope, (tx) =>
      updateDelivery(tx, deliveryId, { state: "stopped", lastError: composed.stopped }),
    );
    return;
  }
  try {
    const { id } = await mailTransport().send(
      { to: composed.to, ...composed.mail },
      { idempotencyKey: `delivery-${deliveryId}` },
    );
    await write(scope, (tx) =>
      updateDelivery(tx, deliveryId, { state: "sent", providerId: id, sentAt: new Date(), lastError: null }),
    );
  } catch (error) {
    if (!(error instanceof MailFailure)) throw error;
    await write(scope, (tx) => putBack(tx, delivery, error));
  }
}

/** After a failure: try again later, or give up where trying cannot help. */
async function putBack(tx: Tx, delivery: Delivery, failure: MailFailure) {
  const tooOld = Date.now() - delivery.createdAt.getTime() > giveUpAfterMs;
  if (failure.kind === "permanent" || tooOld) {
    await updateDelivery(tx, delivery.id, {
      state: "failed",
      failedAt: new Date(),
      lastError: failure.code,
    });
    return;
  }
  const seconds = Math.max(failure.retryAfterSeconds ?? 0, backoffSeconds(delivery.attempts));
  await updateDelivery(tx, delivery.id, {
    state: "waiting",
    nextAttemptAt: new Date(Date.now() + seconds * 1000),
    lastError: failure.code,
  });
  await enqueue(
    tx,
    "deliver",
    { organisationId: tx.scope.organisationId, deliveryId: delivery.id },
    { startAfterSeconds: seconds },
  );
}

/** Enqueues again what waits without a job. */
export async function sweepOutbox() {
  const all = await read(sweeperScope, listOrganisationIds);
  for (const { organisationId } of all) {
    const scope = await openDoor("job", organisationId);
    await write(scope, async (tx) => {
      const overdue = await findOverdue(tx);
      for (const { id } of overdue)
        await enqueue(tx, "deliver", { organisationId, deliveryId: id }, { singletonKey: id });
      if (overdue.length > 0) log.warn({ count: overdue.length }, "outbox swept");
    });
  }
}

export type MailNews = {
  kind: "delivered" | "bounced" | "complained" | "failed";
  providerId: string;
  at: Date;
};

/**
 * Takes in what the mail service says of a message. Its webhook names no organisation, so each is asked for the
 * message id; news of a message that is not ours is ignored, and news never turns a later state back.
 * @returns the delivery concerned, with its organisation's scope
 */
export async function noteMailNews(news: MailNews) {
  const all = await read(sweeperScope, listOrganisationIds);
  for (const { organisationId } of all) {
    const scope = await openDoor("job", organisationId);
    const delivery = await write(scope, async (tx) => {
      const found = await findDeliveryByProvider(tx, news.providerId);
      if (!found) return undefined;
      const settled = found.state === "bounced" || found.state === "complained";
      if (news.kind === "delivered" && found.state === "sent")
        await updateDelivery(tx, found.id, { state: "delivered", deliveredAt: news.at });
      if (news.kind !== "delivered" && !settled)
        await updateDelivery(tx, found.id, { state: news.kind, failedAt: news.at, lastError: news.kind });
      return found;
    });
    if (delivery) return { scope, delivery };
  }
  return undefined;
}
