import { sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import type { SessionTally } from "./coverage";
import type { Band, RatedTeam } from "./groups";
import { countedGrade, inTeams, type Range } from "./rollups/exposure.queries.server";
import type { ConfirmedWeek } from "./silence";

/** Sessions, teams and rules that rates stand on. What counts is said in counting.ts. */

/** Trainings and matches by team, day and kind: how many took place, and with which grade of exposure. */
export async function tallySessions(tx: Tx, { from, to, teamIds }: Range): Promise<SessionTally[]> {
  const rows = await tx.execute<SessionTally>(sql`
    with tallied as (
      select s.team_id, s.kind, s.day, s.state, s.state in ('held', 'abandoned') as held,
        case when ${countedGrade} = 'estimated' and not exists (
          select 1 from sport_rules r where r.organisation_id = s.organisation_id and r.sport = t.sport
            and r.from_age < coalesce(t.under_age, 999)
        ) then 'none' else ${countedGrade} end as grade
      from sessions s
      join teams t on t.organisation_id = s.organisation_id and t.id = s.team_id
      where s.organisation_id = ${tx.scope.organisationId}::uuid
        and s.day between ${from}::date and ${to}::date
        and s.kind in ('training', 'match') and ${inTeams(sql`s.team_id`, teamIds)}
    )
    select team_id as "teamId", day::text as day, kind,
      (count(*) filter (where held))::int as held,
      (count(*) filter (where held and grade = 'recorded'))::int as recorded,
      (count(*) filter (where held and grade = 'headcount'))::int as headcount,
      (count(*) filter (where held and grade = 'estimated'))::int as estimated,
      (count(*) filter (where held and grade = 'none'))::int as "withoutExposure",
      (count(*) filter (where state = 'planned' and day < ${tx.scope.today}::date))::int as unconfirmed,
      (count(*) filter (where state = 'cancelled'))::int as cancelled
    from tallied group by 1, 2, 3`);
  return [...rows];
}

/** The team-weeks of the range in which somebody confirmed that nobody was newly hurt. */
export async function listConfirmedWeeks(tx: Tx, { from, to, teamIds }: Range): Promise<ConfirmedWeek[]> {
  const rows = await tx.execute<ConfirmedWeek>(sql`
    select team_id as "teamId", week_start::text as week from no_injury_weeks
    where organisation_id = ${tx.scope.organisationId}::uuid
      and week_start between ${from}::date - 6 and ${to}::date and ${inTeams(sql`team_id`, teamIds)}`);
  return [...rows];
}

/** Every team that may have exposure, archived ones too: a season's rates keep the teams it had. */
export async function listRatedTeams(tx: Tx, teamIds: Range["teamIds"]): Promise<RatedTeam[]> {
  const rows = await tx.execute<RatedTeam>(sql`
    select id, name, sport, sex from teams
    where organisation_id = ${tx.scope.organisationId}::uuid and ${inTeams(sql`id`, teamIds)}
    order by name`);
  return [...rows];
}

/** The organisation's name, age bands and small number. */
export async function findCountingRules(tx: Tx) {
  const [row] = await tx.execute<{ name: string; bands: Band[]; smallNumber: number }>(sql`
    select name, age_bands as bands, small_number as "smallNumber" from organisations
    where organisation_id = ${tx.scope.organisationId}::uuid`);
  return row ?? { name: "", bands: [], smallNumber: 5 };
}
