import { z } from "zod";
import { parseDay } from "~/platform/days";
import { presences, sessionKinds, surfaces } from "~db/schema/codes";

/** An empty field of a form is nothing. */
const orNothing = <T extends z.ZodType>(inner: T) =>
  z.preprocess((value) => (value === "" || value === undefined ? null : value), inner.nullable());

const isoDay = /^\d{4}-\d{2}-\d{2}$/;

/** A day as a person writes it; figures are read day first. */
export const typedDay = z
  .string("Enter the day, such as 27 3 2026.")
  .trim()
  .min(1, "Enter the day, such as 27 3 2026.")
  .transform((text, context) => {
    const parsed = parseDay(text, isoDay.test(text) ? undefined : "day-month-year");
    if (parsed.ok) return parsed.day;
    context.addIssue({ code: "custom", message: parsed.reason });
    return z.NEVER;
  });

export const typedTime = orNothing(
  z
    .string()
    .trim()
    .regex(/^([01]?\d|2[0-3])[:.]?[0-5]\d$/, "Enter a time between 00:00 and 23:59, such as 17:30.")
    .transform((text) => {
      const digits = text.replace(/\D/g, "").padStart(4, "0");
      return `${digits.slice(0, 2)}:${digits.slice(2)}`;
    }),
);

const wholeNumber = "Enter whole minutes, such as 90.";
const minutesNumber = z.coerce
  .number(wholeNumber)
  .int(wholeNumber)
  .min(1, "Enter at least 1 minute.")
  .max(600, "A session lasts at most 600 minutes.");

/** Minutes of a session: whole, 1 to 600. */
export const sessionMinutes = orNothing(minutesNumber);

/** Minutes of one athlete: 0 to 600, halves and quarters allowed. */
const athleteMinutes = z.coerce
  .number("Enter minutes, such as 45.")
  .min(0, "Minutes cannot be negative.")
  .max(600, "Enter at most 600 minutes.")
  .transform((minutes) => Math.round(minutes * 100) / 100);

export const newSessionSchema = z.object({
  teamId: z.uuid("Choose a team."),
  day: typedDay,
  startTime: typedTime,
  kind: z.enum(sessionKinds, "Choose what kind of session it is."),
  plannedMinutes: sessionMinutes,
  surface: orNothing(z.enum(surfaces, "Choose a surface of the list.")),
  venueId: orNothing(z.uuid("Choose a venue of the list.")),
});
export type NewSessionInput = z.output<typeof newSessionSchema>;

/** The form of the session page: what was planned. */
export const editSessionSchema = newSessionSchema.omit({ teamId: true });

export const holdSchema = z.object({ actualMinutes: sessionMinutes });
export const abandonSchema = z.object({ abandonedAfter: minutesNumber });
export const cancelSchema = z.object({
  cancelReason: z
    .string("Say why it was cancelled.")
    .trim()
    .min(1, "Say why it was cancelled, in a few words.")
    .max(200, "Use at most 200 characters."),
});

export const headcountSchema = z.object({
  headcount: z.coerce
    .number("Enter how many athletes took part.")
    .int("Enter a whole number of athletes.")
    .min(1, "Enter at least 1 athlete. If nobody came, cancel the session.")
    .max(200, "Enter at most 200 athletes."),
  minutes: minutesNumber,
});

/** One athlete's part in a session. Only who took part has minutes. */
export const participationSchema = z
  .object({ presence: z.enum(presences), minutes: athleteMinutes })
  .transform(({ presence, minutes }) => ({ presence, minutes: presence === "took_part" ? minutes : 0 }))
  .refine(({ presence, minutes }) => presence !== "took_part" || minutes > 0, {
    path: ["minutes"],
    message: 'Enter minutes above 0, or choose "present only".',
  });
export type ParticipationInput = z.output<typeof participationSchema>;
