import type { RatesFilters } from "./filters";
import type { Counts } from "./selection";

/**
 * When the whole organisation's sums may stand beside a part of it. Pure. Who covers listed teams takes their own
 * numbers off the whole's: where one other team is left, that gives its injuries away.
 */

/**
 * Whether no single other team's numbers follow from the whole's sums, from one answer or from two under different
 * filters. Sex, age and sport part the teams from each other, so that the whole is never narrowed by them; of session
 * kinds, estimated hours and seasons, which can be taken off each other too, none may be one other team's alone.
 * @param counts of every team
 * @param own ids of the teams that the person covers
 */
export function hidesOtherTeams(counts: Counts, filters: RatesFilters, own: readonly string[]): boolean {
  if (filters.sex !== "any" || filters.age !== "any" || filters.sport !== "any") return false;
  const isOwn = new Set(own);
  const unit = filters.per;
  const others = counts.cells.filter((cell) => !isOwn.has(cell.teamId) && cell[unit] > 0);
  const parts = [
    others,
    ...(filters.sessions === "training-and-matches"
      ? []
      : (["training", "match"] as const).map((kind) => others.filter((cell) => cell.kind === kind))),
    ...(unit === "hours" ? [others.filter(({ grade }) => grade === "estimated")] : []),
    ...counts.seasons.map(({ startsOn, endsOn }) =>
      others.filter(({ day }) => startsOn <= day && day <= endsOn),
    ),
  ];
  return parts.every((part) => new Set(part.map(({ teamId }) => teamId)).size !== 1);
}
