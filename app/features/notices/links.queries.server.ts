import { and, eq, gt, lt, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { noticeLinks } from "~db/schema";

const org = (tx: Tx) => tx.scope.organisationId;

export async function findLink(tx: Tx, noticeId: string, by: { id: string } | { tokenHash: string }) {
  const [row] = await tx
    .select()
    .from(noticeLinks)
    .where(
      and(
        eq(noticeLinks.organisationId, org(tx)),
        eq(noticeLinks.noticeId, noticeId),
        "id" in by ? eq(noticeLinks.id, by.id) : eq(noticeLinks.tokenHash, by.tokenHash),
      ),
    );
  return row;
}

/** Wrong answers after which a link stays shut. */
export const mostTries = 5;

const stillOpen = (tx: Tx, linkId: string) =>
  and(
    eq(noticeLinks.organisationId, org(tx)),
    eq(noticeLinks.id, linkId),
    lt(noticeLinks.tries, mostTries),
    gt(noticeLinks.expiresAt, sql`now()`),
  );

/** Counts one wrong answer. @returns the count after it; undefined when the link was shut already */
export async function countWrongAnswer(tx: Tx, linkId: string) {
  const [row] = await tx
    .update(noticeLinks)
    .set({ tries: sql`${noticeLinks.tries} + 1` })
    .where(stillOpen(tx, linkId))
    .returning({ tries: noticeLinks.tries });
  return row?.tries;
}

/** Opens a link for one browser. @returns false when the link was shut already */
export async function openLink(tx: Tx, linkId: string, openHash: string, openUntil: Date) {
  const rows = await tx
    .update(noticeLinks)
    .set({ openHash, openUntil })
    .where(stillOpen(tx, linkId))
    .returning({ id: noticeLinks.id });
  return rows.length === 1;
}

/** Shuts every link of a notice: a new one takes their place. */
export async function shutLinks(tx: Tx, noticeId: string) {
  await tx
    .update(noticeLinks)
    .set({ tries: mostTries, openHash: null, openUntil: null })
    .where(and(eq(noticeLinks.organisationId, org(tx)), eq(noticeLinks.noticeId, noticeId)));
}

export async function insertLink(tx: Tx, row: Omit<typeof noticeLinks.$inferInsert, "organisationId">) {
  await tx.insert(noticeLinks).values({ organisationId: org(tx), ...row });
}
