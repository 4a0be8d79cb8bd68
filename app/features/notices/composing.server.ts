import { sealer } from "~/platform/crypto/keys.server";
import { env } from "~/platform/env.server";
import type { MailLanguage } from "~/platform/mail/languages";
import { type Scope, type Tx, write } from "~db/client.server";
import { linkToken } from "../accounts/tokens.server";
import type { Composed, Composer } from "../outbox/outbox.server";
import { composeFreshLink } from "./emails/fresh-link-email";
import { composeNotice } from "./emails/notice-email";
import { findLink } from "./links.queries.server";
import { type NoticeContent, noticeContentSchema } from "./notice-content";
import {
  findGuardians,
  findNotice,
  findSender,
  findStanding,
  isWithdrawn,
  markEmailStopped,
} from "./notices.queries.server";
import { type Told, whoIsTold } from "./recipients";

type Delivery = Parameters<Composer>[2];
type StoredNotice = NonNullable<Awaited<ReturnType<typeof findNotice>>>;

/** The address of a notice's page; the token is derived, never stored. */
export const familyPath = (organisationId: string, noticeId: string, link: { id: string; expiresAt: Date }) =>
  `/families/${organisationId}/${noticeId}.${linkToken("notice", link.id, link.expiresAt)}`;

/** Where the sealed content of a notice belongs. */
export const contentPlace = (noticeId: string) => ({
  table: "notices",
  column: "content",
  row: noticeId,
  version: 1,
});

/** What stands behind the link of a notice. @throws ZodError when it was sealed in another shape */
export async function openContent(
  tx: Tx,
  notice: { id: string; content: Uint8Array },
): Promise<NoticeContent> {
  const text = (await sealer(tx)).open(contentPlace(notice.id), notice.content);
  return noticeContentSchema.parse(JSON.parse(text ?? "null"));
}

/** Whether this notice's guardian may be told at this moment, and how. Needs a scope that reads the roster. */
export async function toldNow(
  tx: Tx,
  notice: { injuryId: string; athleteId: string; guardianId: string },
): Promise<{ told: Told; email: string | null }> {
  if (await isWithdrawn(tx, notice.injuryId))
    return { told: { way: "nobody", why: "withdrawn" }, email: null };
  const [guardian] = await findGuardians(tx, notice.athleteId, notice.guardianId);
  if (!guardian) return { told: { way: "nobody", why: "ended" }, email: null };
  const told = whoIsTold(await findStanding(tx, notice.athleteId), guardian, tx.scope.today);
  return { told, email: guardian.email };
}

/** What both mails know: no name of an athlete, no word of the content but whom to call and the day. */
export async function mailProps(
  tx: Tx,
  scope: Scope,
  notice: StoredNotice,
  link: { id: string; expiresAt: Date },
) {
  const { name } = await findSender(tx);
  const { call, day } = await openContent(tx, notice);
  const linkUrl = env().APP_ORIGIN + familyPath(scope.organisationId, notice.id, link);
  return {
    language: notice.language as MailLanguage,
    organisation: name,
    urgent: notice.urgency === "urgent",
    day,
    contact: { name: call.name, phone: call.phone },
    linkUrl,
    linkExpiresAt: link.expiresAt,
    timeZone: scope.timeZone,
    stopUrl: `${linkUrl}?stop=1`,
  };
}

/**
 * The mail of a notice, composed when it is sent: holds, limits, ages and wishes are read here and now. It is the same
 * at every attempt, since the mail service holds the message id against the body.
 */
async function compose(
  tx: Tx,
  scope: Scope,
  delivery: Delivery,
  composeMail: typeof composeNotice | typeof composeFreshLink,
): Promise<Composed> {
  const notice = delivery.noticeId ? await findNotice(tx, delivery.noticeId) : undefined;
  const linkId = delivery.parameters.linkId;
  const link =
    notice && typeof linkId === "string" ? await findLink(tx, notice.id, { id: linkId }) : undefined;
  if (!notice || !link || link.expiresAt <= new Date()) return { stopped: "no_link" };
  const { told, email } = await toldNow(tx, notice);
  if (told.way !== "email") return { stopped: told.why };
  if (!email) return { stopped: "no_address" };
  return { to: email, mail: await composeMail(await mailProps(tx, scope, notice, link)) };
}

export const composeNoticeDelivery = (tx: Tx, scope: Scope, delivery: Delivery) =>
  compose(tx, scope, delivery, composeNotice);

export const composeFreshLinkDelivery = (tx: Tx, scope: Scope, delivery: Delivery) =>
  compose(tx, scope, delivery, composeFreshLink);

/** An address that came back for good, or whose owner calls us junk, gets no more mail until it is corrected. */
export async function stopMailOf(scope: Scope, delivery: { guardianId: string | null }, at: Date) {
  const { guardianId } = delivery;
  if (guardianId) await write(scope, (tx) => markEmailStopped(tx, guardianId, at));
}
