import { type Estimate, incidenceRate, type RateRatio, rateRatio } from "~/statistics";
import {
  countInjuries,
  denominator,
  type ExposureByUnit,
  type ExposureCell,
  type InjuryRow,
  kindsOf,
  sumExposure,
} from "./counting";
import { type Coverage, coverageOf, percent, type SessionTally, stableFrom } from "./coverage";
import type { RatesFilters, RateUnit } from "./filters";
import {
  type Band,
  type Group,
  groupKey,
  listGroups,
  placeCell,
  placeInjury,
  type RatedTeam,
} from "./groups";

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

export type Comparison = { first: RateRow; second: RateRow; ratio: RateRatio | null };

export type Counts = {
  cells: readonly ExposureCell[];
  injuries: readonly InjuryRow[];
  sessions: readonly SessionTally[];
  teams: readonly RatedTeam[];
  /** Teams that confirmed at least one week without a new injury. */
  confirming: readonly string[];
  bands: readonly Band[];
};

const unitWords: Record<RateUnit, string> = { aes: "athlete-exposures", hours: "exposure hours" };

type Figures = { group: Group; events: number; exposure: ExposureByUnit; unit: RateUnit; coverage: Coverage };

/** One row: its rate, or the reason why it has none. */
function rateRow({ group, events, exposure, unit, coverage }: Figures): RateRow {
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
  rate: null,
  reason: "not reported: no injury entered, no week confirmed as without one",
  unstable: false,
});

const only = <T>(list: readonly T[]) => (list.length === 1 ? list[0] : undefined);

/** Two groups to compare: the sexes or the session kinds, those with the most exposure, the higher rate first. */
function compare(rows: readonly RateRow[]): Comparison | null {
  const largest = rows
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
  return { first, second, ratio: a.events + b.events === 0 ? null : rateRatio(a, b) };
}

export type Rates = Omit<ReturnType<typeof computeRates>, "counted">;

/** Everything a view of rates shows, from its counts and filters. */
export function computeRates(counts: Counts, filters: RatesFilters) {
  const { by, per: unit } = filters;
  const rules = { definition: filters.injuries, sessions: filters.sessions, unit };
  const kinds: readonly string[] = kindsOf[filters.sessions];
  const cells = counts.cells.filter(({ kind }) => kinds.includes(kind));
  const sessions = counts.sessions.filter(({ kind }) => kinds.includes(kind));
  const { counted, leftOut } = countInjuries(counts.injuries, rules);
  const coverage = coverageOf(sessions);

  const tabulate = (grouping: RatesFilters["by"]): RateRow[] => {
    const keyOf = groupKey(grouping, counts);
    return listGroups(grouping, counts).flatMap((group) => {
      const own = cells.filter((cell) => keyOf(placeCell(cell)) === group.key);
      const events = counted.filter((injury) => keyOf(placeInjury(injury)) === group.key).length;
      if (own.length === 0 && events === 0) return [];
      const ofTeam = group.teamId && coverageOf(sessions.filter(({ teamId }) => teamId === group.teamId));
      const row = rateRow({ group, events, exposure: sumExposure(own), unit, coverage: ofTeam || coverage });
      const isSilent =
        group.teamId !== null &&
        !counts.confirming.includes(group.teamId) &&
        !counts.injuries.some(({ teamId, withdrawn }) => teamId === group.teamId && !withdrawn);
      return [isSilent ? unreported(row) : row];
    });
  };

  const rows = tabulate(by);
  const whole = { key: "total", label: "All together", sex: null, band: null, teamId: null };
  const total = rateRow({
    group: whole,
    events: counted.length,
    exposure: sumExposure(cells),
    unit,
    coverage,
  });
  const compared = by === "kind" ? rows : tabulate("sex");
  const sum = (name: "unconfirmed" | "cancelled" | "withoutExposure" | "estimated") =>
    sessions.reduce((all, row) => all + row[name], 0);
  return {
    rows,
    total,
    comparison: by === "kind" || by === "sex" || by === "sex-age" ? compare(compared) : null,
    /** The one group with exposure, where nothing can be compared. */
    single: only(compared.filter(({ denominator: amount }) => (amount ?? 0) > 0)) ?? null,
    coverage,
    counted,
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
  };
}
