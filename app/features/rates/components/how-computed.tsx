import { Disclosure } from "~/ui";
import { coverageFloor, coverageWarning, stableFrom } from "../coverage";
import type { RatesFilters } from "../filters";

import { sessionsNote } from "../sentence";

const definitions: Record<RatesFilters["injuries"], string> = {
  "time-loss":
    "Time loss of 1 day or more: from the day after onset to the day before full availability. The onset is day 0; an open injury counts to today.",
  "medical-attention": "Every injury that needed attention, with time loss or without.",
};

const share = (value: number) => `${Math.round(value * 100)} %`;

/** Case definition and method, in the words a report would use. */
export function HowComputed({ filters }: { filters: RatesFilters }) {
  return (
    <Disclosure summary="How this is computed">
      <div className="max-w-prose space-y-3">
        <p>
          <strong className="font-semibold">Case definition.</strong> {definitions[filters.injuries]} From{" "}
          {sessionsNote[filters.sessions]}. First injuries, re-injuries, injuries of the same area and at
          another site count; exacerbations and injuries outside organised sport do not. Several diagnoses of
          one event count once. A sudden injury enters only from a session whose exposure counts, a gradual
          one from a week in which its team has exposure.
        </p>
        <p>
          <strong className="font-semibold">Exposure.</strong> One athlete taking part in one session, with
          minutes, is one athlete-exposure. A headcount is spread equally over that day's roster less the
          unavailable; what exceeds the roster is of unknown athletes. A match with neither gives estimated
          hours, players on the field times regulation minutes, spread the same way, and never
          athlete-exposures. Athlete-exposures and hours are never mixed in one rate. Ages are those on the
          day of the session and of the onset. Contact, movement, body area, side and tissue belong to
          injuries alone: each of their groups has the whole exposure under it.
        </p>
        <p>
          <strong className="font-semibold">Intervals.</strong> 95 %, exact (Poisson). The ratio of two rates
          has a mid-P interval. Athletes of one team share their risks: a comparison therefore shows beside it
          an interval that allows for teams (sandwich, clustered by team). With fewer than 40 teams even this
          one is optimistic. A rate from fewer than {stableFrom} injuries is marked unstable.
        </p>
        <p>
          <strong className="font-semibold">Coverage.</strong> The share of held sessions whose participations
          are recorded. Under {share(coverageWarning)} the rates carry a warning, under {share(coverageFloor)}{" "}
          they are withheld. A team that has entered no injury in a season reads “not reported”, never 0, and
          its exposure counts only in the weeks that somebody confirmed as without a new injury. A team that
          has entered an injury reports, and all its exposure counts.
        </p>
      </div>
    </Disclosure>
  );
}
