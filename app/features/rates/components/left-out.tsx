import { type Column, DataTable } from "~/ui/data-table";
import type { Rates } from "../rates";

type Line = { key: string; what: string; count: number };

const columns: Column<Line>[] = [
  { id: "what", header: "What and why", rowHeader: true, cell: ({ what }) => what },
  { id: "count", header: "Number", numeric: true, cell: ({ count }) => count.toLocaleString("en-GB") },
];

const sessionWords: Record<keyof Rates["sessionsLeftOut"], string> = {
  withoutExposure: "Sessions held without any exposure recorded",
  estimated: "Matches with estimated hours, which give no athlete-exposures",
  unconfirmed: "Sessions whose time has passed and that nobody confirmed as held",
  cancelled: "Sessions cancelled",
};

/** What the rates leave out, counted, each with its reason. */
export function LeftOut({ leftOut, sessionsLeftOut }: Pick<Rates, "leftOut" | "sessionsLeftOut">) {
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
  return (
    <div className="max-w-[46rem]">
      <DataTable
        captionHidden
        caption="What is left out of these rates"
        columns={columns}
        rows={[...injuries, ...sessions].filter(({ count }) => count > 0)}
        rowKey={({ key }) => key}
        empty="Nothing: every injury and every session of the season is in these rates."
      />
    </div>
  );
}
