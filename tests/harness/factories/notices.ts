import { randomUUID } from "node:crypto";
import { expiryInDays, hashToken, linkToken } from "~/features/accounts/tokens.server";
import { masterKey, sealer } from "~/platform/crypto/keys.server";
import { keyedHash } from "~/platform/crypto/sealing.server";
import { type Scope, write } from "~db/client.server";
import { deliveries, noticeEvents, noticeLinks, notices } from "~db/schema";
import { only } from "./rows";

/**
 * A notice with an open link and a waiting delivery, as rows. The feature's own use case writes what a guardian
 * really reads; this is enough for tests of access.
 */
export function makeNotice(
  scope: Scope,
  given: { injuryId: string; athleteId: string; guardianId: string; content?: string; answer?: string },
) {
  const { organisationId, personId } = scope;
  const id = randomUUID();
  return write(scope, async (tx) => {
    const seals = await sealer(tx);
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
          content: seals.sealRequired(place, given.content ?? "Content"),
          answerHash: keyedHash(masterKey(), "notice answer", `${id} ${given.answer ?? "2010-05-17"}`),
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
    return { notice, linkId, token, delivery };
  });
}
