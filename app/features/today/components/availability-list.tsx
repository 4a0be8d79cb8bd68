import { availabilityWords, restrictionWords, sentenceCase } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { type Spot, SpotMark } from "~/ui";
import type { AvailabilityState, Restriction } from "~db/schema/codes";

export type LimitedAthlete = {
  athleteId: string;
  givenName: string;
  familyName: string;
  state: AvailabilityState;
  restrictions: readonly Restriction[];
  minutesLimit: number | null;
  expectedOn: string | null;
  asOf: Date | null;
  teams: { id: string; name: string }[];
};

const spots: Record<AvailabilityState, Spot> = { full: "filled", modified: "half", unavailable: "crossed" };

/** What a coach may act on: the restrictions in words, when full availability is expected, and as of when. */
export function stateDetails(
  athlete: Omit<LimitedAthlete, "givenName" | "familyName" | "athleteId">,
  timeZone: string,
) {
  const words = athlete.restrictions.map((restriction) =>
    restriction === "minutes_limit" && athlete.minutesLimit
      ? `at most ${athlete.minutesLimit} minutes`
      : restrictionWords[restriction],
  );
  const clock = athlete.asOf
    ? new Intl.DateTimeFormat("en-GB", {
        timeZone,
        day: "numeric",
        month: "short",
        hour: "2-digit",
        minute: "2-digit",
      }).format(athlete.asOf)
    : null;
  return [
    `${sentenceCase(availabilityWords[athlete.state])}${words.length > 0 ? `: ${words.join(", ")}` : ""}`,
    athlete.expectedOn ? `expected back ${formatDay(athlete.expectedOn, "day-month")}, may change` : null,
    clock ? `as of ${clock}` : null,
  ]
    .filter(Boolean)
    .join("; ");
}

/** Who is not fully available today: shape, name, and what they may do; never why. */
export function AvailabilityList({ athletes, timeZone }: { athletes: LimitedAthlete[]; timeZone: string }) {
  return (
    <ul className="border-0">
      {athletes.map((athlete) => (
        <li key={athlete.athleteId} className="border-0 border-b border-line py-2.5">
          <SpotMark spot={spots[athlete.state]} detail={stateDetails(athlete, timeZone)}>
            <span className="font-medium">
              {athlete.givenName} {athlete.familyName}
            </span>
            <span className="text-soft">
              {athlete.teams.length > 0 ? `, ${athlete.teams.map(({ name }) => name).join(", ")}` : ""}
            </span>
          </SpotMark>
        </li>
      ))}
    </ul>
  );
}
