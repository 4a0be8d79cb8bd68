import { type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import type { InjuryRow } from "./counting";
import { ageInYears, countedSessions, inTeams, type Range } from "./exposure.queries.server";
import { mondayOf } from "./rollups-marks.queries.server";

/** The SQL of injuries: on which day each is counted, for which team, and what decides whether it counts. */

/** The day an injury is counted on, of a revision `i` and its session `s`. */
const countedDay = sql`case when i.onset is distinct from 'gradual' then coalesce(s.day, i.onset_day) else i.onset_day end`;

/**
 * CTEs up to `injuries_placed`: the injuries counted in a range with their team and whether their session and the
 * team's week have exposure, in each unit. A sudden injury belongs to the day of its session, so that one after
 * midnight stays with its exposure; any other to the day of onset. Without a session the team is one of the athlete's
 * on the day of onset: one with exposure in that week before others, then the one joined first. Of a week only the
 * days of the range count. Exposure is looked up for the sessions and the weeks that injuries ask for, no others.
 * @param only a further condition on the day that an injury is counted on
 */
export const placedInjuries = (tx: Tx, range: Range, only: (day: SQL) => SQL = () => sql`true`) => {
  const organisation = sql`${tx.scope.organisationId}::uuid`;
  return sql`
    found as materialized (
      select i.injury_id, i.athlete_id, i.onset, i.subsequence, i.outside_sport, i.withdrawn, i.onset_day,
        i.body_area, i.side, i.contact, i.movement, i.tissue, i.pathology, i.warmed_up, ${countedDay} as day,
        ${mondayOf(sql`i.onset_day`)} as week,
        i.session_id, s.kind as session_kind, s.state as session_state, s.team_id as session_team
      from current_injuries i
      left join sessions s on s.organisation_id = i.organisation_id and s.id = i.session_id
      where i.organisation_id = ${organisation}
        and ${countedDay} between ${range.from}::date and ${range.to}::date and ${only(countedDay)}
    ),
    homes as materialized (
      select f.injury_id, f.week, r.team_id, r.from_day
      from found f
      join roster_entries r on r.organisation_id = ${organisation} and r.athlete_id = f.athlete_id
        and r.from_day <= f.onset_day and (r.to_day is null or r.to_day >= f.onset_day)
      where f.session_team is null
    ),
    asked_weeks as materialized (
      select session_team as team_id, week from found where session_team is not null
      union select team_id, week from homes
    ),
    asked_sessions as materialized (
      select session_id as id from found where session_id is not null
      union
      select s.id from asked_weeks a
      join sessions s on s.organisation_id = ${organisation} and s.team_id = a.team_id
        and s.day between a.week and a.week + 6
    ),
    ${countedSessions(tx, { ...range, teamIds: null }, sql`s.id in (select id from asked_sessions)`)},
    amounts as materialized (
      select c.id, c.team_id, ${mondayOf(sql`c.day`)} as week,
        case c.grade when 'recorded' then p.taking_part
          when 'headcount' then coalesce(c.players > 0 and c.minutes > 0, false) else false end as aes,
        case c.grade when 'recorded' then p.taking_part
          else coalesce(c.players > 0 and c.minutes > 0, false) end as hours
      from counted c
      left join lateral (
        select exists (
          select 1 from participations t where t.organisation_id = ${organisation} and t.session_id = c.id
            and t.presence = 'took_part' and t.minutes > 0
        ) as taking_part
      ) p on c.grade = 'recorded'
    ),
    weeks as materialized (
      select team_id, week, bool_or(aes) as aes, bool_or(hours) as hours from amounts group by team_id, week
    ),
    home as (
      select distinct on (h.injury_id) h.injury_id, h.team_id
      from homes h left join weeks w on w.team_id = h.team_id and w.week = h.week
      order by h.injury_id, coalesce(w.aes, false) desc, coalesce(w.hours, false) desc, h.from_day, h.team_id
    ),
    injuries_placed as materialized (
      select f.*, coalesce(f.session_team, h.team_id) as team_id, a.sex,
        ${ageInYears(sql`a.date_of_birth`, sql`f.onset_day`)} as age,
        (a.archived_at at time zone ${tx.scope.timeZone})::date as left_on,
        coalesce(m.aes, false) as session_aes, coalesce(m.hours, false) as session_hours,
        coalesce(w.aes, false) as week_aes, coalesce(w.hours, false) as week_hours
      from found f
      join athletes a on a.organisation_id = ${organisation} and a.id = f.athlete_id
      left join home h on h.injury_id = f.injury_id
      left join amounts m on m.id = f.session_id
      left join weeks w on w.team_id = coalesce(f.session_team, h.team_id) and w.week = f.week
    )`;
};

/** CTE `contributions`, after `placedInjuries`: when the athlete was not fully available because of the injury. */
export const contributionsOfInjuries = (tx: Tx) => {
  const organisation = sql`${tx.scope.organisationId}::uuid`;
  return sql`
    limiting as materialized (
      select reason_id, from_day, to_day from availability_contributions
      where organisation_id = ${organisation} and state <> 'full'
    ),
    contributions as (
      select p.injury_id, p.onset_day, p.left_on, l.from_day, l.to_day
      from injuries_placed p
      join availability_reasons r on r.organisation_id = ${organisation} and r.injury_id = p.injury_id
      join limiting l on l.reason_id = r.id
    )`;
};

/** Every injury of the range with what decides whether it counts, and its days of time loss up to today. */
export async function listInjuryRows(tx: Tx, range: Range): Promise<InjuryRow[]> {
  const today = sql`${tx.scope.today}::date`;
  const rows = await tx.execute<InjuryRow>(sql`
    with ${placedInjuries(tx, range)},
    ${contributionsOfInjuries(tx)},
    lost as (
      select c.injury_id, bool_or(c.from_day <= c.until and (c.to_day is null or c.to_day >= c.until)) as ongoing,
        range_agg(daterange(greatest(c.from_day, c.onset_day + 1), least(c.to_day, c.until) + 1))
          filter (where least(c.to_day, c.until) >= greatest(c.from_day, c.onset_day + 1)) as days
      from (select *, least(${today}, left_on) as until from contributions where from_day <= ${today}) c
      group by c.injury_id
    )
    select p.injury_id as id, p.athlete_id as "athleteId", p.sex, p.age,
      p.onset_day::text as "onsetDay", p.day::text as day, p.body_area as "bodyArea", p.side, p.contact,
      p.movement, p.tissue, p.pathology, p.warmed_up as "warmedUp", p.session_id as "sessionId", p.onset,
      p.subsequence, p.outside_sport as "outsideSport", p.withdrawn, p.team_id as "teamId",
      p.session_kind as "sessionKind", p.session_state as "sessionState",
      p.session_aes as "sessionAes", p.session_hours as "sessionHours",
      p.week_aes as "weekAes", p.week_hours as "weekHours",
      coalesce((select sum(upper(d) - lower(d)) from unnest(l.days) d), 0)::int as "daysLost",
      coalesce(l.ongoing, false) as ongoing
    from injuries_placed p
    left join lost l on l.injury_id = p.injury_id
    where ${inTeams(sql`p.team_id`, range.teamIds)}`);
  return [...rows];
}
