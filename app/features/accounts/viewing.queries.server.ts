import { and, asc, desc, eq, inArray, isNull } from "drizzle-orm";
import type { Scope, Tx } from "~db/client.server";
import { seasons, teams } from "~db/schema";

export function findSeasons(tx: Tx) {
  return tx
    .select({ id: seasons.id, name: seasons.name, startsOn: seasons.startsOn, endsOn: seasons.endsOn })
    .from(seasons)
    .where(eq(seasons.organisationId, tx.scope.organisationId))
    .orderBy(desc(seasons.startsOn));
}

/** @param archived archived teams as well */
export function findTeamsOf(tx: Tx, scope: Scope, archived: boolean) {
  return tx
    .select({ id: teams.id, name: teams.name, sport: teams.sport, sex: teams.sex, underAge: teams.underAge })
    .from(teams)
    .where(
      and(
        eq(teams.organisationId, scope.organisationId),
        archived ? undefined : isNull(teams.archivedAt),
        scope.teams === "all" ? undefined : inArray(teams.id, [...scope.teams]),
      ),
    )
    .orderBy(asc(teams.name));
}
