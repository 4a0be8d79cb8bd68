import { z } from "zod";
import type { FieldValue } from "~/platform/merge-fields";

const fieldValue: z.ZodType<FieldValue> = z.lazy(() =>
  z.union([z.null(), z.boolean(), z.number(), z.string().max(2000), z.record(z.string(), fieldValue)]),
);

const change = z.object({ base: fieldValue, value: fieldValue });

/** Fields by name. One operation holds at most a whole team's. */
const fields = z
  .record(z.string().max(80), change)
  .refine((all) => Object.keys(all).length <= 300, "At most 300 fields in one operation.");

const common = { id: z.uuid(), sessionId: z.uuid(), fields };

/**
 * One operation of a phone: a client-made id, the session, and the fields with the value the phone saw (`base`) and the
 * one chosen (`value`). Fields by kind:
 * - `add-session` (sessionId is client-made, every base null): teamId, day, startTime, kind, plannedMinutes, surface,
 *   venueId, and `another` true for a second session of the same team, day and kind;
 * - `session`: state "held" or "abandoned", actualMinutes, abandonedAfter;
 * - `cancel`: cancelReason;
 * - `attendance`: `athlete:<id>` with `{ presence, minutes }` or null;
 * - `headcount`: headcount, minutes;
 * - `warm-up`: `block:<name>`, `athlete:<id>`, skipReason, skipNote, minutes, ledBy.
 */
export const operationSchema = z.discriminatedUnion("kind", [
  z.object({ kind: z.literal("add-session"), ...common }),
  z.object({ kind: z.literal("session"), ...common }),
  z.object({ kind: z.literal("cancel"), ...common }),
  z.object({ kind: z.literal("attendance"), ...common }),
  z.object({ kind: z.literal("headcount"), ...common }),
  z.object({ kind: z.literal("warm-up"), ...common }),
]);
export type Operation = z.output<typeof operationSchema>;

export const syncSchema = z.object({ operations: z.array(operationSchema).min(1).max(200) });
