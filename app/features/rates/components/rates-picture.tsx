import { lazy, Suspense } from "react";
import { decimalsFor } from "../figures";
import type { RatesFilters } from "../filters";
import { axisEnd, picturedRows, pictureGroups } from "../picture";
import type { RateRow } from "../rates";

// Charts reach the browser only where one shows.
const IntervalChart = lazy(() => import("~/ui/charts/interval-chart"));

type Props = {
  rows: RateRow[];
  reference: RateRow | null;
  referenceName: string;
  by: RatesFilters["by"];
  title: string;
};

/** Rates with their intervals by group, and the whole's own rate as a line to hold them against. */
export function RatesPicture({ rows, reference, referenceName, by, title }: Props) {
  const shown = picturedRows(rows);
  const missing = rows.filter((row) => row.rate && !shown.includes(row)).length;
  const decimals = decimalsFor(shown.flatMap(({ rate }) => rate?.estimate ?? []));
  const groups = pictureGroups(shown, by);
  const lines = shown.length * 22 + groups.length * 28;
  return (
    <>
      <Suspense fallback={<div style={{ height: lines + 90 }} />}>
        <IntervalChart
          groups={groups}
          unit="per 1000"
          title={title}
          decimals={decimals}
          // Room behind the longest interval for its words.
          max={axisEnd(rows) * 1.1}
          {...(reference?.rate
            ? {
                reference: {
                  value: reference.rate.estimate,
                  label: `${referenceName} ${reference.rate.estimate.toFixed(decimals)}`,
                },
              }
            : {})}
        />
      </Suspense>
      {missing > 0 ? (
        <p className="-mt-3 mb-6 max-w-prose text-soft">
          {missing === 1 ? "One group stands" : `${missing} groups stand`} in the table only: too little
          exposure to fit
          {missing === 1 ? " its interval" : " their intervals"} on this axis.
        </p>
      ) : null}
    </>
  );
}
