import { z } from "zod";
import { parseDay } from "./days";

/** Fields that every form reads the same way. */

/** One or several values of a form field as a list; absent or empty gives none. */
export const list = <T extends z.ZodType>(item: T) =>
  z.preprocess(
    (value) => (value === undefined || value === "" ? [] : Array.isArray(value) ? value : [value]),
    z.array(item),
  );

function readDay(text: string, context: z.RefinementCtx) {
  const parsed = parseDay(text, "day-month-year");
  if (parsed.ok) return parsed.day;
  context.addIssue({ code: "custom", message: parsed.reason });
  return z.NEVER;
}

/** A day as people type it, required; gives an ISO date. */
export const typedDay = (missing = "Enter a day, such as 27 Mar 2014.") =>
  z.string(missing).trim().min(1, missing).transform(readDay);

/** A day as people type it, or nothing: an ISO date or null. */
export const optionalDay = z
  .string()
  .trim()
  .optional()
  .transform((text, context) => (text ? readDay(text, context) : null));

/** A text that may be left empty: null then. */
export const optionalText = (max: number) =>
  z
    .string()
    .trim()
    .max(max, `Use at most ${max} characters.`)
    .optional()
    .transform((text) => text || null);

/** A tick box: sent when ticked, absent when not. */
export const ticked = z
  .string()
  .optional()
  .transform((value) => value !== undefined && value !== "");
