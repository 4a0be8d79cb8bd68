import { availabilityWords, sentenceCase } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { SpotMark } from "~/ui";
import type { AvailabilityState, Restriction } from "~db/schema/codes";
import { limitWords, spotOf } from "../state-words";

type Props = {
  state: AvailabilityState;
  limits?: { restrictions: readonly Restriction[]; minutesLimit: number | null };
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
