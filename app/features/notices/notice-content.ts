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

/** The normalised answer that opens a notice: what is hashed is the ISO day and the notice it belongs to. */
export const answerText = (noticeId: string, isoDay: string) => `${noticeId} ${isoDay}`;
