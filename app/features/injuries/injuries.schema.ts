import { z } from "zod";
import { pathologiesOf } from "~/features/vocabulary";
import { list, optionalDay, typedDay } from "~/platform/form-fields";
import {
  bodyAreas,
  certainties,
  contacts,
  encounterKinds,
  firstCare,
  movements,
  onsets,
  pathologies,
  referrals,
  sides,
  signs,
  subsequences,
  surfaces,
  tissues,
} from "~db/schema/codes";
import { hasSides } from "./gaps";

/** A choice that may be left open: nothing or an empty answer is null. */
const choice = <const T extends readonly [string, ...string[]]>(codes: T, message?: string) =>
  z
    .union([z.literal(""), z.enum(codes)], message)
    .optional()
    .transform((value) => (value ? (value as T[number]) : null));

const yesNo = choice(["yes", "no"]).transform((answer) => (answer === null ? null : answer === "yes"));

const words = (most: number) =>
  z
    .string()
    .trim()
    .max(most, `Use at most ${most} characters.`)
    .optional()
    .transform((text) => text || null);

const wholeNumber = (most: number, what: string) =>
  z
    .string()
    .trim()
    .optional()
    .transform((text, ctx) => {
      if (!text) return null;
      const value = Number(text);
      if (Number.isInteger(value) && value >= 0 && value <= most) return value;
      ctx.addIssue({ code: "custom", message: `Write ${what} as a whole number from 0 to ${most}.` });
      return z.NEVER;
    });

/** A clock time as people type it: 17:30, 17.30, 1730 or 9:05. */
export const optionalTime = z
  .string()
  .trim()
  .optional()
  .transform((text, ctx) => {
    if (!text) return null;
    const match = /^(\d{1,2})[:.h]?(\d{2})(?::\d{2})?$/.exec(text);
    const [hours, minutes] = [Number(match?.[1]), Number(match?.[2])];
    if (match && hours < 24 && minutes < 60)
      return `${String(hours).padStart(2, "0")}:${String(minutes).padStart(2, "0")}`;
    ctx.addIssue({ code: "custom", message: "Write the time like 17:30." });
    return z.NEVER;
  });

const operation = z.uuid("This form is not complete. Open it again.");

/** The area may come from the short list of chips or, with "another", from the long list. */
const area = {
  bodyArea: z
    .union([z.enum(bodyAreas), z.literal("another"), z.literal("")], "Choose the body area.")
    .optional(),
  otherArea: choice(bodyAreas),
};
const movement = { movement: choice([...movements, "another"]), otherMovement: choice(movements) };
const seenSigns = {
  signs: list(z.enum(signs)),
  emergencySigns: list(z.enum(signs)),
  headSigns: list(z.enum(signs)),
};

const nowFields = {
  athlete: z.uuid("Search for the athlete and choose one from the list."),
  /** `session:<id>`, `today` (the server finds the session), `earlier` or `outside`. */
  when: z
    .string("Choose when it happened.")
    .regex(/^(session:[0-9a-f-]{36}|today|earlier|outside)$/, "Choose when it happened."),
  day: optionalDay,
  time: optionalTime,
  ...area,
  side: choice(sides),
  suspectedConcussion: yesNo,
  couldContinue: yesNo,
  ...seenSigns,
};

type NowInput = z.output<z.ZodObject<typeof nowFields>>;

function checkNow(input: NowInput, ctx: z.RefinementCtx) {
  const issue = (path: string, message: string) => ctx.addIssue({ code: "custom", path: [path], message });
  const bodyArea = areaOf(input);
  if (!bodyArea) issue(input.bodyArea === "another" ? "otherArea" : "bodyArea", "Choose the body area.");
  if (bodyArea && hasSides(bodyArea) && input.side === null)
    issue("side", "Choose the side; “not known” can be corrected later.");
  if (input.when === "earlier" && input.day === null) issue("day", "Enter the day on which it happened.");
  if (input.when !== "outside" && input.couldContinue === null)
    issue("couldContinue", "Say whether they could continue. It decides whether they are unavailable now.");
  if (bodyArea === "head" && input.suspectedConcussion === null)
    issue("suspectedConcussion", "Say whether a concussion is suspected. When in doubt, answer yes.");
}

const areaOf = ({ bodyArea, otherArea }: Pick<NowInput, "bodyArea" | "otherArea">) =>
  bodyArea === "another" || !bodyArea ? otherArea : bodyArea;

/** The first group with its chips joined to the record's own fields. */
function joinNow<T extends NowInput>(input: T) {
  const { bodyArea, otherArea, signs: joint, emergencySigns, headSigns, side, ...rest } = input;
  const place = areaOf({ bodyArea, otherArea }) ?? "unspecified";
  return {
    ...rest,
    bodyArea: place,
    side: side ?? (hasSides(place) ? ("unknown" as const) : ("none" as const)),
    suspectedConcussion: input.suspectedConcussion ?? false,
    signs: [...new Set([...joint, ...emergencySigns, ...headSigns])],
  };
}

/** "Log an injury": the first group, which saves alone. */
export const logSchema = z
  .object({ operation, report: z.union([z.uuid(), z.literal("")]).optional(), ...nowFields, ...movement })
  .superRefine(checkNow)
  .transform((input) => {
    const { movement: chip, otherMovement, report, ...rest } = joinNow(input);
    return {
      ...rest,
      movement: chip === "another" || chip === null ? otherMovement : chip,
      reportId: report || null,
    };
  });
export type LogInput = z.output<typeof logSchema>;

/** A coach's report from the phone. */
export const reportSchema = z
  .object({
    operation,
    ...nowFields,
    phoned: words(400),
    note: words(1000),
  })
  .superRefine(checkNow)
  .transform(joinNow);
export type ReportInput = z.output<typeof reportSchema>;

/** `tissue:pathology`, so that a pair that does not belong together cannot be chosen. */
const diagnosisPair = z
  .string()
  .optional()
  .transform((text, ctx) => {
    if (!text) return null;
    const [tissueText, pathologyText] = text.split(":");
    const tissue = tissues.find((code) => code === tissueText);
    const pathology = pathologies.find((code) => code === pathologyText);
    if (tissue && pathology && pathologiesOf[tissue].includes(pathology)) return { tissue, pathology };
    ctx.addIssue({ code: "custom", message: "Choose tissue and pathology from the list." });
    return z.NEVER;
  });

export const furtherDiagnoses = [1, 2, 3] as const;

/** The whole record: everything that could wait, and corrections of the first group. */
export const editSchema = z
  .object({
    operation,
    version: z.coerce.number("This form is not complete. Open it again.").int().min(1),
    day: typedDay("Enter the day of the onset."),
    time: optionalTime,
    /** A session id, `outside`, or empty: not known yet. */
    session: z.union([z.uuid(), z.literal("outside"), z.literal("")], "Choose the session."),
    bodyArea: z.enum(bodyAreas, "Choose the body area."),
    side: z.enum(sides, "Choose the side."),
    suspectedConcussion: yesNo.transform((answer) => answer ?? false),
    couldContinue: yesNo,
    onset: choice(onsets),
    contact: choice(contacts),
    movement: choice(movements),
    minuteOfPlay: wholeNumber(240, "the minute"),
    surface: choice(surfaces),
    footwear: words(120),
    warmedUp: yesNo,
    ...seenSigns,
    swellingNoticed: words(120),
    firstCare: list(z.enum(firstCare)),
    referredTo: list(z.enum(referrals)),
    phoned: words(400),
    diagnosisPair,
    diagnosis: words(400),
    certainty: choice(certainties),
    surgery: yesNo,
    surgeryDay: optionalDay,
    description: words(4000),
    subsequence: choice(subsequences),
    subsequentTo: z.union([z.uuid(), z.literal("")]).optional(),
    closedOn: optionalDay,
    further1: diagnosisPair,
    further1Words: words(400),
    further1Certainty: choice(certainties),
    further2: diagnosisPair,
    further2Words: words(400),
    further2Certainty: choice(certainties),
    further3: diagnosisPair,
    further3Words: words(400),
    further3Certainty: choice(certainties),
  })
  .superRefine((input, ctx) => {
    const issue = (path: string, message: string) => ctx.addIssue({ code: "custom", path: [path], message });
    if (input.closedOn && input.closedOn < input.day)
      issue("closedOn", "An injury cannot be closed before its onset.");
    if (input.surgeryDay && input.surgery !== true)
      issue("surgery", "A day of surgery is given: answer yes, or clear the day.");
    if (input.certainty !== null && input.diagnosisPair === null)
      issue("diagnosisPair", "Choose tissue and pathology, or leave the certainty open as well.");
    for (const n of furtherDiagnoses)
      if (input[`further${n}`] && input[`further${n}Certainty`] === null)
        issue(`further${n}Certainty`, "Say how certain this diagnosis is.");
      else if (!input[`further${n}`] && input[`further${n}Words`])
        issue(`further${n}`, "Choose tissue and pathology for this diagnosis.");
  });
export type EditInput = z.output<typeof editSchema>;

export const noteSchema = z.object({
  operation,
  text: z.string().trim().min(1, "Write the note first.").max(4000, "Use at most 4000 characters."),
});

/** Why a record was made in error. Codes, since the reason stands in clear beside the record. */
export const withdrawReasons = ["wrong_athlete", "entered_twice", "not_an_injury", "trial_entry"] as const;
export const withdrawSchema = z.object({
  version: z.coerce.number().int().min(1),
  reason: z.enum(withdrawReasons, "Choose why the record is withdrawn."),
});

/** What becomes of a coach's report that is no injury. */
export const closeReportSchema = z.object({
  reason: z
    .string()
    .trim()
    .min(1, "Write why this report becomes no injury.")
    .max(1000, "Use at most 1000 characters."),
  availability: z.enum(["full", "keep"], "Choose what holds for the athlete from today."),
});

export const encounterSchema = z.object({
  operation,
  athlete: z.uuid("Search for the athlete and choose one from the list."),
  kind: z.enum(encounterKinds, "Choose what it was."),
  minutes: wholeNumber(600, "the minutes"),
  note: words(2000),
});
export type EncounterInput = z.output<typeof encounterSchema>;

/** Filters of the list, in its address. What is unknown there is ignored, so that an old link still opens. */
export const listFilterSchema = z.object({
  state: z.enum(["all", "open", "closed"]).catch("all").default("all"),
  area: z
    .enum(["", ...bodyAreas])
    .catch("")
    .default(""),
  severity: z.enum(["", "0", "1-7", "8-28", ">28"]).catch("").default(""),
  q: z.string().trim().max(100).catch("").default(""),
  /** One athlete's injuries of every season. */
  athlete: z
    .union([z.uuid(), z.literal("")])
    .catch("")
    .default(""),
});
export type ListFilter = z.output<typeof listFilterSchema>;
