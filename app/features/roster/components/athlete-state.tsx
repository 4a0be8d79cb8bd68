import { availabilityWords, restrictionWords, sentenceCase } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { type Spot, SpotMark } from "~/ui";
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

const spots: Record<AvailabilityState, Spot> = { full: "filled", modified: "half", unavailable: "crossed" };

/** "as of 15:10" today, with the day before it otherwise. */
function asOfWords(asOf: Date, timeZone: string) {
  return new Intl.DateTimeFormat("en-GB", {
    timeZone,
    day: "numeric",
    month: "short",
    hour: "2-digit",
    minute: "2-digit",
  }).format(asOf);
}

/** What the athlete may do today, in shape and words; never why. */
export function AthleteState({ state, timeZone }: Props) {
  if (!state) return null;
  const details = state.restrictions.map((restriction) =>
    restriction === "minutes_limit" && state.minutesLimit
      ? `at most ${state.minutesLimit} minutes`
      : restrictionWords[restriction],
  );
  const lines = [
    details.length > 0 ? sentenceCase(details.join(", ")) : "",
    state.expectedOn ? `Expected back on ${formatDay(state.expectedOn, "weekday")}, which may change` : "",
    state.asOf ? `As of ${asOfWords(state.asOf, timeZone)}` : "",
  ].filter(Boolean);
  return (
    <p className="text-lg">
      <SpotMark spot={spots[state.state]} detail={lines.length > 0 ? `${lines.join(". ")}.` : undefined}>
        {sentenceCase(availabilityWords[state.state])} today
      </SpotMark>
    </p>
  );
}
