import { lazy, Suspense } from "react";
import { decimalsFor } from "../figures";
import { axisEnd, pictureGroups } from "../picture";
import type { RateRow } from "../rates";
import type { RatesFilters } from "../rates.schema";

// Charts reach the browser only where one shows.
const IntervalChart = lazy(() => import("~/ui/charts/interval-chart"));

type Props = {
  rows: RateRow[];
  reference: RateRow;
  referenceName: string;
  by: RatesFilters["by"];
  title: string;
};

/** Rates with their intervals by group, and the whole's own rate as a line to hold them against. */
export function RatesPicture({ rows, reference, referenceName, by, title }: Props) {
  const shown = rows.filter(({ rate, denominator }) => rate || (denominator ?? 0) > 0);
  const decimals = decimalsFor(shown.flatMap(({ rate }) => rate?.estimate ?? []));
  const groups = pictureGroups(shown, by);
  const lines = shown.length * 22 + groups.length * 28;
  return (
    <Suspense fallback={<div style={{ height: lines + 90 }} />}>
      <IntervalChart
        groups={groups}
        unit="per 1000"
        title={title}
        decimals={decimals}
        max={axisEnd(shown)}
        {...(reference.rate
          ? {
              reference: {
                value: reference.rate.estimate,
                label: `${referenceName} ${reference.rate.estimate.toFixed(decimals)}`,
              },
            }
          : {})}
      />
    </Suspense>
  );
}
