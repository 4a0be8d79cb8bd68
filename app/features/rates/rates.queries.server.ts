import { type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import type { ExposureCell, InjuryRow } from "./counting";
import type { SessionTally } from "./coverage";
import type { Band, RatedTeam } from "./groups";

/** The only SQL of the rates: one pass per question. What counts is said in counting.ts. */

export type Range = {
  /** ISO days, both included; `to` never after today. */
  from: string;
  to: string;
  /** The teams looked at; null: every team of the organisation. */
  teamIds: readonly string[] | null;
};

const uuids = (ids: readonly string[]) =>
  sql`array[${sql.join(
    ids.map((id) => sql`${id}`),
    sql`, `,
  )}]::uuid[]`;

function inTeams(column: SQL, teamIds: Range["teamIds"]): SQL {
  if (teamIds === null) return sql`true`;
  return teamIds.length === 0 ? sql`false` : sql`${column} = any(${uuids(teamIds)})`;
}

/**
 * Completed years on a day, as `ageOn` of the statistics counts them: who is born on 29 February is a year older on
 * 1 March in common years. A birth after the day gives null.
 */
export const ageInYears = (born: SQL, day: SQL) => sql`case when ${born} <= ${day} then
    (extract(year from ${day}) - extract(year from ${born}))::int
    - case when (extract(month from ${day}), extract(day from ${day}))
                >= (extract(month from ${born}), extract(day from ${born})) then 0 else 1 end
  end`;

/** An estimate is for matches alone: whatever says so of a training has no exposure. */
const countedGrade = sql`case when s.kind <> 'match' and s.exposure_grade = 'estimated' then 'none' else s.exposure_grade end`;

/**
 * Trainings and matches that took place, with the grade of their exposure and, for a headcount or an estimate, its
 * players and minutes each. The same rules as `exposureOfSession` of the sessions, for many sessions at once.
 */
const countedSessions = (tx: Tx, { from, to, teamIds }: Range) => sql`
  graded as (
    select s.id, s.team_id, s.day, s.kind, t.sport, t.under_age, s.headcount, s.headcount_minutes,
      case when s.state = 'abandoned' then s.abandoned_after end as stopped_after, ${countedGrade} as grade
    from sessions s
    join teams t on t.organisation_id = s.organisation_id and t.id = s.team_id
    where s.organisation_id = ${tx.scope.organisationId}::uuid
      and s.day between ${from}::date and ${to}::date
      and s.state in ('held', 'abandoned') and s.kind in ('training', 'match')
      and ${inTeams(sql`s.team_id`, teamIds)}
  ),
  counted as (
    select g.id, g.team_id, g.day, g.kind, g.grade,
      case g.grade when 'headcount' then g.headcount when 'estimated' then r.players_on_field end as players,
      case g.grade when 'headcount' then g.headcount_minutes::float8
        when 'estimated' then least(r.regulation_minutes, g.stopped_after) end as minutes
    from graded g
    left join lateral (
      select players_on_field, regulation_minutes from sport_rules
      where organisation_id = ${tx.scope.organisationId}::uuid and sport = g.sport
        and from_age < coalesce(g.under_age, 999)
      order by from_age desc limit 1
    ) r on g.grade = 'estimated'
  )`;

/**
 * One row per athlete and session: recorded minutes, or the share of a headcount or of an estimate that falls on
 * each athlete of that day's roster who is not unavailable, so that a group's hours and its injuries stay together.
 * What lies above the roster has no athlete.
 */
const exposureParts = (tx: Tx, range: Range) => sql`
  ${countedSessions(tx, range)},
  unavailable as materialized (
    select athlete_id, from_day, to_day from availability_contributions
    where organisation_id = ${tx.scope.organisationId}::uuid and state = 'unavailable'
  ),
  sharing as (
    select c.id, r.athlete_id, count(*) over (partition by c.id) as sharers
    from counted c
    join roster_entries r on r.organisation_id = ${tx.scope.organisationId}::uuid and r.team_id = c.team_id
      and r.from_day <= c.day and (r.to_day is null or r.to_day >= c.day)
    where c.players > 0 and c.minutes > 0 and not exists (
      select 1 from unavailable u where u.athlete_id = r.athlete_id
        and u.from_day <= c.day and (u.to_day is null or u.to_day >= c.day)
    )
  ),
  parts as (
    select c.team_id, c.day, c.kind, c.grade, p.athlete_id, 1::float8 as people, p.minutes::float8 as minutes
    from counted c
    join participations p on p.organisation_id = ${tx.scope.organisationId}::uuid and p.session_id = c.id
    where c.grade = 'recorded' and p.presence = 'took_part' and p.minutes > 0
    union all
    select c.team_id, c.day, c.kind, c.grade, s.athlete_id, least(1, c.players::float8 / s.sharers), c.minutes
    from counted c join sharing s on s.id = c.id
    union all
    select c.team_id, c.day, c.kind, c.grade, null, c.players - coalesce(s.sharers, 0), c.minutes
    from counted c left join (select distinct id, sharers from sharing) s on s.id = c.id
    where c.players > coalesce(s.sharers, 0) and c.minutes > 0
  )`;

/** Exposure summed by team, kind, grade, sex and age in years on the day of the session. */
export async function sumExposureCells(tx: Tx, range: Range): Promise<ExposureCell[]> {
  const rows = await tx.execute<ExposureCell>(sql`
    with ${exposureParts(tx, range)}
    select p.team_id as "teamId", p.kind, p.grade, coalesce(a.sex, 'unknown') as sex,
      ${ageInYears(sql`a.date_of_birth`, sql`p.day`)} as age,
      sum(case when p.grade = 'estimated' then 0 else p.people end) as aes,
      sum(p.people * p.minutes) / 60 as hours
    from parts p
    left join athletes a on a.organisation_id = ${tx.scope.organisationId}::uuid and a.id = p.athlete_id
    group by 1, 2, 3, 4, 5`);
  return [...rows];
}

/** Who was exposed, by what the fixed tables group by: to count athletes where small numbers are hidden. */
export async function listExposedAthletes(tx: Tx, range: Range) {
  const rows = await tx.execute<Pick<ExposureCell, "kind" | "sex" | "age"> & { athleteId: string }>(sql`
    with ${exposureParts(tx, range)}
    select distinct p.athlete_id as "athleteId", p.kind, a.sex,
      ${ageInYears(sql`a.date_of_birth`, sql`p.day`)} as age
    from parts p
    join athletes a on a.organisation_id = ${tx.scope.organisationId}::uuid and a.id = p.athlete_id`);
  return [...rows];
}

/**
 * Every injury of the range with what decides whether it counts: the state and exposure of its session, the exposure
 * of its team's week, its days of time loss up to today. A sudden injury belongs to the day of its session, so that
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
        i.session_id, s.kind as session_kind, s.state as session_state, s.team_id as session_team
      from current_injuries i
      left join sessions s on s.organisation_id = i.organisation_id and s.id = i.session_id
      where i.organisation_id = ${organisation}
        and case when i.onset is distinct from 'gradual' then coalesce(s.day, i.onset_day) else i.onset_day end
          between ${range.from}::date and ${range.to}::date
    ),
    placed as (
      select f.*, coalesce(f.session_team, home.team_id) as team_id
      from found f
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
      select p.injury_id, bool_or(c.to_day is null or c.to_day >= ${today}) as ongoing,
        range_agg(daterange(greatest(c.from_day, p.onset_day + 1), least(c.to_day, ${today}) + 1))
          filter (where least(c.to_day, ${today}) > p.onset_day) as days
      from placed p
      join availability_reasons r on r.organisation_id = ${organisation} and r.injury_id = p.injury_id
      join contributions c on c.reason_id = r.id
      group by p.injury_id
    )
    select p.injury_id as id, p.athlete_id as "athleteId", a.sex,
      ${ageInYears(sql`a.date_of_birth`, sql`p.onset_day`)} as age,
      p.onset, p.subsequence, p.outside_sport as "outsideSport", p.withdrawn, p.team_id as "teamId",
      p.session_kind as "sessionKind", p.session_state as "sessionState",
      coalesce(m.aes, false) as "sessionAes", coalesce(m.hours, false) as "sessionHours",
      coalesce(w.aes, false) as "weekAes", coalesce(w.hours, false) as "weekHours",
      coalesce((select sum(upper(d) - lower(d)) from unnest(l.days) d), 0)::int as "daysLost",
      coalesce(l.ongoing, false) as ongoing
    from placed p
    join athletes a on a.organisation_id = ${organisation} and a.id = p.athlete_id
    left join amounts m on m.id = p.session_id
    left join weeks w on w.team_id = p.team_id and w.week = date_trunc('week', p.onset_day)::date
    left join lost l on l.injury_id = p.injury_id
    where ${range.teamIds === null ? sql`true` : inTeams(sql`p.team_id`, range.teamIds)}`);
  return [...rows];
}

/** Trainings and matches by team and kind: how many took place, and with which grade of exposure. */
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
    select team_id as "teamId", kind,
      (count(*) filter (where held))::int as held,
      (count(*) filter (where held and grade = 'recorded'))::int as recorded,
      (count(*) filter (where held and grade = 'headcount'))::int as headcount,
      (count(*) filter (where held and grade = 'estimated'))::int as estimated,
      (count(*) filter (where held and grade = 'none'))::int as "withoutExposure",
      (count(*) filter (where state = 'planned' and day < ${tx.scope.today}::date))::int as unconfirmed,
      (count(*) filter (where state = 'cancelled'))::int as cancelled
    from tallied group by 1, 2`);
  return [...rows];
}

/** Teams that confirmed for at least one week of the range that nobody was newly hurt. */
export async function listConfirmingTeams(tx: Tx, { from, to, teamIds }: Range): Promise<string[]> {
  const rows = await tx.execute<{ teamId: string }>(sql`
    select distinct team_id as "teamId" from no_injury_weeks
    where organisation_id = ${tx.scope.organisationId}::uuid
      and week_start between ${from}::date - 6 and ${to}::date and ${inTeams(sql`team_id`, teamIds)}`);
  return rows.map(({ teamId }) => teamId);
}

/** Every team that may have exposure, archived ones too: a season's rates keep the teams it had. */
export async function listRatedTeams(tx: Tx, teamIds: Range["teamIds"]): Promise<RatedTeam[]> {
  const rows = await tx.execute<RatedTeam>(sql`
    select id, name, sport, sex from teams
    where organisation_id = ${tx.scope.organisationId}::uuid and ${inTeams(sql`id`, teamIds)}
    order by name`);
  return [...rows];
}

/** The organisation's age bands and its small number. */
export async function findCountingRules(tx: Tx) {
  const [row] = await tx.execute<{ bands: Band[]; smallNumber: number }>(sql`
    select age_bands as bands, small_number as "smallNumber" from organisations
    where organisation_id = ${tx.scope.organisationId}::uuid`);
  return row ?? { bands: [], smallNumber: 5 };
}
