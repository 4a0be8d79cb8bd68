import { type Column, DataTable } from "~/ui/data-table";
import { formatCount } from "../figures";
import type { RateUnit } from "../filters";
import type { Rates } from "../rates";

type Line = { key: string; what: string; count: number };

const columns: Column<Line>[] = [
  { id: "what", header: "What and why", rowHeader: true, cell: ({ what }) => what },
  { id: "count", header: "Number", numeric: true, cell: ({ count }) => formatCount(count) },
];

const sessionWords: Record<keyof Rates["sessionsLeftOut"], string> = {
  withoutExposure: "Sessions held without any exposure recorded",
  estimated: "Matches with estimated hours, which give no athlete-exposures",
  unconfirmed: "Sessions whose time has passed and that nobody confirmed as held",
  cancelled: "Sessions cancelled",
};

/** What the rates leave out, counted, each with its reason. */
export function LeftOut({
  leftOut,
  sessionsLeftOut,
  silentExposure,
  unit,
}: Pick<Rates, "leftOut" | "sessionsLeftOut" | "silentExposure"> & { unit: RateUnit }) {
  const injuries = leftOut.map(({ reason, words, count }) => ({
    key: reason,
    what: `Injuries: ${words[0]?.toLowerCase()}${words.slice(1)}`,
    count,
  }));
  const sessions = Object.entries(sessionWords).map(([key, what]) => ({
    key,
    what,
    count: sessionsLeftOut[key as keyof Rates["sessionsLeftOut"]],
  }));
  const silent = {
    key: "silent",
    what: `${unit === "aes" ? "Athlete-exposures" : "Hours"} of teams that entered no injury and confirmed no week without one`,
    count: silentExposure,
  };
  return (
    <div className="max-w-[46rem]">
      <DataTable
        captionHidden
        caption="What is left out of these rates"
        columns={columns}
        rows={[...injuries, ...sessions, silent].filter(({ count }) => count > 0)}
        rowKey={({ key }) => key}
        empty="Nothing: every injury and every session of the season is in these rates."
      />
    </div>
  );
}
