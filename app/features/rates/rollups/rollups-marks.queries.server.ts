import { type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import type { Actor } from "~db/schema/tenancy";

/**
 * What the marks of roll-ups touch. A mark holds the ids of what changed (db/schema/rollups.ts); here they are turned
 * into slices, looked up in the reader's own snapshot: exposure is rolled up by team and day, injuries by week.
 */

const readers: readonly Actor[] = ["lead", "trainer", "job"];

/** Whether this transaction sees the marks of roll-ups. Who does not cannot know what is current, and counts live. */
export const readsRollups = (tx: Tx) => readers.some((actor) => tx.scope.actors.includes(actor));

const org = (tx: Tx) => sql`${tx.scope.organisationId}::uuid`;

export const nothingMarked = (tx: Tx) =>
  sql`not (select exists (select 1 from rollup_marks where organisation_id = ${org(tx)}))`;

/** SQL: the Monday of a day's week. */
export const mondayOf = (day: SQL) => sql`(${day} - (extract(isodow from ${day})::int - 1))`;

/**
 * CTEs `marks` and `marked_slices` (team_id, day): every team's day whose exposure may have changed. An athlete touches
 * the sessions they took part in; the roster, an availability and a rule of play only sessions whose exposure is
 * shared out or estimated.
 * @param only which marks; left out: all of the organisation
 */
export const markedSlices = (tx: Tx, only: SQL = sql`true`) => sql`
  marks as materialized (
    select distinct m.cause, m.team_id, m.session_id, m.athlete_id, m.injury_id, m.reason_id, m.sport, m.from_day,
      m.to_day
    from rollup_marks m where m.organisation_id = ${org(tx)} and ${only}
  ),
  on_roster as (
    select r.team_id, greatest(r.from_day, case when m.cause = 'availability' then m.from_day end) as from_day, r.to_day
    from marks m join roster_entries r on r.organisation_id = ${org(tx)} and r.athlete_id = m.athlete_id
    where m.cause in ('athlete', 'availability')
    union all
    select m.team_id, m.from_day, m.to_day from marks m where m.cause = 'roster'
  ),
  ruled as (
    select m.team_id from marks m where m.cause = 'team'
    union
    select t.id from marks m join teams t on t.organisation_id = ${org(tx)} and t.sport = m.sport
  ),
  marked_slices as materialized (
    select m.team_id, m.from_day as day from marks m where m.cause = 'session'
    union
    select s.team_id, s.day from marks m
    join sessions s on s.organisation_id = ${org(tx)} and s.id = m.session_id
    union
    select s.team_id, s.day from marks m
    join participations p on p.organisation_id = ${org(tx)} and p.athlete_id = m.athlete_id
    join sessions s on s.organisation_id = ${org(tx)} and s.id = p.session_id
    where m.cause = 'athlete'
    union
    select s.team_id, s.day from on_roster r
    join sessions s on s.organisation_id = ${org(tx)} and s.team_id = r.team_id and s.day >= r.from_day
      and (r.to_day is null or s.day <= r.to_day) and s.exposure_grade in ('headcount', 'estimated')
    union
    select s.team_id, s.day from ruled r
    join sessions s on s.organisation_id = ${org(tx)} and s.team_id = r.team_id and s.exposure_grade = 'estimated'
  )`;

/**
 * CTE `marked_weeks` (week: a Monday), after `markedSlices`: every week whose injuries may count otherwise. The exposure
 * of a week decides over its injuries, so each marked slice marks its week. An injury touches the days of all its
 * revisions, since it was counted on an earlier one.
 */
export const markedWeeks = (tx: Tx) => sql`
  touched_injuries as (
    select m.injury_id as id from marks m where m.injury_id is not null
    union
    select r.injury_id from marks m
    join availability_reasons r on r.organisation_id = ${org(tx)} and r.id = m.reason_id
    union
    select i.id from marks m join injuries i on i.organisation_id = ${org(tx)} and i.athlete_id = m.athlete_id
    where m.cause in ('athlete', 'roster')
    union
    select r.injury_id from marks m
    join injury_revisions r on r.organisation_id = ${org(tx)} and r.session_id = m.session_id
    union
    select i.id from marks m join injuries i on i.organisation_id = ${org(tx)} where m.cause = 'organisation'
  ),
  marked_weeks as materialized (
    select ${mondayOf(sql`day`)} as week from marked_slices
    union
    select ${mondayOf(sql`m.from_day`)} from marks m where m.cause = 'injury' and m.from_day is not null
    union
    select ${mondayOf(sql`d.day`)} from touched_injuries t
    join injury_revisions r on r.organisation_id = ${org(tx)} and r.injury_id = t.id
    left join sessions s on s.organisation_id = ${org(tx)} and s.id = r.session_id
    cross join lateral (values (r.onset_day), (s.day)) as d(day)
    where d.day is not null
  )`;
