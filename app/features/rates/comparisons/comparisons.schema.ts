import { z } from "zod";
import { DomainError } from "~/platform/errors";
import { dimensions } from "./comparisons-strata";

const overMessage = "Use one of: season, all.";
const message = `Use one of: ${dimensions.join(", ")}.`;

/** The names of its parameters. */
export const comparisonNames = ["compare", "a", "b", "over"] as const;

/** What the address of a comparison asks beside the filters of every view. */
const comparisonQuery = z.object({
  compare: z.enum(dimensions, { error: () => message }).default("sex"),
  a: z.string().max(80).optional(),
  b: z.string().max(80).optional(),
  /** The season of the view, or all seasons together. */
  over: z.enum(["season", "all"], { error: () => overMessage }).default("season"),
});

export type ComparisonQuery = z.output<typeof comparisonQuery>;

/**
 * Reads the groups to compare from an address.
 * @throws DomainError invalid, naming each parameter and what it may be
 */
export function parseComparison({ searchParams }: URL): ComparisonQuery {
  const given = Object.fromEntries(
    comparisonNames.flatMap((name) => {
      const value = searchParams.get(name);
      return value ? [[name, value]] : [];
    }),
  );
  const parsed = comparisonQuery.safeParse(given);
  if (parsed.success) return parsed.data;
  const fields = Object.fromEntries(
    parsed.error.issues.map((issue) => [issue.path.join("."), [issue.message]]),
  );
  const wrong = Object.entries(fields).map(([name, messages]) => `${name}: ${messages.join(" ")}`);
  throw new DomainError(
    "invalid",
    `This address asks for a comparison that there is not. ${wrong.join(" ")}`,
    {
      fields,
    },
  );
}
