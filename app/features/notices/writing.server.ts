import { randomUUID } from "node:crypto";
import { audit } from "~/platform/audit.server";
import { masterKey, sealer } from "~/platform/crypto/keys.server";
import { keyedHash } from "~/platform/crypto/sealing.server";
import { env } from "~/platform/env.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { once } from "~/platform/operations.server";
import { type Tx, write } from "~db/client.server";
import { may } from "../accounts/permissions";
import type { MemberScope } from "../accounts/scope.server";
import { expiryInDays } from "../accounts/tokens.server";
import { findInjuryForNotice, type InjuryForNotice } from "../injuries/injuries.server";
import { limitsPlace } from "../roster/guardians.server";
import { contentPlace } from "./composing.server";
import { composeNotice } from "./emails/notice-email";
import { mailNameProblem } from "./mail-safe";
import { answerText, type NoticeContent, type PlainWords } from "./notice-content";
import {
  findGuardians,
  findHow,
  findNoticesOfInjury,
  findSender,
  findStanding,
  insertEvent,
  insertNotice,
  lockInjury,
} from "./notices.queries.server";
import type { SendInput } from "./notices.schema";
import { draftPlainWords, sayWhere } from "./plain-words";
import { explainStop, limitsWarning, type Told, whoIsTold } from "./recipients";
import { addLinkAndMail, recordCall, statesOf } from "./records.server";

type Guardian = Awaited<ReturnType<typeof findGuardians>>[number] & { told: Told };

/** Everything a notice is written from, read in the caller's transaction. */
async function gather(tx: Tx, injuryId: string) {
  const injury = await findInjuryForNotice(tx, injuryId);
  if (!injury) throw notFound("That injury");
  const standing = await findStanding(tx, injury.athleteId);
  const guardians: Guardian[] = (await findGuardians(tx, injury.athleteId))
    .filter(({ endedAt }) => endedAt === null)
    .map((guardian) => ({ ...guardian, told: whoIsTold(standing, guardian, tx.scope.today) }));
  const earlier = await findNoticesOfInjury(tx, injuryId);
  return { injury, standing, guardians, earlier, sender: await findSender(tx) };
}

async function draftOf(tx: Tx, injury: InjuryForNotice) {
  const how = await findHow(tx, injury.injuryId);
  const words: PlainWords = draftPlainWords({
    ...injury,
    givenName: injury.athlete.givenName,
    onset: how?.onset ?? null,
    contact: how?.contact ?? null,
    movement: how?.movement ?? null,
  });
  const where = sayWhere({
    outsideSport: injury.outsideSport,
    kind: injury.session?.kind ?? null,
    team: injury.session?.teamName ?? null,
    venue: how?.venue ?? null,
  });
  return { words, where };
}

/** The page on which a notice is written: who is told and who is not, and why, and a draft of the words. */
export function prepareNotice(scope: MemberScope, injuryId: string) {
  if (!may(scope.roles, "notices.send")) throw forbidden();
  return write(scope, async (tx) => {
    const { injury, standing, guardians, earlier, sender } = await gather(tx, injuryId);
    const { words, where } = await draftOf(tx, injury);
    const { open } = await sealer(tx);
    const states = await statesOf(tx, earlier);
    await audit(tx, { action: "notice.prepare", subjectId: injuryId, athleteId: injury.athleteId });
    const names = { athlete: injury.athlete.givenName, ownDecisionAge: standing.ownDecisionAge };
    return {
      operation: randomUUID(),
      injury: {
        id: injury.injuryId,
        withdrawn: injury.withdrawn,
        urgency: injury.urgency,
        cautions: injury.cautions,
        phoned: injury.phoned,
        onsetDay: injury.onsetDay,
        onsetTime: injury.onsetTime,
        where,
      },
      athlete: injury.athlete,
      organisation: sender.name,
      words,
      call: { name: scope.displayName, phone: sender.phone, hours: sender.phoneHours },
      linkExpiresAt: expiryInDays(sender.noticeLinkDays),
      guardians: guardians.map((guardian) => {
        const { id, name, relation, phone, email, language, told } = guardian;
        const last = earlier.find((notice) => notice.guardianId === id);
        return {
          id,
          name,
          relation,
          phone,
          email,
          language,
          way: told.way,
          why: told.way === "email" ? null : explainStop(told.why, names),
          warning: limitsWarning(guardian, scope.today),
          limits: open(limitsPlace(injury.athleteId, id, 1), guardian.legalLimits),
          limitsReviewOn: guardian.limitsReviewOn,
          already: last ? { id: last.id, line: states.get(last.id)?.line ?? "" } : null,
        };
      }),
    };
  });
}

export type PreparedNotice = Awaited<ReturnType<typeof prepareNotice>>;
type Words = PlainWords & { callName: string; callPhone: string };

function contentOf(
  words: Words,
  facts: { givenName: string; day: string; time: string | null; where: string | null },
  sender: { phone: string; phoneHours: string | null },
): NoticeContent {
  const { happened, done, doNow, watchFor, emergency, callName: name, callPhone: phone } = words;
  return {
    childName: facts.givenName,
    day: facts.day,
    time: facts.time,
    where: facts.where,
    happened,
    done,
    doNow,
    watchFor,
    emergency,
    call: { name, phone, hours: phone === sender.phone ? sender.phoneHours : null },
  };
}

/** The mail for a frame of our own page, whose content policy takes no style element: that one only serves the dark. */
async function composeForFrame(props: Parameters<typeof composeNotice>[0]) {
  const mail = await composeNotice(props);
  return { ...mail, html: mail.html.replace(/<style[^>]*>[\s\S]*?<\/style>/g, "") };
}

/** A notice exactly as it will arrive: the mail of each guardian who gets one, and the page behind the link. */
export async function previewNotice(
  scope: MemberScope,
  prepared: PreparedNotice,
  words: Words,
  urgency: "routine" | "urgent",
) {
  const { injury, athlete, call } = prepared;
  const content = contentOf(
    words,
    { givenName: athlete.givenName, day: injury.onsetDay, time: injury.onsetTime, where: injury.where },
    { phone: call.phone, phoneHours: call.hours },
  );
  // The real link is made only when the notice is sent; this one leads nowhere.
  const linkUrl = `${env().APP_ORIGIN}/families/preview`;
  const mails = await Promise.all(
    prepared.guardians
      .filter(({ way }) => way === "email")
      .map(async (guardian) => ({
        guardianId: guardian.id,
        to: guardian.email ?? "",
        name: guardian.name,
        mail: await composeForFrame({
          language: guardian.language,
          organisation: prepared.organisation,
          urgent: urgency === "urgent",
          day: injury.onsetDay,
          contact: { name: words.callName, phone: words.callPhone },
          linkUrl,
          linkExpiresAt: prepared.linkExpiresAt,
          timeZone: scope.timeZone,
          stopUrl: `${linkUrl}?stop=1`,
        }),
      })),
  );
  return { content, mails };
}

const field = (name: string, message: string) =>
  new DomainError("invalid", "", { fields: { [name]: [message] } });

function checkSend(
  scope: MemberScope,
  { injury, guardians, earlier }: Awaited<ReturnType<typeof gather>>,
  input: SendInput,
) {
  if (injury.withdrawn)
    throw new DomainError(
      "conflict",
      "This injury was recorded in error and withdrawn. Nothing is sent about it.",
    );
  const problem = mailNameProblem(input.callName, {
    athlete: [injury.athlete.givenName, injury.athlete.familyName],
    colleague: scope.displayName,
  });
  if (problem) throw field("callName", problem);
  const chosen = [...new Set([...input.tell, ...input.again])];
  for (const id of chosen) {
    const guardian = guardians.find((each) => each.id === id);
    if (!guardian) throw notFound("That guardian");
    if (guardian.told.way === "nobody")
      throw field(
        "tell",
        `${guardian.name} can not be told any more. Read the reasons below and choose again.`,
      );
  }
  const repeated = input.tell.find(
    (id) => !input.again.includes(id) && earlier.some(({ guardianId }) => guardianId === id),
  );
  if (repeated)
    throw new DomainError("conflict", "", {
      fields: {
        tell: [
          `${guardians.find(({ id }) => id === repeated)?.name ?? "This guardian"} was told of this injury already. To send a second notice, tick "send again".`,
        ],
      },
    });
  if (injury.urgency === "urgent" && !input.callGuardian)
    throw field("callGuardian", "This is urgent: phone first, and say here whom you phoned.");
  const called = guardians.find(({ id }) => id === input.callGuardian);
  if (input.callGuardian && (!called || called.told.way === "nobody"))
    throw field("callGuardian", "This guardian can not be told. Choose another.");
  if (chosen.length === 0 && !called) throw field("tell", "Choose whom to tell.");
  return { chosen, called };
}

/** Writes one notice for one guardian, with its link and its mail where it goes by e-mail. */
async function writeOne(
  tx: Tx,
  injury: InjuryForNotice,
  guardian: Guardian,
  given: { urgency: string; content: NoticeContent; linkDays: number; byMail: boolean },
) {
  const id = randomUUID();
  const seals = await sealer(tx);
  const { dateOfBirth } = injury.athlete;
  await insertNotice(tx, {
    id,
    injuryId: injury.injuryId,
    athleteId: injury.athleteId,
    guardianId: guardian.id,
    urgency: given.urgency,
    language: guardian.language,
    content: seals.sealRequired(contentPlace(id), JSON.stringify(given.content)),
    // Without a date of birth no answer is right; such a notice has no link either.
    answerHash: keyedHash(masterKey(), "notice answer", answerText(id, dateOfBirth ?? randomUUID())),
  });
  await insertEvent(tx, { id: randomUUID(), noticeId: id, kind: "written" });
  if (given.byMail)
    await addLinkAndMail(tx, {
      noticeId: id,
      guardianId: guardian.id,
      linkDays: given.linkDays,
      urgent: given.urgency === "urgent",
      template: "notice",
    });
  return id;
}

/**
 * Sends an injury's notices: one for each guardian, with the call that came first. Who may be told is read anew, under
 * a lock of the injury, so that two people who send at once do not tell a family twice.
 * @returns the notices' ids, the same on a replay
 */
export function sendNotices(scope: MemberScope, injuryId: string, input: SendInput) {
  if (!may(scope.roles, "notices.send")) throw forbidden();
  return write(scope, (tx) =>
    once(tx, input.operation, { injuryId, ...input }, async () => {
      await lockInjury(tx, injuryId);
      const gathered = await gather(tx, injuryId);
      const { injury, guardians, earlier, sender } = gathered;
      const { chosen, called } = checkSend(scope, gathered, input);
      const { where } = await draftOf(tx, injury);
      const urgency = injury.urgency === "urgent" ? "urgent" : input.urgency;
      const content = contentOf(
        input,
        { givenName: injury.athlete.givenName, day: injury.onsetDay, time: injury.onsetTime, where },
        sender,
      );
      const noticeIds: string[] = [];
      const noticeOf = new Map(earlier.toReversed().map((notice) => [notice.guardianId, notice.id]));
      const wanted = guardians.filter(
        ({ id }) => chosen.includes(id) || (id === called?.id && !noticeOf.has(id)),
      );
      for (const guardian of wanted) {
        const byMail = guardian.told.way === "email" && chosen.includes(guardian.id);
        const given = { urgency, content, linkDays: sender.noticeLinkDays, byMail };
        const id = await writeOne(tx, injury, guardian, given);
        noticeOf.set(guardian.id, id);
        noticeIds.push(id);
      }
      const calledNotice = called && noticeOf.get(called.id);
      if (calledNotice && input.callOutcome) {
        await recordCall(tx, calledNotice, { callOutcome: input.callOutcome, callTold: input.callTold });
        if (!noticeIds.includes(calledNotice)) noticeIds.push(calledNotice);
      }
      await audit(tx, {
        action: "notice.send",
        subjectId: injuryId,
        athleteId: injury.athleteId,
        fields: { notices: noticeIds, urgency },
      });
      return { noticeIds };
    }),
  );
}
