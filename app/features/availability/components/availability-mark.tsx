import { availabilityWords, restrictionWords, sentenceCase } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { type Spot, SpotMark } from "~/ui";
import type { AvailabilityState, Restriction } from "~db/schema/codes";

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

type Props = {
  state: AvailabilityState;
  limits?: Limits;
  /** ISO day on which full availability is expected. */
  expectedOn?: string | null;
};

/** A state by shape and word, with what a coach can act on under it. */
export function AvailabilityMark({ state, limits, expectedOn }: Props) {
  const detail = [
    limits ? limitWords(limits) : "",
    expectedOn && state !== "full" ? `full expected on ${formatDay(expectedOn, "day-month")}` : "",
  ]
    .filter(Boolean)
    .join("; ");
  return (
    <SpotMark spot={spotOf[state]} detail={detail || undefined}>
      {sentenceCase(availabilityWords[state])}
    </SpotMark>
  );
}
