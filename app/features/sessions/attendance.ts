import type { FieldValue } from "~/platform/merge-fields";
import type { AvailabilityState, Presence, Restriction } from "~db/schema/codes";

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
