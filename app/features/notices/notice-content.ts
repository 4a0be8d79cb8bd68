import { z } from "zod";

const day = z.string().regex(/^\d{4}-\d{2}-\d{2}$/);

/**
 * What stands behind the link, sealed with the notice as it was previewed. The child's given name only: whoever reads
 * it knows the rest.
 */
export const noticeContentSchema = z.object({
  childName: z.string(),
  day,
  /** Local clock time, HH:MM. */
  time: z.string().nullable(),
  where: z.string().nullable(),
  happened: z.string(),
  done: z.string(),
  doNow: z.string(),
  watchFor: z.string(),
  emergency: z.string(),
  call: z.object({ name: z.string(), phone: z.string(), hours: z.string().nullable() }),
});

export type NoticeContent = z.output<typeof noticeContentSchema>;

/** The parts that the athletic trainer may rewrite before sending. */
export type PlainWords = Pick<NoticeContent, "happened" | "done" | "doNow" | "watchFor" | "emergency">;

export type TextBlock = { kind: "paragraph"; text: string } | { kind: "list"; items: string[] };

/** Typed text as paragraphs and lists: a line that begins with a dash is an item of a list. */
export function textBlocks(text: string): TextBlock[] {
  const blocks: TextBlock[] = [];
  for (const line of text.split(/\r?\n/).map((each) => each.trim())) {
    if (line === "") continue;
    const item = /^[-\u2013\u2022*]\s+(.*)$/.exec(line)?.[1];
    const last = blocks.at(-1);
    if (item === undefined) blocks.push({ kind: "paragraph", text: line });
    else if (last?.kind === "list") last.items.push(item);
    else blocks.push({ kind: "list", items: [item] });
  }
  return blocks;
}

/** The normalised answer that opens a notice: what is hashed is the ISO day and the notice it belongs to. */
export const answerText = (noticeId: string, isoDay: string) => `${noticeId} ${isoDay}`;
