import { z } from "zod";

/**
 * A fault to play: an HTTP status, `lost-answer` (the mail is taken, then the connection is cut, which is how
 * duplicates are born), or `no-answer` (nothing is taken and nothing is said until the sender gives up).
 */
export const faultSchema = z.object({
  count: z.number().int().min(1).max(10_000).default(1),
  fault: z.union([z.literal([403, 422, 429, 500, 503]), z.enum(["lost-answer", "no-answer"])]),
  /** Seconds in the `retry-after` header of a 429. */
  retryAfterSeconds: z.number().int().min(0).max(86_400).default(1),
});

export type Fault = z.input<typeof faultSchema>;

export type Faults = ReturnType<typeof createFaults>;

/** Faults waiting to be played, in order, and whether the service is down altogether. */
export function createFaults() {
  let waiting: z.output<typeof faultSchema>[] = [];
  let down = false;

  return {
    /** The next `count` sends meet this fault. */
    failNext(fault: Fault) {
      waiting.push(faultSchema.parse(fault));
    },
    /** While down, every call of the service's interface has its connection cut. */
    setDown(value: boolean) {
      down = value;
    },
    isDown() {
      return down;
    },
    /** Takes the fault that the current send meets, if any. */
    takeNext() {
      const next = waiting[0];
      if (!next) return undefined;
      next.count -= 1;
      if (next.count === 0) waiting = waiting.slice(1);
      return next;
    },
    clear() {
      waiting = [];
      down = false;
    },
  };
}
