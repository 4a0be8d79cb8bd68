import { randomUUID } from "node:crypto";
import { group } from "d3-array";
import { sealer } from "~/platform/crypto/keys.server";
import type { Tx } from "~db/client.server";
import { expiryInDays, hashToken, linkToken } from "../accounts/tokens.server";
import { queueDelivery } from "../outbox/outbox.server";
import { insertLink } from "./links.queries.server";
import { type NoticeState, noticeState } from "./notice-state";
import { findDeliveries, findEvents, insertEvent } from "./notices.queries.server";
import type { CallOutcome } from "./notices.schema";
import { sayWhenIn } from "./when";

/** Records that the writing of notices, their pages and the families' door have in common. */

export const eventPlace = (row: string) => ({ table: "notice_events", column: "detail", row, version: 1 });

/** A new link and the mail that carries it, in the caller's transaction. */
export async function addLinkAndMail(
  tx: Tx,
  given: {
    noticeId: string;
    guardianId: string;
    linkDays: number;
    urgent: boolean;
    template: "notice" | "fresh-link";
  },
) {
  const { noticeId, guardianId, urgent, template } = given;
  const linkId = randomUUID();
  const expiresAt = expiryInDays(given.linkDays);
  const tokenHash = hashToken(linkToken("notice", linkId, expiresAt));
  await insertLink(tx, { id: linkId, noticeId, tokenHash, expiresAt });
  return queueDelivery(tx, { template, noticeId, guardianId, urgent, parameters: { linkId } });
}

/** Puts a call on record: who was told what, sealed. */
export async function recordCall(
  tx: Tx,
  noticeId: string,
  call: { callOutcome: CallOutcome; callTold: string },
) {
  const id = randomUUID();
  const { seal } = await sealer(tx);
  await insertEvent(tx, {
    id,
    noticeId,
    kind: call.callOutcome === "reached" ? "phoned" : "phone_tried",
    detail: seal(eventPlace(id), call.callTold),
  });
}

/** The text of an event, for those who may read it. */
export async function openDetail(tx: Tx, event: { id: string; detail: Uint8Array | null }) {
  return (await sealer(tx)).open(eventPlace(event.id), event.detail);
}

/** The state of each notice, by its id. */
export async function statesOf(
  tx: Tx,
  rows: readonly { id: string; urgency: string; createdAt: Date }[],
): Promise<Map<string, NoticeState>> {
  const ids = rows.map(({ id }) => id);
  const events = group(await findEvents(tx, ids), ({ noticeId }) => noticeId);
  const mails = group(await findDeliveries(tx, ids), ({ noticeId }) => noticeId);
  const now = new Date();
  const sayWhen = sayWhenIn(tx.scope);
  return new Map(
    rows.map(({ id, urgency, createdAt }) => [
      id,
      noticeState(
        {
          urgent: urgency === "urgent",
          createdAt,
          // The text of an event stays sealed here.
          events: (events.get(id) ?? []).map(({ kind, at }) => ({ kind, at })),
          deliveries: mails.get(id) ?? [],
        },
        now,
        sayWhen,
      ),
    ]),
  );
}
