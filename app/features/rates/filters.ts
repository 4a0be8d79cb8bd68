/** What a view of rates is narrowed by: codes and defaults without a validator, so that the page's script stays small. */
export const caseDefinitions = ["time-loss", "medical-attention"] as const;
export const sessionChoices = ["training-and-matches", "training", "match"] as const;
export const units = ["aes", "hours"] as const;

/** Groups that share out the exposure as well as the injuries. */
export const exposureGroupings = [
  "sex-age",
  "sex",
  "age",
  "sport",
  "team",
  "kind",
  "month",
  "season",
] as const;
/** Groups of injuries alone: each has the whole exposure under it. */
export const injuryGroupings = ["contact", "movement", "area", "area-side", "tissue"] as const;
export const groupings = [...exposureGroupings, ...injuryGroupings] as const;

export const occurrences = ["all", "index", "recurrent"] as const;
/** "without": non-contact and indirect contact together, as prevention counts them. */
export const contactChoices = ["any", "without", "non_contact", "indirect", "direct", "unknown"] as const;
export const onsetChoices = ["any", "sudden", "gradual"] as const;

export type CaseDefinition = (typeof caseDefinitions)[number];
export type SessionChoice = (typeof sessionChoices)[number];
export type Grouping = (typeof groupings)[number];
export type InjuryGrouping = (typeof injuryGroupings)[number];
export type RateUnit = (typeof units)[number];
export type Occurrence = (typeof occurrences)[number];
export type ContactChoice = (typeof contactChoices)[number];
export type OnsetChoice = (typeof onsetChoices)[number];

/** Whom and what a view is narrowed to; "any" leaves it open. The first three narrow the exposure as well. */
export type Narrowing = {
  sex: string;
  sport: string;
  /** The label of an age band of the organisation. */
  age: string;
  area: string;
  side: string;
  contact: ContactChoice;
  onset: OnsetChoice;
  occurrence: Occurrence;
};

export type RatesFilters = Narrowing & {
  injuries: CaseDefinition;
  sessions: SessionChoice;
  by: Grouping;
  per: RateUnit;
};

export const noNarrowing: Narrowing = {
  sex: "any",
  sport: "any",
  age: "any",
  area: "any",
  side: "any",
  contact: "any",
  onset: "any",
  occurrence: "all",
};

export const defaultFilters: RatesFilters = {
  injuries: "time-loss",
  sessions: "training-and-matches",
  by: "sex-age",
  per: "aes",
  ...noNarrowing,
};

export const narrowingNames = Object.keys(noNarrowing) as (keyof Narrowing)[];
export const filterNames = Object.keys(defaultFilters) as (keyof RatesFilters)[];

export const splitsExposure = (by: Grouping) => (exposureGroupings as readonly string[]).includes(by);

/** What of the filters is not its default, to be written into an address. */
export const changedFilters = (filters: Partial<RatesFilters>) =>
  Object.entries(filters).filter(([name, value]) => value !== defaultFilters[name as keyof RatesFilters]);

/** The two groupings of the fixed tables, shown outside the clinical roles. */
export const fixedGroupings = ["sex", "age"] as const;
export const fixedFilters = (by: (typeof fixedGroupings)[number]): RatesFilters => ({
  ...defaultFilters,
  by,
});
