import { stableFrom } from "./coverage";
import { narrowingNames, type RatesFilters } from "./filters";
import type { RateRow, Rates } from "./rates";
import type { Incidence } from "./rates.server";
import type { RatesView } from "./view.server";

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

function comparison(compared: Rates["comparison"]) {
  if (!compared) return null;
  const { first, second, ratio, robust } = compared;
  return {
    first: first.key,
    second: second.key,
    rateRatio: ratio && {
      ...ratio,
      estimate: finite(ratio.estimate),
      upper: finite(ratio.upper),
    },
    rateRatioAllowingForTeams: robust && {
      estimate: robust.estimate,
      lower: robust.lower,
      upper: robust.upper,
      level: robust.level,
      method: robust.method,
    },
  };
}

const narrowingOf = (filters: RatesFilters) =>
  Object.fromEntries(narrowingNames.map((name) => [name, filters[name]]));

/**
 * The answer of the incidence API: the page's numbers with everything they need to be read.
 * @param view null while the organisation has no season
 */
export function incidenceJson(view: RatesView | null, incidence: Incidence | null, filters: RatesFilters) {
  const { season = null, team = null } = view?.viewing ?? {};
  const { rates = null, club = null } = incidence ?? {};
  return {
    season: season && { id: season.id, name: season.name },
    team: team && { id: team.id, name: team.name },
    from: view?.period.from ?? null,
    to: view?.period.to ?? null,
    caseDefinition: filters.injuries,
    sessions: filters.sessions,
    narrowedTo: narrowingOf(filters),
    groupedBy: filters.by,
    unit: filters.per === "aes" ? "athlete-exposures" : "hours",
    unstableBelow: stableFrom,
    coverage: rates?.coverage ?? null,
    reportedTeamWeeks: incidence?.reportedWeeks ?? null,
    groups: rates?.rows.map(group) ?? [],
    total: rates ? group(rates.total) : null,
    club: club && group(club),
    comparison: comparison(rates?.comparison ?? null),
    leftOut: rates
      ? {
          injuries: rates.leftOut,
          sessions: rates.sessionsLeftOut,
          exposureOfSilentTeams: rates.silentExposure,
        }
      : null,
  };
}
