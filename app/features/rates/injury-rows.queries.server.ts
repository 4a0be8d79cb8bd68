import { sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import type { InjuryRow } from "./counting";
import { ageInYears, countedSessions, inTeams, type Range } from "./exposure.queries.server";

/**
 * Every injury of the range with what decides whether it counts: the state and exposure of its session, the exposure
 * of its team's week, its days of time loss up to today, or up to the day on which the athlete left the organisation. A sudden injury belongs to the day of its session, so that
 * one after midnight stays with its exposure; any other to the day of onset. Without a session the team is one of
 * the athlete's on the day of onset: one with exposure in that week before others, then the one joined first.
 */
export async function listInjuryRows(tx: Tx, range: Range): Promise<InjuryRow[]> {
  const organisation = sql`${tx.scope.organisationId}::uuid`;
  const today = sql`${tx.scope.today}::date`;
  const rows = await tx.execute<InjuryRow>(sql`
    with ${countedSessions(tx, { ...range, teamIds: null })},
    amounts as (
      select c.id, c.team_id, date_trunc('week', c.day)::date as week,
        case c.grade when 'recorded' then r.taking_part > 0
          when 'headcount' then coalesce(c.players > 0 and c.minutes > 0, false) else false end as aes,
        case c.grade when 'recorded' then r.taking_part > 0
          else coalesce(c.players > 0 and c.minutes > 0, false) end as hours
      from counted c
      left join lateral (
        select count(*) as taking_part from participations p
        where p.organisation_id = ${organisation} and p.session_id = c.id
          and p.presence = 'took_part' and p.minutes > 0
      ) r on c.grade = 'recorded'
    ),
    weeks as (
      select team_id, week, bool_or(aes) as aes, bool_or(hours) as hours from amounts group by team_id, week
    ),
    found as (
      select i.injury_id, i.athlete_id, i.onset, i.subsequence, i.outside_sport, i.withdrawn, i.onset_day,
        i.body_area, i.side, i.contact, i.movement, i.tissue, i.pathology, i.warmed_up,
        case when i.onset is distinct from 'gradual' then coalesce(s.day, i.onset_day) else i.onset_day end as day,
        i.session_id, s.kind as session_kind, s.state as session_state, s.team_id as session_team
      from current_injuries i
      left join sessions s on s.organisation_id = i.organisation_id and s.id = i.session_id
      where i.organisation_id = ${organisation}
        and case when i.onset is distinct from 'gradual' then coalesce(s.day, i.onset_day) else i.onset_day end
          between ${range.from}::date and ${range.to}::date
    ),
    placed as (
      select f.*, coalesce(f.session_team, home.team_id) as team_id, a.sex, a.date_of_birth,
        least(${today}, (a.archived_at at time zone ${tx.scope.timeZone})::date) as until
      from found f
      join athletes a on a.organisation_id = ${organisation} and a.id = f.athlete_id
      left join lateral (
        select r.team_id from roster_entries r
        left join weeks w on w.team_id = r.team_id and w.week = date_trunc('week', f.onset_day)::date
        where r.organisation_id = ${organisation} and r.athlete_id = f.athlete_id
          and r.from_day <= f.onset_day and (r.to_day is null or r.to_day >= f.onset_day)
        order by coalesce(w.aes, false) desc, coalesce(w.hours, false) desc, r.from_day, r.team_id limit 1
      ) home on f.session_team is null
    ),
    contributions as materialized (
      select reason_id, from_day, to_day from availability_contributions
      where organisation_id = ${organisation} and state <> 'full' and from_day <= ${today}
    ),
    lost as (
      select p.injury_id, bool_or(c.from_day <= p.until and (c.to_day is null or c.to_day >= p.until)) as ongoing,
        range_agg(daterange(greatest(c.from_day, p.onset_day + 1), least(c.to_day, p.until) + 1))
          filter (where least(c.to_day, p.until) >= greatest(c.from_day, p.onset_day + 1)) as days
      from placed p
      join availability_reasons r on r.organisation_id = ${organisation} and r.injury_id = p.injury_id
      join contributions c on c.reason_id = r.id
      group by p.injury_id
    )
    select p.injury_id as id, p.athlete_id as "athleteId", p.sex,
      ${ageInYears(sql`p.date_of_birth`, sql`p.onset_day`)} as age,
      p.onset_day::text as "onsetDay", p.day::text as day, p.body_area as "bodyArea", p.side, p.contact,
      p.movement, p.tissue, p.pathology, p.warmed_up as "warmedUp", p.session_id as "sessionId", p.onset, p.subsequence, p.outside_sport as "outsideSport", p.withdrawn, p.team_id as "teamId",
      p.session_kind as "sessionKind", p.session_state as "sessionState",
      coalesce(m.aes, false) as "sessionAes", coalesce(m.hours, false) as "sessionHours",
      coalesce(w.aes, false) as "weekAes", coalesce(w.hours, false) as "weekHours",
      coalesce((select sum(upper(d) - lower(d)) from unnest(l.days) d), 0)::int as "daysLost",
      coalesce(l.ongoing, false) as ongoing
    from placed p
    left join amounts m on m.id = p.session_id
    left join weeks w on w.team_id = p.team_id and w.week = date_trunc('week', p.onset_day)::date
    left join lost l on l.injury_id = p.injury_id
    where ${range.teamIds === null ? sql`true` : inTeams(sql`p.team_id`, range.teamIds)}`);
  return [...rows];
}
