import { and, eq, inArray, sql } from "drizzle-orm";
import { visibleAthletes } from "~/features/roster/visibility.server";
import type { Tx } from "~db/client.server";
import { athletes } from "~db/schema";

/**
 * Names of athletes by id, and whether the scope may see the athlete today. Who is not visible may be named only by an
 * injury of a session of an own team, as the list of injuries does.
 */
export async function listNames(tx: Tx, ids: readonly string[]) {
  const distinct = [...new Set(ids)];
  if (distinct.length === 0) return new Map<string, { name: string; visible: boolean }>();
  const rows = await tx
    .select({
      id: athletes.id,
      givenName: athletes.givenName,
      familyName: athletes.familyName,
      visible: sql<boolean>`${visibleAthletes(tx.scope, athletes.id)}`,
    })
    .from(athletes)
    .where(and(eq(athletes.organisationId, tx.scope.organisationId), inArray(athletes.id, distinct)));
  return new Map(
    rows.map(({ id, givenName, familyName, visible }) => [
      id,
      { name: `${familyName}, ${givenName}`, visible },
    ]),
  );
}
