import { z } from "zod";
import { DomainError } from "~/platform/errors";
import { dimensions } from "./comparisons-strata";

const message = `Use one of: ${dimensions.join(", ")}.`;

/** What the address of a comparison asks beside the filters of every view. */
const comparisonQuery = z.object({
  compare: z.enum(dimensions, { error: () => message }).default("sex"),
  a: z.string().max(80).optional(),
  b: z.string().max(80).optional(),
});

export type ComparisonQuery = z.output<typeof comparisonQuery>;

/**
 * Reads the groups to compare from an address.
 * @throws DomainError invalid for a dimension that there is not
 */
export function parseComparison({ searchParams }: URL): ComparisonQuery {
  const given = Object.fromEntries(
    (["compare", "a", "b"] as const).flatMap((name) => {
      const value = searchParams.get(name);
      return value ? [[name, value]] : [];
    }),
  );
  const parsed = comparisonQuery.safeParse(given);
  if (parsed.success) return parsed.data;
  throw new DomainError(
    "invalid",
    `This address asks for a comparison that there is not. compare: ${message}`,
    {
      fields: { compare: [message] },
    },
  );
}
