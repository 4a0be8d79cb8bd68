import { ageOn } from "~/statistics/ages";

/**
 * Who is told. The same rule runs when a notice is written, at the moment each mail is sent, and when its page is
 * opened: what changed in between counts.
 */

/** What decides for the athlete, whoever the guardian is. */
export type AthleteStanding = {
  /** ISO day; null while it is not on file. */
  dateOfBirth: string | null;
  /** A safeguarding hold that nobody has lifted. */
  onHold: boolean;
  /** The organisation's age in years from which the athlete decides alone. */
  ownDecisionAge: number;
};

/** What decides for one guardian of that athlete. */
export type GuardianStanding = {
  endedAt: Date | null;
  mayBeTold: boolean;
  /** Legal limits are on file for this guardian. */
  limited: boolean;
  email: string | null;
  wantsEmail: boolean;
  emailStoppedAt: Date | null;
};

/** Why nobody may tell this guardian anything. "withdrawn" is of the injury: it was recorded in error. */
export type Refusal = "withdrawn" | "on_hold" | "of_age" | "ended" | "limited" | "not_to_be_told";
/** Why this guardian is phoned and not written to. */
export type PhoneReason = "no_birth_date" | "no_address" | "email_not_wanted" | "email_stopped";
export type StopCode = Refusal | PhoneReason;

export type Told = { way: "email" } | { way: "phone"; why: PhoneReason } | { way: "nobody"; why: Refusal };

/** @param today the organisation's calendar date, ISO */
export function whoIsTold(athlete: AthleteStanding, guardian: GuardianStanding, today: string): Told {
  const { dateOfBirth } = athlete;
  const known = dateOfBirth !== null && dateOfBirth <= today;
  if (athlete.onHold) return { way: "nobody", why: "on_hold" };
  if (known && ageOn(dateOfBirth, today) >= athlete.ownDecisionAge) return { way: "nobody", why: "of_age" };
  if (guardian.endedAt) return { way: "nobody", why: "ended" };
  if (!guardian.mayBeTold) return { way: "nobody", why: guardian.limited ? "limited" : "not_to_be_told" };
  // Without a date of birth the page could not ask its question, and would open to whoever holds the link.
  if (!known) return { way: "phone", why: "no_birth_date" };
  if (!guardian.email) return { way: "phone", why: "no_address" };
  if (guardian.emailStoppedAt) return { way: "phone", why: "email_stopped" };
  if (!guardian.wantsEmail) return { way: "phone", why: "email_not_wanted" };
  return { way: "email" };
}

const stopCodes: Record<StopCode, true> = {
  withdrawn: true,
  on_hold: true,
  of_age: true,
  ended: true,
  limited: true,
  not_to_be_told: true,
  no_birth_date: true,
  no_address: true,
  email_not_wanted: true,
  email_stopped: true,
};
export const isStopCode = (code: string): code is StopCode => Object.hasOwn(stopCodes, code);

/** Why a guardian is not written to, for the clinical roles. Never shown to a guardian: it would speak of another. */
export function explainStop(code: StopCode, names: { athlete: string; ownDecisionAge: number }): string {
  switch (code) {
    case "withdrawn":
      return "The injury was recorded in error and withdrawn. Nothing more is sent about it.";
    case "on_hold":
      return `There is a safeguarding hold on ${names.athlete}. Nobody is told until a clinical role lifts it.`;
    case "of_age":
      return `${names.athlete} is ${names.ownDecisionAge} or older and decides alone who is told.`;
    case "ended":
      return "No longer a guardian on file.";
    case "limited":
      return "Legal limits are on file: may not be told.";
    case "not_to_be_told":
      return "Marked on file as not to be told.";
    case "no_birth_date":
      return `The date of birth of ${names.athlete} is missing, and it is what the page asks for. Phone, and add it to the roster.`;
    case "no_address":
      return "No e-mail address on file. Phone.";
    case "email_not_wanted":
      return "Wants no e-mail. Phone.";
    case "email_stopped":
      return "E-mail to this address came back. Phone, and ask for the right address.";
  }
}

/** The one word of the state in which nobody, or nobody by e-mail, is told. */
export const refusesEverybody = (code: StopCode) => code === "on_hold" || code === "of_age";

/** Legal limits of a guardian who may be told all the same: to be read before sending. */
export function limitsWarning(
  guardian: { limited: boolean; mayBeTold: boolean; limitsReviewOn: string | null },
  today: string,
): "read" | "review" | null {
  if (!guardian.limited || !guardian.mayBeTold) return null;
  return guardian.limitsReviewOn !== null && guardian.limitsReviewOn < today ? "review" : "read";
}
