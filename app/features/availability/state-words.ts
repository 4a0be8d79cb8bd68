import { formatDay } from "~/platform/days";
import type { Spot } from "~/ui";
import type { AvailabilityState, Restriction } from "~db/schema/codes";
import { availabilityWords, restrictionWords, sentenceCase } from "../vocabulary";

/** The shape of a state: told by shape and word, never by colour. */
export const spotOf: Record<AvailabilityState, Spot> = {
  full: "filled",
  modified: "half",
  unavailable: "crossed",
};

type Limits = { restrictions: readonly Restriction[]; minutesLimit: number | null };

/** "no cutting, no contact, at most 30 minutes"; empty without limits. */
export function limitWords({ restrictions, minutesLimit }: Limits): string {
  const words = restrictions
    .filter((code) => code !== "minutes_limit" || minutesLimit === null)
    .map((code) => restrictionWords[code]);
  return [...words, ...(minutesLimit === null ? [] : [`at most ${minutesLimit} minutes`])].join(", ");
}

/**
 * A state in words a coach can act on: "Modified: straight running only. Expected back 12 Dec. As of 15:10".
 * Empty for full availability. One place, so that no two pages say it differently.
 * @param asOf the local time of the last entry in words
 */
export function stateWords(
  athlete: Limits & { state: AvailabilityState; expectedOn: string | null },
  asOf: string | null,
): string {
  if (athlete.state === "full") return "";
  const limits = limitWords(athlete);
  const state = sentenceCase(availabilityWords[athlete.state]);
  const parts = [limits ? `${state}: ${limits}` : state];
  if (athlete.expectedOn) parts.push(`Expected back ${formatDay(athlete.expectedOn, "day-month")}`);
  if (asOf) parts.push(`As of ${asOf}`);
  return parts.join(". ");
}

/** "1 Dec, 15:10" in the organisation's time zone, or null. */
export function asOfWords(asOf: Date | null, timeZone: string): string | null {
  if (!asOf) return null;
  return new Intl.DateTimeFormat("en-GB", {
    timeZone,
    day: "numeric",
    month: "short",
    hour: "2-digit",
    minute: "2-digit",
  }).format(asOf);
}
