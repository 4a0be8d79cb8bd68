import { z } from "zod";
import { list } from "~/platform/form-fields";
import { skipReasons, warmUpBlocks } from "~db/schema/codes";

/** Names of a warm-up's flat fields and what each may hold: one schema for the form and the sync interface. */
const uuidPattern = /^athlete:[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;
const blockFields: readonly string[] = warmUpBlocks.map((block) => `block:${block}`);

const values = {
  flag: z.boolean(),
  skipReason: z.enum(skipReasons, "Choose a reason of the list.").nullable(),
  skipNote: z.string().trim().max(200, "Use at most 200 characters.").nullable(),
  minutes: z
    .number()
    .int("Enter whole minutes, such as 15.")
    .min(1, "Enter at least 1 minute.")
    .max(90, "A warm-up lasts at most 90 minutes.")
    .nullable(),
  ledBy: z.string().trim().max(80, "Use at most 80 characters.").nullable(),
};

/** The schema of a field's value; undefined for a name that is no field of a warm-up. */
export function valueSchemaOf(field: string): z.ZodType | undefined {
  if (blockFields.includes(field) || uuidPattern.test(field)) return values.flag;
  if (field === "skipReason") return values.skipReason;
  if (field === "skipNote") return values.skipNote;
  if (field === "minutes") return values.minutes;
  if (field === "ledBy") return values.ledBy;
  return undefined;
}

const numberOrNothing = z.preprocess(
  (value) => (value === "" || value === undefined ? null : Number(value)),
  values.minutes,
);

/** The page's form as it is sent without script: everything at once. */
export const warmUpFormSchema = z.object({
  operationId: z.uuid(),
  blocks: list(z.enum(warmUpBlocks)),
  athletes: list(z.uuid()),
  minutes: numberOrNothing,
  ledBy: z.preprocess((value) => (value === "" || value === undefined ? null : value), values.ledBy),
});

export const skipFormSchema = z.object({
  operationId: z.uuid(),
  skipReason: z.enum(skipReasons, "Choose why it was not done."),
  skipNote: z.preprocess((value) => (value === "" || value === undefined ? null : value), values.skipNote),
});
