import { z } from "zod";
import { list } from "~/platform/form-fields";

const longest = 2000;

const words = (message: string) =>
  z.string().trim().min(1, message).max(longest, `Use at most ${longest} characters.`);

/** A phone number as people write it. */
export const phone = z
  .string()
  .trim()
  .max(40, "Use at most 40 characters.")
  .refine(
    (text) => /^[+()\d\s./-]+$/.test(text) && text.replace(/\D/g, "").length >= 3,
    "Enter a phone number, such as 01632 960100.",
  );

/** The words that stand behind the link. */
export const wordsSchema = z.object({
  happened: words("Say in plain words what happened."),
  done: words("Say what was done, even if it was only watching."),
  doNow: words("Say what the family should do now."),
  watchFor: words("Say what to watch for."),
  emergency: words("Say when to call the emergency services."),
  callName: z
    .string()
    .trim()
    .min(1, "Say whom the family should ask for.")
    .max(60, "Use at most 60 characters."),
  callPhone: phone,
});

const callOutcomes = ["reached", "no_answer"] as const;
export type CallOutcome = (typeof callOutcomes)[number];

const told = z.string().trim().max(longest, `Use at most ${longest} characters.`).default("");

/** A call that was made: to whom, what came of it, what they were told. */
const callSchema = z.object({
  callGuardian: z.uuid("Say whom you phoned."),
  callOutcome: z.enum(callOutcomes, "Say whether you spoke with them."),
  callTold: told,
});

const toldWhat = (call: { callOutcome: CallOutcome; callTold: string }) =>
  call.callOutcome === "no_answer" || call.callTold.length > 0;
const toldNothing = "Write down what you told them: it is the record of the call.";

/** A call in the form that sends: asked for first where it is urgent, else left out. */
export const sendSchema = wordsSchema
  .extend({
    operation: z.uuid("Open the page again before sending."),
    urgency: z.enum(["routine", "urgent"], "Say whether it is urgent."),
    /** Guardians of whom none was told of this injury before. */
    tell: list(z.uuid()),
    /** Guardians who were told already and get a second notice on purpose. */
    again: list(z.uuid()),
    callGuardian: z.preprocess((value) => (value === "" ? undefined : value), z.uuid().optional()),
    callOutcome: z.preprocess((value) => (value === "" ? undefined : value), z.enum(callOutcomes).optional()),
    callTold: told,
  })
  .superRefine((input, context) => {
    const issue = (path: string, message: string) =>
      context.addIssue({ code: "custom", path: [path], message });
    const begun = input.callGuardian || input.callOutcome || input.callTold;
    if (input.urgency === "urgent" || begun) {
      const called = callSchema.safeParse(input);
      for (const { path, message } of called.error?.issues ?? []) issue(String(path[0]), message);
      if (called.success && !toldWhat(called.data)) issue("callTold", toldNothing);
    }
  });
export type SendInput = z.output<typeof sendSchema>;

/** A call logged on the page of a notice, whose guardian is known. */
export const logCallSchema = callSchema
  .omit({ callGuardian: true })
  .extend({ operation: z.uuid("Open the page again before saving.") })
  .refine(toldWhat, { path: ["callTold"], message: toldNothing });

export const resendSchema = z.object({ operation: z.uuid("Open the page again before sending.") });

/** What a guardian may do behind the link. */
export const guardianIntents = ["answer", "acknowledge", "ask-call", "fresh-link", "stop-mail"] as const;
export const guardianIntentSchema = z.object({ intent: z.enum(guardianIntents) });

export const askCallSchema = z.object({
  when: z.string().trim().max(200, "Use at most 200 characters.").default(""),
});
