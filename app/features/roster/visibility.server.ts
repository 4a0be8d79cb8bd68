import { Column, is, type SQL, sql } from "drizzle-orm";
import type { Scope } from "~db/client.server";
import { qualified } from "~db/qualified";

/** Named with its table: inside the rule's sub-selects a bare "id" would mean another table's. */
const named = (column: SQL | Column) => (is(column, Column) ? qualified(column) : column);

/** Days for which somebody stays visible to a team that they visited. */
const visitorDays = 14;

const idList = (ids: readonly string[]) =>
  sql`(${sql.join(
    ids.map((id) => sql`${id}::uuid`),
    sql`, `,
  )})`;

/**
 * The one visibility rule: whether an athlete is visible to a scope on a day. All teams: everyone. Listed teams: who is
 * on the roster of one of them on that day (transfers and two teams included), and who visited: took part in one of
 * their sessions within two weeks without being on that team's roster that day. A former athlete is no visitor, so
 * having trained before a transfer shows them to nobody. Use it in every query that shows athletes.
 * @param athleteId the SQL column holding the athlete's id
 */
export function visibleAthletes(scope: Scope, athleteId: SQL | Column, day = scope.today): SQL {
  if (scope.teams === "all") return sql`true`;
  if (scope.teams.length === 0) return sql`false`;
  const teams = idList(scope.teams);
  const athlete = named(athleteId);
  return sql`(exists (
      select 1 from roster_entries visible_entry
      where visible_entry.organisation_id = ${scope.organisationId}::uuid
        and visible_entry.athlete_id = ${athlete}
        and visible_entry.team_id in ${teams}
        and visible_entry.from_day <= ${day}::date
        and coalesce(visible_entry.to_day, 'infinity'::date) >= ${day}::date
    ) or exists (
      select 1 from participations visible_part
      join sessions visible_session
        on visible_session.organisation_id = visible_part.organisation_id and visible_session.id = visible_part.session_id
      where visible_part.organisation_id = ${scope.organisationId}::uuid
        and visible_part.athlete_id = ${athlete}
        and visible_part.presence = 'took_part'
        and visible_session.team_id in ${teams}
        and visible_session.day between ${day}::date - ${visitorDays}::int and ${day}::date
        and not exists (
          select 1 from roster_entries home_entry
          where home_entry.organisation_id = visible_part.organisation_id
            and home_entry.athlete_id = visible_part.athlete_id
            and home_entry.team_id = visible_session.team_id
            and home_entry.from_day <= visible_session.day
            and coalesce(home_entry.to_day, 'infinity'::date) >= visible_session.day
        )
    ))`;
}

/** Whether a team is one of the scope's own. */
export const coversTeam = (scope: Scope, teamId: string) =>
  scope.teams === "all" || scope.teams.includes(teamId);

/** SQL: a team id column holds one of the scope's own teams. */
export function ownTeams(scope: Scope, teamId: SQL | Column): SQL {
  if (scope.teams === "all") return sql`true`;
  if (scope.teams.length === 0) return sql`false`;
  return sql`${named(teamId)} in ${idList(scope.teams)}`;
}
