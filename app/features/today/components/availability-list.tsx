import { asOfWords, spotOf, stateWords } from "~/features/availability/state-words";
import { SpotMark } from "~/ui";
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

/** Who is not fully available today: shape, name, and what they may do; never why. */
export function AvailabilityList({ athletes, timeZone }: { athletes: LimitedAthlete[]; timeZone: string }) {
  return (
    <ul className="border-0">
      {athletes.map((athlete) => (
        <li key={athlete.athleteId} className="border-0 border-b border-line py-2.5">
          <SpotMark
            spot={spotOf[athlete.state]}
            detail={`${stateWords(athlete, asOfWords(athlete.asOf, timeZone))}.`}
          >
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
