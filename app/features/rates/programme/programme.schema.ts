import { z } from "zod";
import { bodyAreas } from "~db/schema/codes";
import { planComparisons, planContacts, planDefinitions, planOnsets } from "~db/schema/evaluation";

const choice = <const T extends readonly [string, ...string[]]>(values: T) =>
  z.enum(values, { error: "Choose one of the list." });

/** What the medical lead writes down before looking. `id` is made with the form, so that sending it twice records it once. */
export const planSchema = z.object({
  id: z.uuid().optional(),
  area: choice(["any", ...bodyAreas]),
  contact: choice(planContacts),
  onset: choice(planOnsets),
  caseDefinition: choice(planDefinitions),
  comparison: choice(planComparisons),
  words: z
    .string({ error: "Write the plan in a sentence or more." })
    .trim()
    .min(20, { error: "Write the plan in a sentence or more." })
    .max(4000, { error: "Keep the plan within 4000 characters." }),
});

export type PlanInput = z.output<typeof planSchema>;
