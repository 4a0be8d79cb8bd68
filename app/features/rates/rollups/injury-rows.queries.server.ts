import { type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import type { InjuryRow } from "../counting";
import { ageInYears, exposureOf, exposureRolledUp, inTeams, type Range } from "./exposure.queries.server";
import { mondayOf, nothingMarked, readsRollups } from "./rollups-marks.queries.server";

/** The SQL of injuries: on which day each is counted, for which team, and what decides whether it counts. */

/** The day an injury is counted on, of a revision `i` and its session `s`. */
const countedDay = sql`case when i.onset is distinct from 'gradual' then coalesce(s.day, i.onset_day) else i.onset_day end`;

type ExposureOfWeek = (tx: Tx, range: Range, team: SQL, monday: SQL) => SQL;

const exposureFromRecords: ExposureOfWeek = (tx, range, team, monday) =>
  exposureOf(tx, range, sql`s.team_id = ${team} and s.day between ${monday} and ${monday} + 6`);

/**
 * CTEs up to `injuries_placed`: the injuries counted in a range with their team and whether their session and the
 * team's week have exposure, in each unit. A sudden injury belongs to the day of its session, so that one after
 * midnight stays with its exposure; any other to the day of onset. Without a session the team is one of the athlete's
 * on the day of onset: one with exposure in that week before others, then the one joined first. Of a week only the
 * days of the range count. Everything is looked up injury by injury: they are few beside the sessions, and the planner
 * has no numbers for what one part of a statement hands to the next.
 * @param only a further condition on the day that an injury is counted on
 * @param exposureOfWeek a query of one row: the exposure of a team's week; left out: counted from the records
 */
export const placedInjuries = (
  tx: Tx,
  range: Range,
  only: (day: SQL) => SQL = () => sql`true`,
  exposureOfWeek: ExposureOfWeek = exposureFromRecords,
) => {
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
    homes as (
      select f.*, coalesce(f.session_team, h.team_id) as team_id
      from found f
      left join lateral (
        select entry.team_id from roster_entries entry
        cross join lateral (${exposureOfWeek(tx, range, sql`entry.team_id`, sql`f.week`)}) w
        where f.session_team is null and entry.organisation_id = ${organisation} and entry.athlete_id = f.athlete_id
          and entry.from_day <= f.onset_day and (entry.to_day is null or entry.to_day >= f.onset_day)
        order by w.aes desc, w.hours desc, entry.from_day, entry.team_id limit 1
      ) h on true
    ),
    injuries_placed as materialized (
      select f.*, a.sex, ${ageInYears(sql`a.date_of_birth`, sql`f.onset_day`)} as age,
        (a.archived_at at time zone ${tx.scope.timeZone})::date as left_on,
        m.aes as session_aes, m.hours as session_hours, w.aes as week_aes, w.hours as week_hours
      from homes f
      join athletes a on a.organisation_id = ${organisation} and a.id = f.athlete_id
      cross join lateral (${exposureOf(tx, range, sql`s.id = f.session_id`)}) m
      cross join lateral (${exposureOfWeek(tx, range, sql`f.team_id`, sql`f.week`)}) w
    )`;
};

/** For a lateral join to an injury `p`: when the athlete was not fully available because of it. */
export const contributionsOf = (tx: Tx) => sql`
  select c.from_day, c.to_day
  from availability_reasons reason
  cross join lateral (
    select v.from_day, v.to_day from availability_contributions v
    where v.organisation_id = ${tx.scope.organisationId}::uuid and v.reason_id = reason.id and v.state <> 'full'
    -- Kept apart, so that the view is asked reason by reason.
    offset 0
  ) c
  where reason.organisation_id = ${tx.scope.organisationId}::uuid and reason.injury_id = p.injury_id`;

const injuryRows = (tx: Tx, range: Range, placed: SQL) => {
  const today = sql`${tx.scope.today}::date`;
  return sql`
    with ${placed}
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
    cross join lateral (
      select bool_or(c.from_day <= u.until and (c.to_day is null or c.to_day >= u.until)) as ongoing,
        range_agg(daterange(greatest(c.from_day, p.onset_day + 1), least(c.to_day, u.until) + 1))
          filter (where least(c.to_day, u.until) >= greatest(c.from_day, p.onset_day + 1)) as days
      from (select least(${today}, p.left_on) as until) u, (${contributionsOf(tx)}) c
      where c.from_day <= ${today}
    ) l
    where ${inTeams(sql`p.team_id`, range.teamIds)}`;
};

/**
 * Every injury of the range with what decides whether it counts, and its days of time loss up to today. As with
 * exposure, the first statement serves when nothing is marked: the weeks come from the roll-up, which is shorter to plan.
 */
export async function listInjuryRows(tx: Tx, range: Range): Promise<InjuryRow[]> {
  if (readsRollups(tx)) {
    const undisturbed = placedInjuries(tx, range, () => nothingMarked(tx), exposureRolledUp);
    const clean = await tx.execute<InjuryRow>(injuryRows(tx, range, undisturbed));
    if (clean.length > 0) return [...clean];
  }
  return listInjuryRowsLive(tx, range);
}

/** The same, counted from the records alone. */
export async function listInjuryRowsLive(tx: Tx, range: Range): Promise<InjuryRow[]> {
  const rows = await tx.execute<InjuryRow>(injuryRows(tx, range, placedInjuries(tx, range)));
  return [...rows];
}
