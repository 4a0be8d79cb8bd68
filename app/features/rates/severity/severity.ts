import { group as groupBy } from "d3-array";
import {
  type Burden,
  burden,
  type Estimate,
  kaplanMeier,
  logRank,
  proportion,
  quantile,
  type SeverityBand,
  type SurvivalMedian,
  type SurvivalStep,
  severityBand,
  severityBands,
} from "~/statistics";
import { attempt } from "../attempt";
import { denominator, type InjuryRow, sumExposure } from "../counting";
import type { Coverage } from "../coverage";
import type { CaseDefinition, RatesFilters } from "../filters";
import { type Group, groupKey, placeInjury } from "../groups";
import { type RateRow, rateRow, tabulate } from "../rates";
import { type Counts, select } from "../selection";

/** How long injuries last and what they cost: burden, severity bands, time to return. Pure. */

/** Days lost of one injury, up to the day the records go to; ongoing ones last at least that long. */
export type Loss = Pick<InjuryRow, "daysLost" | "ongoing">;

export type ReturnCurve = {
  /** The share not yet back after some days lost. */
  steps: SurvivalStep[];
  median: SurvivalMedian;
  /** Days lost of those who are not back: watched so far and no longer. */
  censored: number[];
};

export type SeverityRow = RateRow & {
  daysLost: number;
  /** Days per 1000 hours; null with the `reason` of the rate. */
  burden: Burden | null;
  /** The longest injury's share of all days lost, from 0 to 1; 0 without days. */
  largestShare: number;
  /** Injuries in each band; ongoing ones in the band that they have reached. */
  bands: Record<SeverityBand, number>;
  ongoing: number;
  /** Of closed injuries, in days; null without any. */
  quartiles: { lower: number; median: number; upper: number } | null;
  curve: ReturnCurve | null;
};

/** The bands that a case definition can have: without a day lost there is no time loss. */
export const bandsOf = (definition: CaseDefinition): readonly SeverityBand[] =>
  definition === "time-loss" ? severityBands.slice(1) : severityBands;

const isOngoing = ({ ongoing }: Loss) => ongoing;
const isClosed = ({ ongoing }: Loss) => !ongoing;
const sumDays = (losses: readonly Loss[]) => losses.reduce((sum, { daysLost }) => sum + daysLost, 0);

export function countBands(losses: readonly Loss[]): Record<SeverityBand, number> {
  const counts = { "0": 0, "1-7": 0, "8-28": 0, ">28": 0 };
  for (const { daysLost } of losses) counts[severityBand(daysLost)] += 1;
  return counts;
}

/** Time to return: the event is being fully available again, an ongoing injury is censored. Null without injuries. */
export function returnCurve(losses: readonly Loss[]): ReturnCurve | null {
  if (losses.length === 0) return null;
  const { steps, median } = kaplanMeier(
    losses.map(({ daysLost, ongoing }) => ({ time: daysLost, event: !ongoing })),
  );
  return { steps, median, censored: losses.filter(isOngoing).map(({ daysLost }) => daysLost) };
}

function quartilesOf(losses: readonly Loss[]): SeverityRow["quartiles"] {
  const days = losses.filter(isClosed).map(({ daysLost }) => daysLost);
  if (days.length === 0) return null;
  return { lower: quantile(days, 0.25), median: quantile(days, 0.5), upper: quantile(days, 0.75) };
}

function severityRow(row: RateRow, losses: readonly Loss[]): SeverityRow {
  const daysLost = losses.map((loss) => loss.daysLost);
  const total = sumDays(losses);
  return {
    ...row,
    daysLost: total,
    burden: row.rate ? burden({ daysLost, exposureHours: row.denominator ?? 0 }) : null,
    largestShare: total === 0 ? 0 : Math.max(...daysLost) / total,
    bands: countBands(losses),
    ongoing: losses.filter(isOngoing).length,
    quartiles: quartilesOf(losses),
    curve: returnCurve(losses),
  };
}

/** A group's curve is drawn from this many injuries on, and from this many that have closed. */
const drawnFrom = { injuries: 10, closed: 5 };

export type ReturnComparison = {
  groups: { group: Group; injuries: number; curve: ReturnCurve }[];
  /** Log-rank p of two groups; null for three, or when no time tells them apart. */
  pValue: number | null;
};

/** Curves by group where two or three groups are large enough to tell apart by eye. */
export function compareReturns(
  groups: readonly { group: Group; losses: readonly Loss[] }[],
): ReturnComparison | null {
  const large = groups.filter(
    ({ losses }) => losses.length >= drawnFrom.injuries && losses.filter(isClosed).length >= drawnFrom.closed,
  );
  if (large.length < 2 || large.length > 3) return null;
  const followed = large.map(({ losses }) =>
    losses.map(({ daysLost, ongoing }) => ({ time: daysLost, event: !ongoing })),
  );
  const [first, second, third] = followed;
  const test = first && second && !third ? attempt(() => logRank(first, second)) : null;
  return {
    groups: large.flatMap(({ group, losses }) => {
      const curve = returnCurve(losses);
      return curve ? { group, injuries: losses.length, curve } : [];
    }),
    pValue: test?.pValue ?? null,
  };
}

export type BandRow = {
  band: SeverityBand;
  injuries: number;
  ongoing: number;
  /** Of all injuries, from 0 to 1. */
  share: Estimate;
  daysLost: number;
};

function bandRows(losses: readonly Loss[], definition: CaseDefinition): BandRow[] {
  if (losses.length === 0) return [];
  return bandsOf(definition).map((band) => {
    const own = losses.filter(({ daysLost }) => severityBand(daysLost) === band);
    return {
      band,
      injuries: own.length,
      ongoing: own.filter(isOngoing).length,
      share: proportion({ successes: own.length, trials: losses.length }),
      daysLost: sumDays(own),
    };
  });
}

export type Severity = {
  rows: SeverityRow[];
  total: SeverityRow;
  bands: BandRow[];
  comparison: ReturnComparison | null;
  coverage: Coverage;
  /** Nobody looked at has reported: that is not the same as no injuries. */
  unreported: boolean;
};

const asGroup = ({ key, label, sex, band, teamId }: RateRow): Group => ({ key, label, sex, band, teamId });

/** Severity and burden of a view. The unit is hours whatever the filters say: burden has no other. */
export function severityOf(counts: Counts, filters: RatesFilters): Severity {
  const selection = select(counts, { ...filters, per: "hours" });
  const { counted, cells, coverage } = selection;
  const keyOf = groupKey(filters.by, counts);
  const losses = groupBy(counted, (injury) => keyOf(placeInjury(injury)));
  const ownLosses = ({ key }: Group) => losses.get(key) ?? [];
  const rows = tabulate(filters.by, counts, selection, "hours").map((row) =>
    severityRow(row, ownLosses(row)),
  );
  const whole = { key: "total", label: "All together", sex: null, band: null, teamId: null };
  const exposure = sumExposure(cells);
  const total = rateRow({ group: whole, events: counted.length, exposure, unit: "hours", coverage });
  return {
    rows,
    total: severityRow(total, counted),
    bands: bandRows(counted, filters.injuries),
    comparison: compareReturns(rows.map((row) => ({ group: asGroup(row), losses: ownLosses(row) }))),
    coverage,
    unreported: cells.length === 0 && selection.silent.length > 0,
  };
}

/** Hours under a row, for its table. */
export const hoursOf = ({ exposure }: RateRow) => (exposure ? denominator(exposure, "hours") : null);
