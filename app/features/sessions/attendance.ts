import { formatDay } from "~/platform/days";
import type { FieldValue } from "~/platform/merge-fields";
import type { Spot } from "~/ui";
import type { AvailabilityState, Presence, Restriction } from "~db/schema/codes";
import { availabilityWords, restrictionWords, sentenceCase } from "../vocabulary";

/** What is known of one athlete's part in a session; null: nothing entered. */
export type Part = { presence: Presence; minutes: number };

/** One athlete as the attendance and the warm-up show them: state and restrictions, never why. */
export type ExpectedAthlete = {
  id: string;
  givenName: string;
  familyName: string;
  /** Not on the team's roster of the day. */
  guest: boolean;
  state: AvailabilityState;
  restrictions: Restriction[];
  minutesLimit: number | null;
  expectedOn: string | null;
  /** When the state was last entered, null when nothing limits the athlete. */
  asOf: Date | null;
  /** What the family lets coaches see and act on. */
  alerts: string[];
  part: Part | null;
};

/**
 * What "everyone available, full time" gives an athlete: full time, at most their minutes limit; null for the
 * unavailable, who are never preselected.
 */
export function proposePart(
  athlete: Pick<ExpectedAthlete, "state" | "minutesLimit">,
  fullTime: number,
): Part | null {
  if (athlete.state === "unavailable") return null;
  const minutes = Math.min(fullTime, athlete.minutesLimit ?? fullTime);
  return minutes > 0 ? { presence: "took_part", minutes } : null;
}

export const partField = (athleteId: string) => `athlete:${athleteId}`;

/** A part as a field's value. */
export const partValue = (part: Part | null): FieldValue =>
  part ? { presence: part.presence, minutes: part.minutes } : null;

/** The shape of a state: told by shape and word, never by colour. */
export const spotOf: Record<AvailabilityState, Spot> = {
  full: "filled",
  modified: "half",
  unavailable: "crossed",
};

/**
 * A state in words a coach can act on: "Modified: straight running only. Expected back 12 Dec. As of 15:10".
 * Empty for full availability.
 * @param asOf the local time of the last entry in words
 */
export function stateWords(
  athlete: Pick<ExpectedAthlete, "state" | "restrictions" | "minutesLimit" | "expectedOn">,
  asOf: string | null,
): string {
  if (athlete.state === "full") return "";
  const limits = athlete.restrictions.map((restriction) =>
    restriction === "minutes_limit" && athlete.minutesLimit !== null
      ? `at most ${athlete.minutesLimit} minutes`
      : restrictionWords[restriction],
  );
  const state = sentenceCase(availabilityWords[athlete.state]);
  const parts = [limits.length > 0 ? `${state}: ${limits.join(", ")}` : state];
  if (athlete.expectedOn) parts.push(`Expected back ${formatDay(athlete.expectedOn, "day-month")}`);
  if (asOf) parts.push(`As of ${asOf}`);
  return parts.join(". ");
}
