import { z } from "zod";
import { optionalDay, optionalText, ticked, typedDay } from "~/platform/form-fields";
import { languages, legs, relations, sexes } from "~db/schema/codes";

export const athleteSchema = z.object({
  givenName: z.string().trim().min(1, "Enter the given name.").max(80, "Use at most 80 characters."),
  familyName: z.string().trim().min(1, "Enter the family name.").max(80, "Use at most 80 characters."),
  number: optionalText(40),
  dateOfBirth: optionalDay,
  sex: z.enum(sexes, "Choose one; “not stated” is an answer too."),
  dominantLeg: z.enum(legs).default("unknown"),
  visitor: ticked,
  researchConsent: ticked,
});

/** A new athlete joins a team from a day, or is recorded as a visitor without one. */
export const newAthleteSchema = athleteSchema
  .extend({ team: z.union([z.uuid(), z.literal("")]).default(""), fromDay: optionalDay })
  .superRefine(({ team, visitor, fromDay }, context) => {
    if (!team && !visitor)
      context.addIssue({
        code: "custom",
        path: ["team"],
        message: "Choose the team, or tick that this is a visitor or a try-out.",
      });
    if (team && !fromDay)
      context.addIssue({ code: "custom", path: ["fromDay"], message: "Enter the day of joining the team." });
  });

/** The id under which a form is carried out once, however often it arrives. */
export const operationSchema = z.uuid("This form is not complete. Open it again.");

export const joinTeamSchema = z
  .object({ team: z.uuid("Choose a team."), fromDay: typedDay(), toDay: optionalDay })
  .refine(({ fromDay, toDay }) => !toDay || toDay >= fromDay, {
    path: ["toDay"],
    message: "The last day lies before the first.",
  });

export const leaveTeamSchema = z.object({ entry: z.uuid(), toDay: typedDay() });

export const guardianSchema = z
  .object({
    name: z.string().trim().min(1, "Enter the guardian's name.").max(120, "Use at most 120 characters."),
    email: z
      .string()
      .trim()
      .toLowerCase()
      .optional()
      .transform((text) => text || null)
      .pipe(z.nullable(z.email("Enter an e-mail address, such as home@example.org, or leave it empty."))),
    phone: optionalText(40),
    language: z.enum(languages).default("en"),
    relation: z.enum(relations).default("parent"),
    phoneOrder: z.coerce.number("Enter 1 for whom to call first.").int().min(1).max(9).default(1),
    mayBeTold: ticked,
    mayDecide: ticked,
    wantsEmail: ticked,
    legalLimits: optionalText(2000),
    limitsReviewOn: optionalDay,
  })
  .refine(({ email, phone }) => email || phone, {
    path: ["phone"],
    message: "Enter a phone number or an e-mail address: a guardian who cannot be reached cannot be told.",
  });

export const alertSchema = z.object({
  text: z
    .string()
    .trim()
    .min(1, "Say what a coach must do, such as: carries adrenaline, use it, call an ambulance.")
    .max(200, "Use at most 200 characters: a coach reads it at the pitch."),
  agreedWith: z.string().trim().min(1, "Enter who in the family agreed that coaches see this.").max(120),
});

/** On a team today; on none; visitors; archived. */
export const rosterViews = ["current", "no-team", "visitors", "archived"] as const;

/** What the roster list and the athlete search ask for. */
export const rosterQuerySchema = z.object({
  q: z.string().trim().max(100).default(""),
  page: z.coerce.number().int().min(1).catch(1).default(1),
  show: z.enum(rosterViews).catch("current").default("current"),
});
