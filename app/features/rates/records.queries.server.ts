import { and, eq, inArray } from "drizzle-orm";
import { visibleAthletes } from "~/features/roster/visibility.server";
import type { Tx } from "~db/client.server";
import { athletes } from "~db/schema";

/** Names of those of the athletes whom the scope may see today, by id. */
export async function listVisibleNames(tx: Tx, ids: readonly string[]): Promise<Map<string, string>> {
  if (ids.length === 0) return new Map();
  const rows = await tx
    .select({ id: athletes.id, givenName: athletes.givenName, familyName: athletes.familyName })
    .from(athletes)
    .where(
      and(
        eq(athletes.organisationId, tx.scope.organisationId),
        inArray(athletes.id, [...new Set(ids)]),
        visibleAthletes(tx.scope, athletes.id),
      ),
    );
  return new Map(rows.map(({ id, givenName, familyName }) => [id, `${familyName}, ${givenName}`]));
}
