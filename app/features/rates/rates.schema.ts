import { z } from "zod";
import { DomainError } from "~/platform/errors";

/** What a rates address may ask: one schema for the page, the CSV and the API. */
export const caseDefinitions = ["time-loss", "medical-attention"] as const;
export const sessionChoices = ["training-and-matches", "training", "match"] as const;
export const groupings = ["sex-age", "sex", "age", "sport", "kind", "team"] as const;
export const units = ["aes", "hours"] as const;

export type CaseDefinition = (typeof caseDefinitions)[number];
export type SessionChoice = (typeof sessionChoices)[number];
export type Grouping = (typeof groupings)[number];
export type RateUnit = (typeof units)[number];

const oneOf = <const T extends readonly [string, ...string[]]>(values: T) =>
  z.enum(values, { error: () => `Use one of: ${values.join(", ")}.` });

const viewing = {
  season: z.uuid({ error: () => "Give the id of a season." }).optional(),
  team: z.uuid({ error: () => "Give the id of a team." }).optional(),
};

export const ratesQuery = z.object({
  injuries: oneOf(caseDefinitions).default("time-loss"),
  sessions: oneOf(sessionChoices).default("training-and-matches"),
  by: oneOf(groupings).default("sex-age"),
  per: oneOf(units).default("aes"),
  ...viewing,
});

export type RatesQuery = z.output<typeof ratesQuery>;
export type RatesFilters = Pick<RatesQuery, "injuries" | "sessions" | "by" | "per">;

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
