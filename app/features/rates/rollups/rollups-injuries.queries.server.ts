import { type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { inTeams, type Range } from "./exposure.queries.server";
import { contributionsOf, placedInjuries } from "./injury-rows.queries.server";
import type { RolledInjuries } from "./rollups";
import { markedSlices, markedWeeks, mondayOf, nothingMarked } from "./rollups-marks.queries.server";

/** The SQL of injuries counted per day beforehand. What they are counted by is said in rollups.ts. */

const nobodysTeam = sql`'00000000-0000-0000-0000-000000000000'::uuid`;

/**
 * Injuries of a range as rows of `injury_rollup`, counted from the records. The reasons are those of the numerator
 * rules (counting.ts) that leave an injury out whatever is asked, in their order.
 * @param only a further condition on the day that an injury is counted on
 */
export const injuryCounts = (tx: Tx, range: Range, only?: (day: SQL) => SQL) => sql`
  with ${placedInjuries(tx, range, only)}
  select p.day, coalesce(p.team_id, ${nobodysTeam}) as team_id, coalesce(p.session_kind, 'none') as kind, p.sex,
    coalesce(p.age, -1)::smallint as age, coalesce(p.onset = 'gradual', false) as gradual,
    case
      when p.withdrawn then 'withdrawn'
      when p.outside_sport then 'outside_sport'
      when p.subsequence = 'exacerbation' then 'exacerbation'
      when p.session_kind not in ('training', 'match') then 'other_kind'
      when p.onset = 'gradual' then 'none'
      when p.session_kind is null then 'no_session'
      when p.session_state not in ('held', 'abandoned') then 'not_held'
      when not p.session_aes and not p.session_hours then 'session_without_exposure'
      else 'none'
    end as left_out,
    case when p.onset = 'gradual' then p.week_aes else p.session_aes end as aes,
    case when p.onset = 'gradual' then p.week_hours else p.session_hours end as hours,
    coalesce(l.from_day, 'infinity') as time_loss_from, count(*)::int as injuries
  from injuries_placed p
  cross join lateral (
    select min(greatest(c.from_day, p.onset_day + 1)) as from_day from (${contributionsOf(tx)}) c
    where greatest(c.from_day, p.onset_day + 1) <= coalesce(least(c.to_day, p.left_on), 'infinity')
  ) l
  where ${inTeams(sql`p.team_id`, range.teamIds)}
  group by 1, 2, 3, 4, 5, 6, 7, 8, 9, 10`;

const countedRow = (tx: Tx) => sql`
  nullif(c.team_id, ${nobodysTeam}) as "teamId", c.day::text as day, nullif(c.kind, 'none') as kind, c.sex,
  nullif(c.age, -1)::int as age, c.gradual, nullif(c.left_out, 'none') as "leftOut", c.aes, c.hours,
  c.time_loss_from <= ${tx.scope.today}::date as "timeLoss", sum(c.injuries)::int as injuries`;

const grouped = (tx: Tx, counts: SQL) =>
  sql`select ${countedRow(tx)} from (${counts}) c group by 1, 2, 3, 4, 5, 6, 7, 8, 9, 10`;

const rolledInjuries = (tx: Tx, { from, to, teamIds }: Range, only: SQL) => sql`
  select r.day, r.team_id, r.kind, r.sex, r.age, r.gradual, r.left_out, r.aes, r.hours, r.time_loss_from, r.injuries
  from injury_rollup r
  where r.organisation_id = ${tx.scope.organisationId}::uuid and r.day between ${from}::date and ${to}::date
    and ${inTeams(sql`r.team_id`, teamIds)} and ${only}`;

/** Counted from the records themselves: what the roll-up must equal. */
export async function countInjuriesLive(tx: Tx, range: Range): Promise<RolledInjuries[]> {
  const rows = await tx.execute<RolledInjuries>(grouped(tx, injuryCounts(tx, range)));
  return [...rows];
}

/** SQL: no exposure lies in the parts of the first and the last week that the range cuts off. */
const nothingCutOff = (tx: Tx, { from, to }: Range) => sql`not (select exists (
  select 1 from exposure_rollup e where e.organisation_id = ${tx.scope.organisationId}::uuid
    and (e.day between ${mondayOf(sql`${from}::date`)} and ${from}::date - 1
      or e.day between ${to}::date + 1 and ${mondayOf(sql`${to}::date`)} + 6)))`;

/** SQL: the week of a day is one that the range cuts. */
const isCut = (day: SQL, { from, to }: Range) =>
  sql`(${mondayOf(day)} < ${from}::date or ${mondayOf(day)} + 6 > ${to}::date)`;

/**
 * Injuries of a range by whatever decides whether they count. Clean weeks come from the roll-up; marked ones, and those
 * that the range cuts, from the same counting as the live one. As with exposure, the first statement serves when nothing
 * is marked or cut, and finds nothing otherwise. Who may not read injuries counts none.
 */
export async function countInjuriesRolled(tx: Tx, range: Range): Promise<RolledInjuries[]> {
  const undisturbed = sql`${nothingMarked(tx)} and ${nothingCutOff(tx, range)}`;
  const clean = await tx.execute<RolledInjuries>(grouped(tx, rolledInjuries(tx, range, undisturbed)));
  if (clean.length > 0) return [...clean];
  const live = (day: SQL) =>
    sql`(${isCut(day, range)} or ${mondayOf(day)} in (select week from marked_weeks))`;
  const rows = await tx.execute<RolledInjuries>(sql`
    with ${markedSlices(tx)}, ${markedWeeks(tx)}
    ${grouped(
      tx,
      sql`${rolledInjuries(tx, range, sql`not ${isCut(sql`r.day`, range)} and not exists (select 1 from marked_weeks m where m.week = ${mondayOf(sql`r.day`)})`)}
        union all (${injuryCounts(tx, range, live)})`,
    )}`);
  return [...rows];
}
