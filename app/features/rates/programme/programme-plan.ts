import type { planComparisons } from "~db/schema/evaluation";
import { injuriesInWords } from "../filter-words";
import { type CaseDefinition, type ContactChoice, noNarrowing, type OnsetChoice } from "../filters";

/** The plan by which the programme is judged: written down before its results are looked at. Pure. */

export type PlanComparison = (typeof planComparisons)[number];

export type Outcome = {
  /** A body area's code, or "any". */
  area: string;
  contact: ContactChoice;
  onset: OnsetChoice;
  caseDefinition: CaseDefinition;
};

export type Plan = Outcome & {
  id: string;
  comparison: PlanComparison;
  /** In the lead's own words. */
  words: string;
  recordedBy: string | null;
  /** ISO day of the organisation's calendar, and its local time. */
  recordedOn: string;
  recordedTime: string;
};

/** What a form begins with: the injuries that the warm-up is meant to prevent. */
export const usualOutcome: Outcome = {
  area: "knee",
  contact: "without",
  onset: "sudden",
  caseDefinition: "time-loss",
};

export const comparisonWords: Record<PlanComparison, string> = {
  "warmed-up": "warmed-up against other athlete-exposures",
  thirds: "athletes of the highest third of compliance against the lowest",
};

/** The narrowing of rates that an outcome stands for; what it does not name is left open. */
export const narrowingOf = ({ area, contact, onset }: Outcome) => ({
  area,
  contact,
  onset,
  side: noNarrowing.side,
  occurrence: noNarrowing.occurrence,
});

/** "sudden non-contact and indirect contact knee injuries with time loss" */
export const outcomeInWords = (outcome: Outcome) =>
  injuriesInWords({
    ...noNarrowing,
    ...narrowingOf(outcome),
    injuries: outcome.caseDefinition,
  });

export type PlansOfSeason = {
  /** The plan that counts for the season. */
  counts: Plan;
  /** Recorded after it: a plan changed once results could be seen. */
  later: Plan[];
  /** Replaced before the season began. */
  earlier: Plan[];
};

/**
 * Which plan counts for a season: the last one recorded before its first day; where there is none, the first one
 * recorded at all, however late.
 * @param plans in the order in which they were recorded
 */
export function plansOfSeason(plans: readonly Plan[], season: { from: string }): PlansOfSeason | null {
  const before = plans.filter(({ recordedOn }) => recordedOn < season.from);
  const counts = before.at(-1) ?? plans[0];
  if (!counts) return null;
  const place = plans.indexOf(counts);
  return { counts, later: plans.slice(place + 1), earlier: plans.slice(0, place) };
}

export type PlanTiming = "before" | "during" | "after";

/** Whether a plan was recorded before the season began, during it, or after its last day. */
export function timingOf(
  { recordedOn }: Pick<Plan, "recordedOn">,
  season: { from: string; endsOn: string },
): PlanTiming {
  if (recordedOn < season.from) return "before";
  return recordedOn > season.endsOn ? "after" : "during";
}
