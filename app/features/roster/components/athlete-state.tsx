import { asOfWords, spotOf, stateWords } from "~/features/availability/state-words";
import { availabilityWords, sentenceCase } from "~/features/vocabulary";
import { SpotMark } from "~/ui";
import type { AvailabilityState, Restriction } from "~db/schema/codes";

type Props = {
  state: {
    state: AvailabilityState;
    restrictions: readonly Restriction[];
    minutesLimit: number | null;
    expectedOn: string | null;
    asOf: Date | null;
  } | null;
  timeZone: string;
};

/** What the athlete may do today, in shape and words; never why. */
export function AthleteState({ state, timeZone }: Props) {
  if (!state) return null;
  const detail = stateWords(state, asOfWords(state.asOf, timeZone));
  return (
    <p className="text-lg">
      <SpotMark spot={spotOf[state.state]} detail={detail ? `${detail}.` : undefined}>
        {sentenceCase(availabilityWords[state.state])} today
      </SpotMark>
    </p>
  );
}
