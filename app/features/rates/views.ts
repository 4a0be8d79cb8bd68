import { filterNames } from "./filters";

/** The pages of the rates, in the order in which a medical lead asks. */
export const rateViews = [
  { path: "rates", label: "Incidence" },
  { path: "rates/severity", label: "Severity and burden" },
  { path: "rates/prevalence", label: "Prevalence" },
  { path: "rates/body-areas", label: "Body areas" },
  { path: "rates/teams", label: "Teams" },
  { path: "rates/comparisons", label: "Comparisons" },
  { path: "rates/trends", label: "Trends" },
  { path: "rates/recent-weeks", label: "Recent weeks" },
  { path: "rates/programme", label: "Programme" },
  { path: "rates/coverage", label: "Coverage" },
] as const;

export type RateViewPath = (typeof rateViews)[number]["path"];

/** What of an address the views of the rates understand: scope and filters, and the two sides of a comparison. */
const sharedNames: readonly string[] = ["season", "team", ...filterNames, "compare", "a", "b", "over"];

/**
 * The search of an address with some parameters changed; undefined takes one away. What belongs to one table alone
 * (its order, a chosen group) is dropped.
 */
export function searchWith(search: string, changes: Record<string, string | undefined> = {}): string {
  const kept = [...new URLSearchParams(search)].filter(
    ([name]) => sharedNames.includes(name) && !(name in changes),
  );
  const added = Object.entries(changes).filter((entry): entry is [string, string] => entry[1] !== undefined);
  const text = new URLSearchParams([...kept, ...added]).toString();
  return text ? `?${text}` : "";
}
