import { createHash, randomBytes, randomUUID, timingSafeEqual } from "node:crypto";
import { createCookie } from "react-router";
import { audit } from "~/platform/audit.server";
import { masterKey, sealer } from "~/platform/crypto/keys.server";
import { keyedHash } from "~/platform/crypto/sealing.server";
import { parseDay } from "~/platform/days";
import { env } from "~/platform/env.server";
import { DomainError, notFound } from "~/platform/errors";
import { read, write } from "~db/client.server";
import { countAttempt } from "../accounts/attempts.server";
import { openDoor } from "../accounts/doors.server";
import { hashToken } from "../accounts/tokens.server";
import { openContent, toldNow } from "./composing.server";
import { countWrongAnswer, findLink, mostTries, openLink } from "./links.queries.server";
import { answerText, type NoticeContent } from "./notice-content";
import { findEvents, findNotice, findSender, insertEvent, stopWantingEmail } from "./notices.queries.server";
import { addLinkAndMail, eventPlace } from "./records.server";

/**
 * The door of a family: a link, one thing that the guardian knows, and a cookie of half an hour for this notice alone.
 * Everything is looked up under row-level security in the notice's own scope. Nothing here tells of another guardian.
 */

const openMinutes = 30;
/** New links per notice in a day, and locked links after which none is sent any more: whoever guesses must stop. */
const mostFreshLinks = 3;
const mostLockedLinks = 3;

/** What a request to the door brings. */
export type Knock = {
  organisationId: string;
  /** The last part of the path: "<notice id>.<secret>". */
  part: string;
  clientAddress: string;
  requestId: string;
  /** The value of the opening cookie; null without one. */
  opening: string | null;
};

const uuid = /^[0-9a-f]{8}-(?:[0-9a-f]{4}-){3}[0-9a-f]{12}$/;

/** The cookie of one opening: sent back to this link's address alone. */
export function openingCookie(organisationId: string, part: string) {
  return createCookie("haleside_notice", {
    path: `/families/${organisationId}/${part}`,
    httpOnly: true,
    sameSite: "lax",
    secure: env().APP_ORIGIN.startsWith("https://"),
    maxAge: openMinutes * 60,
  });
}

const hashOpening = (value: string) => createHash("sha256").update(value).digest("base64url");

function sameText(a: string, b: string) {
  const [first, second] = [Buffer.from(a), Buffer.from(b)];
  return first.length === second.length && timingSafeEqual(first, second);
}

/**
 * The notice and link of a knock. A wrong address, another organisation's token and a token of another notice all
 * answer alike.
 * @throws DomainError not_found
 */
async function findBehind(knock: Knock) {
  const [noticeId = "", secret = ""] = knock.part.split(".");
  if (!uuid.test(noticeId) || !uuid.test(knock.organisationId)) throw notFound("This link");
  const { organisationId, requestId } = knock;
  const scope = await openDoor("guardian", organisationId, { doorId: noticeId, requestId });
  const found = await read(scope, async (tx) => ({
    notice: await findNotice(tx, noticeId),
    link: await findLink(tx, noticeId, { tokenHash: hashToken(secret) }),
    sender: await findSender(tx),
    events: await findEvents(tx, [noticeId]),
  }));
  const { notice, link } = found;
  if (!notice || !link) throw notFound("This link");
  const job = await openDoor("job", organisationId, { requestId });
  // A hold, a limit or a birthday since it was sent closes what was open.
  const { told } = await read(job, (tx) => toldNow(tx, notice));
  const shut = told.way === "nobody" || link.expiresAt <= new Date() || link.tries >= mostTries;
  const open =
    !shut &&
    knock.opening !== null &&
    link.openHash !== null &&
    link.openUntil !== null &&
    link.openUntil > new Date() &&
    sameText(link.openHash, hashOpening(knock.opening));
  return { ...found, notice, link, scope, job, shut, open };
}

export type FamilyPage = {
  organisation: string;
  phone: string;
  hours: string | null;
} & (
  | { state: "question"; triesLeft: number }
  | { state: "shut" }
  | {
      state: "open";
      urgent: boolean;
      content: NoticeContent;
      acknowledged: boolean;
      callAsked: boolean;
      mailStopped: boolean;
    }
);

/** What the page shows. Changes nothing, however often a mail program's scanner asks. */
export async function readFamilyPage(knock: Knock): Promise<FamilyPage> {
  const { notice, link, sender, events, scope, shut, open } = await findBehind(knock);
  const head = { organisation: sender.name, phone: sender.phone, hours: sender.phoneHours };
  if (shut) return { ...head, state: "shut" };
  if (!open) return { ...head, state: "question", triesLeft: mostTries - link.tries };
  const has = (kind: string) => events.some((event) => event.kind === kind);
  return {
    ...head,
    state: "open",
    urgent: notice.urgency === "urgent",
    content: await read(scope, (tx) => openContent(tx, notice)),
    acknowledged: has("acknowledged"),
    callAsked: has("call_requested"),
    mailStopped: has("e_mail_stopped"),
  };
}

const shutError = () =>
  new DomainError("locked", "This link no longer works. Call us, or ask for a new link below.");

const wrongAnswer = (left: number) =>
  new DomainError("invalid", "", {
    fields: {
      answer: [
        `That is not the date of birth that we have. Look at the day, the month and the year. You can try ${left} more ${left === 1 ? "time" : "times"}.`,
      ],
    },
  });

/**
 * The answer to the question: the child's date of birth, day first, as people write it. What can not be read as a day
 * costs no try.
 * @returns the value of the opening cookie
 * @throws DomainError invalid with the tries left, locked after the fifth wrong answer, too_many
 */
export async function answerQuestion(knock: Knock, typed: string): Promise<string> {
  const { notice, link, scope, shut } = await findBehind(knock);
  await countAttempt("guardian-answer", { account: notice.id, clientAddress: knock.clientAddress });
  if (shut) throw shutError();
  const parsed = parseDay(typed, /^\s*\d{4}/.test(typed) ? undefined : "day-month-year");
  if (!parsed.ok) throw new DomainError("invalid", "", { fields: { answer: [parsed.reason] } });
  const given = keyedHash(masterKey(), "notice answer", answerText(notice.id, parsed.day));
  const opening = randomBytes(32).toString("base64url");
  const outcome = await write(scope, async (tx) => {
    if (sameText(given, notice.answerHash)) {
      const until = new Date(Date.now() + openMinutes * 60_000);
      if (!(await openLink(tx, link.id, hashOpening(opening), until))) return { shut: true as const };
      await insertEvent(tx, { id: randomUUID(), noticeId: notice.id, kind: "opened" });
      await audit(tx, { action: "notice.open", subjectId: notice.id, athleteId: notice.athleteId });
      return { opened: true as const };
    }
    const tries = await countWrongAnswer(tx, link.id);
    if (tries === undefined) return { shut: true as const };
    if (tries === mostTries) {
      await insertEvent(tx, { id: randomUUID(), noticeId: notice.id, kind: "locked" });
      await audit(tx, { action: "notice.lock", subjectId: notice.id, athleteId: notice.athleteId });
    }
    return { left: mostTries - tries };
  });
  if ("opened" in outcome) return opening;
  if ("shut" in outcome || outcome.left === 0) throw shutError();
  throw wrongAnswer(outcome.left);
}

/** The notice of a knock whose cookie is open. @throws DomainError conflict once half an hour has passed */
async function requireOpen(knock: Knock) {
  const found = await findBehind(knock);
  await countAttempt("guardian-answer", { account: found.notice.id, clientAddress: knock.clientAddress });
  if (!found.open)
    throw new DomainError(
      "conflict",
      "The page closes after 30 minutes. Please give the date of birth once more, then press again.",
    );
  return found;
}

/** The guardian has read it. Pressing twice says it once. */
export async function acknowledge(knock: Knock) {
  const { notice, scope, events } = await requireOpen(knock);
  if (events.some(({ kind }) => kind === "acknowledged")) return;
  await write(scope, async (tx) => {
    await insertEvent(tx, { id: randomUUID(), noticeId: notice.id, kind: "acknowledged" });
    await audit(tx, { action: "notice.acknowledge", subjectId: notice.id, athleteId: notice.athleteId });
  });
}

/** The guardian asks for a call, at a time that suits; asked in other words it stands there again. */
export async function askForCall(knock: Knock, when: string) {
  const { notice, scope } = await requireOpen(knock);
  await write(scope, async (tx) => {
    const id = randomUUID();
    const { seal } = await sealer(tx);
    await insertEvent(tx, {
      id,
      noticeId: notice.id,
      kind: "call_requested",
      detail: seal(eventPlace(id), when),
    });
    await audit(tx, { action: "notice.ask-call", subjectId: notice.id, athleteId: notice.athleteId });
  });
}

const dayAgo = () => new Date(Date.now() - 24 * 3600_000);

/**
 * Sends a new link to the address on file, wherever whoever asks may be. The answer is the same whether or not one goes
 * out; whether the guardian may still be told is read when the mail is composed.
 */
export async function askForFreshLink(knock: Knock) {
  const { notice, job, events, shut, sender } = await findBehind(knock);
  await countAttempt("guardian-answer", { account: notice.id, clientAddress: knock.clientAddress });
  const lately = events.filter(({ kind, at }) => kind === "fresh_link_requested" && at > dayAgo()).length;
  const locked = events.filter(({ kind }) => kind === "locked").length;
  if (!shut || lately >= mostFreshLinks || locked >= mostLockedLinks) return;
  await write(job, async (tx) => {
    await insertEvent(tx, { id: randomUUID(), noticeId: notice.id, kind: "fresh_link_requested" });
    await addLinkAndMail(tx, {
      noticeId: notice.id,
      guardianId: notice.guardianId,
      linkDays: sender.noticeLinkDays,
      urgent: notice.urgency === "urgent",
      template: "fresh-link",
    });
    await audit(tx, { action: "notice.fresh-link", subjectId: notice.id, athleteId: notice.athleteId });
  });
}

/**
 * Stops e-mails to this guardian. The link is enough: whoever holds it holds the mail, and a wrong person must be able
 * to say no. The clinical roles see it and phone.
 */
export async function stopMail(knock: Knock) {
  const { notice, job, events } = await findBehind(knock);
  await countAttempt("guardian-answer", { account: notice.id, clientAddress: knock.clientAddress });
  await write(job, async (tx) => {
    if (!events.some(({ kind }) => kind === "e_mail_stopped"))
      await insertEvent(tx, { id: randomUUID(), noticeId: notice.id, kind: "e_mail_stopped" });
    await stopWantingEmail(tx, notice.guardianId);
    await audit(tx, {
      action: "guardian.stop-mail",
      subjectId: notice.guardianId,
      athleteId: notice.athleteId,
    });
  });
}
