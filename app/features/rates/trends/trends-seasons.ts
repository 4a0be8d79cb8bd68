import { min } from "d3-array";
import { addDays, daysBetween } from "~/platform/clock";
import { type ClusterRobustRateRatio, clusterRobustRateRatio, type RateRatio, rateRatio } from "~/statistics";
import { attempt } from "../attempt";
import { type InjuryRow, sumExposure } from "../counting";
import { coverageOf } from "../coverage";
import type { RateUnit } from "../filters";
import type { SeasonDays } from "../periods";
import { type RateRow, rateRow, tabulate } from "../rates";
import { type TrendMaterial as Material, sumOf } from "./trends";

/** Rates by season, and a season so far against the same days of earlier ones. Pure. */

export type SeasonRow = { season: SeasonDays; row: RateRow; matchShare: number | null };

export type SoFarRow = {
  season: SeasonDays;
  from: string;
  to: string;
  days: number;
  row: RateRow;
  /** The season looked at over this earlier one; null for itself and where either has no rate or no injury at all. */
  ratio: RateRatio | null;
  robust: ClusterRobustRateRatio | null;
};

/** Each season's rate, and how much of its exposure matches make up. */
export function seasonRows({ counts, selection, unit }: Material): SeasonRow[] {
  return tabulate("season", counts, selection, unit).flatMap((row) => {
    const season = counts.seasons.find(({ id }) => id === row.key);
    if (!season) return [];
    const own = selection.cells.filter(({ day }) => season.startsOn <= day && day <= season.endsOn);
    const all = sumOf(own, unit);
    const matches = sumOf(
      own.filter(({ kind }) => kind === "match"),
      unit,
    );
    return [{ season, row, matchShare: all > 0 ? matches / all : null }];
  });
}

const within =
  (from: string, to: string) =>
  ({ day }: { day: string }) =>
    from <= day && day <= to;

function countDays({ selection, unit }: Material, season: SeasonDays, from: string, to: string) {
  const isIn = within(from, to);
  return {
    row: rateRow({
      group: { key: season.id, label: season.name, sex: null, band: null, teamId: null },
      events: selection.counted.filter(isIn).length,
      exposure: sumExposure(selection.cells.filter(isIn)),
      unit,
      coverage: coverageOf(selection.sessions.filter(isIn)),
    }),
    cells: selection.cells.filter(isIn),
    injuries: selection.counted.filter(isIn),
  };
}

type Days = ReturnType<typeof countDays>;

/** The two spans of days with their teams as clusters; null where that cannot be had. */
function allowForTeams(now: Days, then: Days, unit: RateUnit): ClusterRobustRateRatio | null {
  const side = ({ cells, injuries }: Days, name: "a" | "b") => {
    const teams = [...new Set(cells.map(({ teamId }) => teamId))];
    return teams.map((cluster) => ({
      group: name,
      cluster,
      events: injuries.filter((injury: InjuryRow) => injury.teamId === cluster).length,
      exposure: sumOf(
        cells.filter(({ teamId }) => teamId === cluster),
        unit,
      ),
    }));
  };
  const rows = [...side(now, "a"), ...side(then, "b")].filter(({ exposure }) => exposure > 0);
  const ratio = attempt(() => clusterRobustRateRatio(rows));
  return ratio && ratio.varianceInflation !== null ? ratio : null;
}

/**
 * A season from its first day to `to`, and as many days from the first of each earlier season.
 * @param current id of the season looked at
 * @param to the last of its days looked at, ISO
 */
export function seasonsSoFar(material: Material, current: string, to: string): SoFarRow[] {
  const { seasons } = material.counts;
  const season = seasons.find(({ id }) => id === current);
  if (!season) return [];
  const length = daysBetween(season.startsOn, to);
  const now = countDays(material, season, season.startsOn, to);
  const earlier = seasons.filter(({ startsOn }) => startsOn < season.startsOn).reverse();
  const rows = earlier.map((other): SoFarRow => {
    const last = addDays(other.startsOn, length);
    const until = min([last, other.endsOn]) ?? last;
    const then = countDays(material, other, other.startsOn, until);
    const [a, b] = [now.row, then.row];
    const isRated = a.rate && b.rate && (a.injuries ?? 0) + (b.injuries ?? 0) > 0;
    return {
      ...{ season: other, from: other.startsOn, to: until, row: b },
      days: daysBetween(other.startsOn, until) + 1,
      ratio: isRated
        ? rateRatio(
            { events: a.injuries ?? 0, exposure: a.denominator ?? 0 },
            { events: b.injuries ?? 0, exposure: b.denominator ?? 0 },
          )
        : null,
      robust: isRated ? allowForTeams(now, then, material.unit) : null,
    };
  });
  const own = {
    season,
    from: season.startsOn,
    to,
    days: length + 1,
    row: now.row,
    ratio: null,
    robust: null,
  };
  return [own, ...rows];
}
