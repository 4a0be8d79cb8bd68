import { randomUUID } from "node:crypto";
import { expiryInDays, hashToken, linkToken } from "~/features/accounts/tokens.server";
import { answerText, type NoticeContent } from "~/features/notices/notice-content";
import { masterKey, sealer } from "~/platform/crypto/keys.server";
import { keyedHash } from "~/platform/crypto/sealing.server";
import { type Scope, write } from "~db/client.server";
import { deliveries, noticeEvents, noticeLinks, notices } from "~db/schema";
import { only } from "./rows";

/**
 * A notice with an open link and a waiting delivery, as rows: for tests of who reaches it. What a guardian is really
 * told is written by the feature's own use case, `sendNotices`. `part` is the last part of the link's path.
 */
export function makeNotice(
  scope: Scope,
  given: {
    injuryId: string;
    athleteId: string;
    guardianId: string;
    content?: Partial<NoticeContent>;
    answer?: string;
  },
) {
  const { organisationId, personId } = scope;
  const id = randomUUID();
  return write(scope, async (tx) => {
    const seals = await sealer(tx);
    const content: NoticeContent = {
      childName: "Ines",
      day: scope.today,
      time: "17:30",
      where: null,
      happened: "Ines hurt her knee at training.",
      done: "We cooled it and she rested.",
      doNow: "Let her rest today.",
      watchFor: "Swelling that grows.",
      emergency: "Call the emergency services if her foot turns cold or pale.",
      call: { name: "Trainer", phone: "+44 1632 960100", hours: null },
      ...given.content,
    };
    const place = { table: "notices", column: "content", row: id, version: 1 };
    const notice = only(
      await tx
        .insert(notices)
        .values({
          organisationId,
          id,
          injuryId: given.injuryId,
          athleteId: given.athleteId,
          guardianId: given.guardianId,
          urgency: "routine",
          language: "en",
          content: seals.sealRequired(place, JSON.stringify(content)),
          answerHash: keyedHash(masterKey(), "notice answer", answerText(id, given.answer ?? "2010-05-17")),
          createdBy: personId,
        })
        .returning(),
    );
    const linkId = randomUUID();
    const expiresAt = expiryInDays(14);
    const token = linkToken("notice", linkId, expiresAt);
    await tx
      .insert(noticeLinks)
      .values({ organisationId, id: linkId, noticeId: id, tokenHash: hashToken(token), expiresAt });
    await tx
      .insert(noticeEvents)
      .values({ organisationId, id: randomUUID(), noticeId: id, kind: "written", by: personId });
    const delivery = only(
      await tx
        .insert(deliveries)
        .values({
          organisationId,
          id: randomUUID(),
          template: "notice",
          noticeId: id,
          guardianId: given.guardianId,
          parameters: {},
        })
        .returning(),
    );
    return { notice, linkId, part: `${id}.${token}`, delivery };
  });
}
