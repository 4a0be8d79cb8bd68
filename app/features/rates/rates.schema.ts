import { z } from "zod";
import { DomainError } from "~/platform/errors";
import { bodyAreas, sexes, sides, sports } from "~db/schema/codes";
import {
  caseDefinitions,
  contactChoices,
  defaultFilters,
  groupings,
  noNarrowing,
  occurrences,
  onsetChoices,
  sessionChoices,
  units,
} from "./filters";

const oneOf = <const T extends readonly [string, ...string[]]>(values: T) =>
  z.enum(values, { error: () => `Use one of: ${values.join(", ")}.` });

const anyOr = <const T extends readonly string[]>(values: T) => oneOf(["any", ...values]).default("any");

const viewing = {
  season: z.uuid({ error: () => "Give the id of a season." }).optional(),
  team: z.uuid({ error: () => "Give the id of a team." }).optional(),
};

/** What a rates address may ask: one schema for the page, the CSV and the API. */
export const ratesQuery = z.object({
  injuries: oneOf(caseDefinitions).default(defaultFilters.injuries),
  sessions: oneOf(sessionChoices).default(defaultFilters.sessions),
  by: oneOf(groupings).default(defaultFilters.by),
  per: oneOf(units).default(defaultFilters.per),
  sex: anyOr(sexes),
  sport: anyOr(sports),
  /** The label of one of the organisation's bands: `readBand` holds it against them. */
  age: z.string().max(40).default(noNarrowing.age),
  area: anyOr(bodyAreas),
  side: anyOr(sides),
  contact: oneOf(contactChoices).default(noNarrowing.contact),
  onset: oneOf(onsetChoices).default(noNarrowing.onset),
  occurrence: oneOf(occurrences).default(noNarrowing.occurrence),
  ...viewing,
});

export type RatesQuery = z.output<typeof ratesQuery>;

/**
 * An age band of an address, held against those of the organisation.
 * @throws DomainError invalid, naming the bands there are
 */
export function readBand(label: string, labels: readonly string[]): string {
  const known = ["any", ...labels, "unknown"];
  if (known.includes(label)) return label;
  throw new DomainError("invalid", `This address asks for an age band that there is not.`, {
    fields: { age: [`Use one of: ${known.join(", ")}.`] },
  });
}

/** The API refuses a parameter that it does not know: a misspelt filter must never answer with other numbers. */
const strictRatesQuery = z.strictObject(ratesQuery.shape);

/**
 * Reads an address's parameters; those that are absent get their defaults.
 * @param strict refuse unknown parameters as well (the API); a page has others of its own, such as the table's order
 * @throws DomainError invalid, naming each parameter and what it may be
 */
export function parseRatesQuery(params: URLSearchParams, { strict = false } = {}): RatesQuery {
  const repeated = [...new Set(params.keys())].filter((name) => params.getAll(name).length > 1);
  const parsed = (strict ? strictRatesQuery : ratesQuery).safeParse(Object.fromEntries(params));
  const fields: Record<string, string[]> = {};
  for (const name of repeated) {
    if (strict || name in ratesQuery.shape) fields[name] = ["Give this parameter once."];
  }
  for (const issue of parsed.error?.issues ?? []) {
    if (issue.code === "unrecognized_keys")
      for (const key of issue.keys)
        fields[key] = [`Unknown. Known: ${Object.keys(ratesQuery.shape).join(", ")}.`];
    else fields[issue.path.join(".")] = [issue.message];
  }
  const wrong = Object.entries(fields).map(([name, messages]) => `${name}: ${messages.join(" ")}`);
  if (!parsed.success || wrong.length > 0)
    throw new DomainError(
      "invalid",
      `This address asks for something that rates do not have. ${wrong.join(" ")}`,
      {
        fields,
      },
    );
  return parsed.data;
}
