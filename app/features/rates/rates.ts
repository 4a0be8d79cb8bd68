import { group } from "d3-array";
import {
  clusterRobustRateRatio,
  type Estimate,
  incidenceRate,
  type RateRatio,
  rateRatio,
} from "~/statistics";
import { attempt } from "./attempt";
import { denominator, type ExposureByUnit, sumExposure } from "./counting";
import { type Coverage, coverageOf, percent, type SessionTally, stableFrom } from "./coverage";
import { type RatesFilters, type RateUnit, splitsExposure } from "./filters";
import { type Group, groupKey, listGroups, placeCell, placeInjury } from "./groups";
import { type Counts, type Selection, select } from "./selection";
import { reportedWeeks } from "./silence";

/** Rates of a view from its counts. Pure; every figure comes from ~/statistics. */

export type RateRow = Group & {
  /** Null: not reported, or hidden. */
  injuries: number | null;
  exposure: ExposureByUnit | null;
  denominator: number | null;
  rate: Estimate | null;
  /** Why there is no rate. */
  reason: string | null;
  unstable: boolean;
};

export type Comparison = {
  first: RateRow;
  second: RateRow;
  ratio: RateRatio | null;
  /** The same ratio with limits that allow for teams as clusters; null where those cannot be had. */
  robust: Estimate | null;
};

const unitWords: Record<RateUnit, string> = { aes: "athlete-exposures", hours: "exposure hours" };

type Figures = { group: Group; events: number; exposure: ExposureByUnit; unit: RateUnit; coverage: Coverage };

/** One row: its rate, or the reason why it has none. */
export function rateRow({ group, events, exposure, unit, coverage }: Figures): RateRow {
  const amount = denominator(exposure, unit);
  const counted = { ...group, injuries: events, exposure, denominator: amount };
  if (amount <= 0)
    return {
      ...counted,
      rate: null,
      reason: group.key === "none" ? "no exposure of its own" : `no ${unitWords[unit]}`,
      unstable: false,
    };
  if (coverage.state === "withheld")
    return {
      ...counted,
      rate: null,
      reason: `withheld: only ${percent(coverage.share ?? 0)} of held sessions recorded`,
      unstable: false,
    };
  return {
    ...counted,
    rate: incidenceRate({ events, exposure: amount }),
    reason: null,
    unstable: events < stableFrom,
  };
}

/** A team that entered no injury at all, not even one that does not count, and never confirmed "none" has not reported. */
const unreported = (row: RateRow): RateRow => ({
  ...row,
  injuries: null,
  denominator: null,
  exposure: null,
  rate: null,
  reason: "not reported: no injury entered, no week confirmed as without one",
  unstable: false,
});

const only = <T>(list: readonly T[]) => (list.length === 1 ? list[0] : undefined);

type Compared = { rows: readonly RateRow[]; by: RatesFilters["by"]; counts: Counts; selection: Selection };

/** Two groups to compare: the sexes or the session kinds, those with the most exposure, the higher rate first. */
function compare(compared: Compared, unit: RateUnit): Comparison | null {
  const largest = compared.rows
    .filter(
      ({ rate, sex, key }) =>
        rate && (sex === "female" || sex === "male" || ["training", "match"].includes(key)),
    )
    .sort((a, b) => (b.denominator ?? 0) - (a.denominator ?? 0))
    .slice(0, 2)
    .sort((a, b) => (b.rate?.estimate ?? 0) - (a.rate?.estimate ?? 0));
  const [first, second] = largest;
  if (!first || !second) return null;
  const side = ({ injuries, denominator: amount }: RateRow) => ({
    events: injuries ?? 0,
    exposure: amount ?? 0,
  });
  const [a, b] = [side(first), side(second)];
  if (a.events + b.events === 0) return { first, second, ratio: null, robust: null };
  return { first, second, ratio: rateRatio(a, b), robust: allowForTeams([first, second], compared, unit) };
}

/** The ratio of two groups with their teams as clusters; null without events on both sides or with too few teams. */
function allowForTeams(
  [first, second]: readonly [RateRow, RateRow],
  { by, counts, selection }: Compared,
  unit: RateUnit,
): Estimate | null {
  if (!first.injuries || !second.injuries) return null;
  const keyOf = groupKey(by, counts);
  const rows = [first, second].flatMap(({ key }, index) => {
    const cells = selection.cells.filter((cell) => keyOf(placeCell(cell)) === key);
    const injuries = selection.counted.filter((injury) => keyOf(placeInjury(injury)) === key);
    const exposed = group(cells, ({ teamId }) => teamId);
    return [...exposed].map(([cluster, own]) => ({
      group: index === 0 ? ("a" as const) : ("b" as const),
      cluster,
      events: injuries.filter(({ teamId }) => teamId === cluster).length,
      exposure: denominator(sumExposure(own), unit),
    }));
  });
  // An injury may be of a team that has no exposure in its group: where all are, no event is left.
  const ratio = attempt(() => clusterRobustRateRatio(rows.filter(({ exposure }) => exposure > 0)));
  return ratio?.varianceInflation == null ? null : ratio;
}

export type { Counts } from "./selection";

export type Rates = Omit<ReturnType<typeof computeRates>, "counted" | "reportedWeeks">;

/** The sessions that say how much of a group's exposure is recorded: those of its team, its sport or its days. */
function sessionsOf(group: Group, by: RatesFilters["by"], counts: Counts, sessions: readonly SessionTally[]) {
  if (by === "kind") return sessions.filter(({ kind }) => kind === group.key || group.key === "none");
  if (by !== "team" && by !== "sport" && by !== "month" && by !== "season") return sessions;
  const keyOf = groupKey(by, counts);
  const place = { sex: "unknown", age: null, kind: null } as const;
  return sessions.filter(({ day, teamId }) => keyOf({ ...place, day, teamId }) === group.key);
}

/** The rows of one grouping; groups with neither exposure nor injuries drop out. */
export function tabulate(
  grouping: RatesFilters["by"],
  counts: Counts,
  selection: Selection,
  unit: RateUnit,
): RateRow[] {
  const { cells, counted, silent, sessions } = selection;
  const keyOf = groupKey(grouping, counts);
  const keyed = group(cells, (cell) => keyOf(placeCell(cell)));
  const events = group(counted, (injury) => keyOf(placeInjury(injury)));
  const rows = listGroups(grouping, counts).flatMap((each) => {
    const own = splitsExposure(grouping) ? (keyed.get(each.key) ?? []) : cells;
    const injuries = events.get(each.key)?.length ?? 0;
    const isEmpty = injuries === 0 && (own.length === 0 || !splitsExposure(grouping));
    const isSilent = each.teamId !== null && silent.some(({ teamId }) => teamId === each.teamId);
    if (isEmpty && !isSilent) return [];
    const coverage = coverageOf(sessionsOf(each, grouping, counts, sessions));
    const row = rateRow({ group: each, events: injuries, exposure: sumExposure(own), unit, coverage });
    return [isEmpty ? unreported(row) : row];
  });
  // Groups of injuries have no order of their own: the most frequent first.
  return splitsExposure(grouping) ? rows : rows.sort((a, b) => (b.injuries ?? 0) - (a.injuries ?? 0));
}

/** Everything a view of rates shows, from its counts and filters. */
export function computeRates(counts: Counts, filters: RatesFilters) {
  const { by, per: unit } = filters;
  const selection = select(counts, filters);
  const { cells, counted, leftOut, sessions, coverage } = selection;
  const rows = tabulate(by, counts, selection, unit);
  const whole = { key: "total", label: "All together", sex: null, band: null, teamId: null };
  const total = rateRow({
    group: whole,
    events: counted.length,
    exposure: sumExposure(cells),
    unit,
    coverage,
  });
  const compared = by === "kind" ? rows : tabulate("sex", counts, selection, unit);
  const sum = (name: "unconfirmed" | "cancelled" | "withoutExposure" | "estimated") =>
    sessions.reduce((all, row) => all + row[name], 0);
  return {
    rows,
    total,
    comparison:
      by === "kind" || by === "sex" || by === "sex-age"
        ? compare({ rows: compared, by: by === "kind" ? "kind" : "sex", counts, selection }, unit)
        : null,
    /** The one group with exposure, where nothing can be compared. */
    single: only(compared.filter(({ denominator: amount }) => (amount ?? 0) > 0)) ?? null,
    coverage,
    counted,
    /** Of the exposure looked at. */
    reportedWeeks: reportedWeeks(cells, counts.injuries, counts.confirmedWeeks),
    leftOut,
    /** Counted injuries whose time loss still runs. */
    ongoing: counted.filter(({ ongoing }) => ongoing).length,
    sessionsLeftOut: {
      unconfirmed: sum("unconfirmed"),
      cancelled: sum("cancelled"),
      withoutExposure: sum("withoutExposure"),
      /** Only per athlete-exposures: these matches have hours alone. */
      estimated: unit === "aes" ? sum("estimated") : 0,
    },
    /** Exposure of teams that reported nothing, in the unit of the view. */
    silentExposure: denominator(sumExposure(selection.silent), unit),
  };
}
