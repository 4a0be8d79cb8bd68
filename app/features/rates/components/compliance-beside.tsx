import { useMemo } from "react";
import { formatTick, type NiceScale, RateAxis, RateBar, Region } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import type { TeamWarmUps } from "../rates.server";

/** Halves and quarters are lines. */
const scale: NiceScale = { max: 100, ticks: [0, 25, 50, 75, 100] };

const percentOf = (value: number) => Math.round(value * 100);

const columns: Column<TeamWarmUps>[] = [
  { id: "team", header: "Team", rowHeader: true, value: ({ name }) => name },
  {
    id: "done",
    header: "Done",
    numeric: true,
    value: ({ ofHeld }) => ofHeld.successes,
    cell: ({ ofHeld }) => ofHeld.successes.toLocaleString("en-GB"),
  },
  {
    id: "held",
    header: "Held",
    numeric: true,
    value: ({ ofHeld }) => ofHeld.trials,
    cell: ({ ofHeld }) => ofHeld.trials.toLocaleString("en-GB"),
  },
  {
    id: "share",
    header: "Of held",
    numeric: true,
    value: ({ ofHeld }) => ofHeld.estimate?.estimate ?? null,
    cell: ({ ofHeld }) => (ofHeld.estimate ? `${percentOf(ofHeld.estimate.estimate)} %` : "–"),
  },
  {
    id: "recorded",
    header: "Of recorded",
    numeric: true,
    value: ({ ofRecorded }) => ofRecorded.estimate?.estimate ?? null,
    cell: ({ ofRecorded }) =>
      ofRecorded.estimate
        ? `${percentOf(ofRecorded.estimate.estimate)} % of ${ofRecorded.trials.toLocaleString("en-GB")}`
        : "–",
  },
  {
    id: "bar",
    header: "Per cent of held sessions",
    axis: true,
    headerPicture: (
      <RateAxis scale={scale} label={`Per cent of held sessions, from 0 to ${formatTick(scale.max)}`} />
    ),
    cell: ({ ofHeld }) => (
      <div>
        {ofHeld.estimate ? (
          <RateBar
            rate={{
              estimate: ofHeld.estimate.estimate * 100,
              lower: ofHeld.estimate.lower * 100,
              upper: ofHeld.estimate.upper * 100,
            }}
            scale={scale}
            series={3}
            decimals={0}
            unit="per cent of held sessions, 95 % Wilson interval"
          />
        ) : (
          <span className="text-soft">no session held</span>
        )}
      </div>
    ),
  },
];

/** Warm-up session compliance by team, to be read beside the injury rates. */
export function ComplianceBeside({ teams }: { teams: TeamWarmUps[] }) {
  const rows = useMemo(() => teams.filter(({ ofHeld }) => ofHeld.trials > 0), [teams]);
  if (teams.length === 0) return null;
  return (
    <Region heading="The warm-up beside it">
      <p className="max-w-prose text-soft">
        Session compliance: held sessions with the team's target share of blocks done. "Of held" counts a
        session without a record as not done. A team's compliance and its injuries are not a randomised
        comparison.
      </p>
      <DataTable
        captionHidden
        caption="Warm-up session compliance by team, with 95 % Wilson intervals"
        columns={columns}
        rows={rows}
        rowKey={({ id }) => id}
        sortParam="sort-warm-ups"
        empty="No session held yet."
      />
    </Region>
  );
}
