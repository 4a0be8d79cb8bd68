import { stableFrom } from "./coverage";
import type { RatesFilters } from "./filters";
import type { RateRow } from "./rates";
import type { Incidence } from "./rates.server";

/** JSON has no infinity: a limit that does not exist is null. */
const finite = (value: number) => (Number.isFinite(value) ? value : null);

function group(row: RateRow) {
  const { key, label, injuries, exposure, denominator, rate, reason, unstable } = row;
  return {
    key,
    label,
    injuries,
    exposure: exposure && {
      athleteExposures: { recorded: exposure.aes.recorded, headcount: exposure.aes.headcount },
      hours: exposure.hours,
    },
    exposureInRate: denominator,
    rate: rate && { ...rate, per: 1000 },
    unstable,
    reason,
  };
}

function comparison(compared: NonNullable<Incidence["rates"]>["comparison"]) {
  if (!compared) return null;
  const { first, second, ratio } = compared;
  return {
    first: first.key,
    second: second.key,
    rateRatio: ratio && {
      ...ratio,
      estimate: finite(ratio.estimate),
      upper: finite(ratio.upper),
    },
  };
}

/** The answer of the incidence API: the page's numbers with everything they need to be read. */
export function incidenceJson({ viewing, period, rates, club }: Incidence, filters: RatesFilters) {
  return {
    season: viewing.season && { id: viewing.season.id, name: viewing.season.name },
    team: viewing.team && { id: viewing.team.id, name: viewing.team.name },
    from: period?.from ?? null,
    to: period?.to ?? null,
    caseDefinition: filters.injuries,
    sessions: filters.sessions,
    groupedBy: filters.by,
    unit: filters.per === "aes" ? "athlete-exposures" : "hours",
    unstableBelow: stableFrom,
    coverage: rates?.coverage ?? null,
    groups: rates?.rows.map(group) ?? [],
    total: rates ? group(rates.total) : null,
    club: club && group(club),
    comparison: comparison(rates?.comparison ?? null),
    leftOut: rates ? { injuries: rates.leftOut, sessions: rates.sessionsLeftOut } : null,
  };
}
