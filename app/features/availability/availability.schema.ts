import { z } from "zod";
import { list, optionalDay, typedDay } from "~/platform/form-fields";
import { availabilityStates, restrictions } from "~db/schema/codes";

const minutes = z
  .string()
  .trim()
  .optional()
  .transform((text, ctx) => {
    if (!text) return null;
    const value = Number(text);
    if (Number.isInteger(value) && value >= 1 && value <= 240) return value;
    ctx.addIssue({ code: "custom", message: "Write the minutes as a whole number from 1 to 240." });
    return z.NEVER;
  });

/** A dated change of what an athlete may do: form, API and use case share it. */
export const availabilityChangeSchema = z
  .object({
    state: z.enum(availabilityStates, "Choose full, modified or unavailable."),
    restrictions: list(z.enum(restrictions)),
    minutesLimit: minutes,
    fromDay: typedDay("Enter the day from which this holds."),
    expectedOn: optionalDay,
  })
  .superRefine((change, ctx) => {
    const issue = (field: string, message: string) =>
      ctx.addIssue({ code: "custom", path: [field], message });
    if (change.state === "modified" && change.restrictions.length === 0 && change.minutesLimit === null)
      issue("restrictions", "Choose at least one restriction, so that the coach knows what to leave out.");
    if (change.restrictions.includes("minutes_limit") && change.minutesLimit === null)
      issue("minutesLimit", "Enter how many minutes are allowed.");
    if (change.expectedOn && change.expectedOn < change.fromDay)
      issue("expectedOn", "This day lies before the change begins. Choose a later day.");
  })
  .transform((change) => {
    // Full means full: nothing chosen before the state was changed to full may linger.
    if (change.state === "full") return { ...change, restrictions: [], minutesLimit: null, expectedOn: null };
    const kept = change.restrictions.filter((code) => code !== "minutes_limit");
    return {
      ...change,
      restrictions: change.minutesLimit === null ? kept : [...kept, "minutes_limit" as const],
    };
  });

export type AvailabilityChange = z.output<typeof availabilityChangeSchema>;
