import { z } from "zod";
import { DomainError } from "~/platform/errors";
import { caseDefinitions, defaultFilters, groupings, sessionChoices, units } from "./filters";

const oneOf = <const T extends readonly [string, ...string[]]>(values: T) =>
  z.enum(values, { error: () => `Use one of: ${values.join(", ")}.` });

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
  ...viewing,
});

export type RatesQuery = z.output<typeof ratesQuery>;

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
