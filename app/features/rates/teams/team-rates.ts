import { group } from "d3-array";
import {
  type Estimate,
  exceedance,
  funnelLimits,
  incidenceRate,
  shrunkenRates,
  standardisedIncidenceRatio,
} from "~/statistics";
import { expectedIn, standardOf } from "../expected";
import type { RateUnit } from "../filters";
import { type RateRow, tabulate } from "../rates";
import type { Counts, Selection } from "../selection";

/** Every team against the whole: limits for its exposure, its shrunken rate, what its ages and sessions let expect. Pure. */

/** The inner limits and the outer ones, as funnel charts usually draw them. */
export const funnelLevels = [0.95, 0.998] as const;
/** With fewer teams the whole is hardly more than the team held against it. */
export const fewestTeams = 3;

export type Side = "above" | "below";

export type TeamRate = {
  row: RateRow;
  /** Null without a rate. */
  shrunken: Estimate | null;
  /** Injuries at the whole's rates by age band and session kind. */
  expected: Estimate | null;
  /** Observed over expected. */
  ratio: Estimate | null;
  /** On which side of the 95 % and the 99.8 % limits it lies; null within. */
  outside: [Side | null, Side | null];
  /** Chance of lying outside the 95 % limits at the whole's rate. */
  luck: number;
};

export type TeamRates = {
  whole: Estimate | null;
  /** The whole may not be shown: it would give another team's numbers away. */
  wholeHidden: boolean;
  injuries: number;
  exposure: number;
  teams: TeamRate[];
  /** Teams with a rate, in the whole. */
  rated: number;
  /** Whether the rates differ by more than luck: the shape of their spread is then finite. */
  spread: "more than luck" | "no more than luck" | null;
  /** Limits over the range of exposures, one list a level. */
  limits: { level: number; points: { exposure: number; lower: number; upper: number }[] }[];
};

/**
 * Chance that a team lies outside limits at the whole's own rate: counts are whole, so it is somewhat less than the
 * level says, most of all for little exposure.
 */
export function chanceOutside(rate: number, exposure: number, level: number): number {
  const expected = (rate / 1000) * exposure;
  if (!(expected > 0)) return 0;
  const { lower, upper } = funnelLimits({ rate, exposure, level });
  const above = exceedance(Math.floor((upper / 1000) * exposure) + 1, expected);
  const below = 1 - exceedance(Math.ceil((lower / 1000) * exposure), expected);
  return above + Math.max(0, below);
}

function sideOf(row: RateRow, rate: number, level: number): Side | null {
  if (!row.rate || !row.denominator) return null;
  const { lower, upper } = funnelLimits({ rate, exposure: row.denominator, level });
  if (row.rate.estimate > upper) return "above";
  return row.rate.estimate < lower ? "below" : null;
}

/** Points of the limits between the least and the most exposure, closer together where they bend. */
function limitCurve(rate: number, most: number, level: number) {
  const steps = 60;
  // With less expected than this the limits are far above any picture, or say that one injury is too many.
  const least = Math.min(most / 4, rate > 0 ? (0.1 / rate) * 1000 : most / 4);
  return Array.from({ length: steps }, (_, index) => {
    const exposure = least + (most - least) * (index / (steps - 1)) ** 2;
    return { exposure, ...funnelLimits({ rate, exposure, level }) };
  });
}

/**
 * Teams against the whole.
 * @param counts of every team of the whole
 * @param shown ids of the teams that may be shown; null for all. Nothing of the others leaves but the whole's sums
 * @param wholeHidden nothing of the whole leaves either: teams have their own rates alone
 */
export function teamRates(
  { counts, selection, unit }: { counts: Counts; selection: Selection; unit: RateUnit },
  shown: readonly string[] | null,
  wholeHidden = false,
): TeamRates {
  const rows = tabulate("team", counts, selection, unit).filter(({ teamId }) => teamId !== null);
  const exposure = wholeHidden ? 0 : selection.cells.reduce((sum, cell) => sum + cell[unit], 0);
  const injuries = wholeHidden ? 0 : selection.counted.length;
  const isRated = exposure > 0 && selection.coverage.state !== "withheld";
  const whole = isRated ? incidenceRate({ events: injuries, exposure }) : null;
  const rated = rows.filter(({ rate }) => rate !== null);
  const isEnough = whole !== null && rated.length >= fewestTeams;
  const shrunk = isEnough
    ? shrunkenRates(rated.map((row) => ({ events: row.injuries ?? 0, exposure: row.denominator ?? 0 })))
    : null;
  const standard = standardOf(selection, "age-kind", counts.bands, unit);
  const cellsOf = group(selection.cells, ({ teamId }) => teamId);
  const visible = rows.filter(({ teamId }) => shown === null || (teamId !== null && shown.includes(teamId)));
  const most = Math.max(0, ...visible.map(({ denominator }) => denominator ?? 0));
  return {
    ...{ whole, wholeHidden, injuries, exposure },
    teams: visible.map((row): TeamRate => {
      const index = rated.indexOf(row);
      const at = isEnough && index >= 0 ? whole : null;
      const expected = at && row.teamId ? expectedIn(standard, cellsOf.get(row.teamId) ?? []) : null;
      return {
        row,
        shrunken: shrunk?.groups[index] ?? null,
        expected,
        ratio:
          expected && expected.estimate > 0
            ? standardisedIncidenceRatio({ observed: row.injuries ?? 0, expected: expected.estimate })
            : null,
        outside: [
          at ? sideOf(row, at.estimate, funnelLevels[0]) : null,
          at ? sideOf(row, at.estimate, funnelLevels[1]) : null,
        ],
        luck: at ? chanceOutside(at.estimate, row.denominator ?? 0, funnelLevels[0]) : 0,
      };
    }),
    rated: wholeHidden ? 0 : rated.length,
    spread: shrunk ? (shrunk.shape === Infinity ? "no more than luck" : "more than luck") : null,
    limits:
      isEnough && most > 0
        ? funnelLevels.map((level) => ({ level, points: limitCurve(whole.estimate, most * 1.3, level) }))
        : [],
  };
}
