/** What a view of rates is narrowed by: codes and defaults without a validator, so that the page's script stays small. */
export const caseDefinitions = ["time-loss", "medical-attention"] as const;
export const sessionChoices = ["training-and-matches", "training", "match"] as const;
export const groupings = ["sex-age", "sex", "age", "sport", "kind", "team"] as const;
export const units = ["aes", "hours"] as const;

export type CaseDefinition = (typeof caseDefinitions)[number];
export type SessionChoice = (typeof sessionChoices)[number];
export type Grouping = (typeof groupings)[number];
export type RateUnit = (typeof units)[number];
export type RatesFilters = {
  injuries: CaseDefinition;
  sessions: SessionChoice;
  by: Grouping;
  per: RateUnit;
};

export const defaultFilters: RatesFilters = {
  injuries: "time-loss",
  sessions: "training-and-matches",
  by: "sex-age",
  per: "aes",
};

/** The two groupings of the fixed tables, shown outside the clinical roles. */
export const fixedGroupings = ["sex", "age"] as const;
export const fixedFilters = (by: (typeof fixedGroupings)[number]): RatesFilters => ({
  ...defaultFilters,
  by,
});
