import { type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { ageInYears, inTeams, type Range } from "./exposure.queries.server";
import type { RatesFilters } from "./filters";
import type { Band } from "./groups";
import type { PeopleGrouping, PrevalenceSums } from "./prevalence";

/** The SQL of prevalence: who stood on a roster on each day, and who of them was not fully available, and why. */

type Ask = Range & {
  by: PeopleGrouping;
  bands: readonly Band[];
  people: Pick<RatesFilters, "sex" | "age" | "sport">;
};

/** The label of an age's band, as `bandOf` finds it. */
function bandLabel(age: SQL, bands: readonly Band[]): SQL {
  const cases = bands.map(({ from, to, label }) =>
    to === null
      ? sql`when ${age} >= ${from}::int then ${label}::text`
      : sql`when ${age} between ${from}::int and ${to}::int then ${label}::text`,
  );
  return cases.length === 0 ? sql`'unknown'` : sql`case ${sql.join(cases, sql` `)} else 'unknown' end`;
}

const day = sql`d.at::date`;

/** The group of an athlete's day, and of what the pieces of a roster keep apart: a team, a sport or nothing. */
function keysOf(by: PeopleGrouping, bands: readonly Band[]): { place: SQL; key: SQL } {
  const band = bandLabel(ageInYears(sql`p.born`, day), bands);
  const nowhere = sql`''`;
  const keys: Record<PeopleGrouping, { place: SQL; key: SQL }> = {
    sex: { place: nowhere, key: sql`p.sex` },
    age: { place: nowhere, key: band },
    "sex-age": { place: nowhere, key: sql`p.sex || ' ' || ${band}` },
    month: { place: nowhere, key: sql`to_char(${day}, 'YYYY-MM')` },
    sport: { place: sql`o.sport`, key: sql`p.place` },
    team: { place: sql`o.team_id::text`, key: sql`p.place` },
  };
  return keys[by];
}

/** Days from one to another, both included. */
const daysBetween = (from: SQL, to: SQL) =>
  sql`generate_series(${from}::timestamp, ${to}::timestamp, interval '1 day')`;

/**
 * Prevalence by week and by group, from `from` to `to`. An athlete's day counts while a roster entry holds and not after
 * the day the athlete left; once in the whole, once in each team. A day is not full when any reason makes it so; the
 * most restrictive one gives its state, and each cause that limits the day is counted. A report of a coach that nobody
 * has taken up yet is among the other causes.
 */
export async function sumPrevalence(
  tx: Tx,
  { from, to, teamIds, by, bands, people }: Ask,
): Promise<PrevalenceSums[]> {
  const organisation = sql`${tx.scope.organisationId}::uuid`;
  const { place, key } = keysOf(by, bands);
  const ofAge =
    people.age === "any" ? sql`true` : sql`${bandLabel(ageInYears(sql`p.born`, day), bands)} = ${people.age}`;
  const rows = await tx.execute<PrevalenceSums>(sql`
    with on_roster as materialized (
      select r.athlete_id, r.team_id, t.sport, a.sex, a.date_of_birth as born,
        daterange(greatest(r.from_day, ${from}::date),
          least(r.to_day, (a.archived_at at time zone ${tx.scope.timeZone})::date, ${to}::date), '[]') as days
      from roster_entries r
      join athletes a on a.organisation_id = ${organisation} and a.id = r.athlete_id
      join teams t on t.organisation_id = ${organisation} and t.id = r.team_id
      where r.organisation_id = ${organisation} and ${inTeams(sql`r.team_id`, teamIds)}
        and r.from_day <= ${to}::date and coalesce(r.to_day, 'infinity') >= ${from}::date
        and greatest(r.from_day, ${from}::date)
          <= coalesce((a.archived_at at time zone ${tx.scope.timeZone})::date, 'infinity')
        and (${people.sex} = 'any' or a.sex = ${people.sex})
        and (${people.sport} = 'any' or t.sport = ${people.sport})
    ),
    pieces as (
      select 'all' as slice, '' as place, athlete_id, sex, born, unnest(range_agg(days)) as days
      from on_roster group by athlete_id, sex, born
      union all
      select 'group', ${place}, o.athlete_id, o.sex, o.born, unnest(range_agg(o.days))
      from on_roster o group by 2, 3, 4, 5
    ),
    athlete_days as materialized (
      select p.slice, case p.slice when 'all' then '' else ${key} end as key, p.athlete_id, ${day} as day
      from pieces p cross join lateral ${daysBetween(sql`lower(p.days)`, sql`(upper(p.days) - 1)`)} as d(at)
      where ${ofAge}
    ),
    limits as materialized (
      select c.athlete_id, c.state, r.cause, greatest(c.from_day, ${from}::date) as from_day,
        least(c.to_day, ${to}::date) as to_day
      from availability_contributions c
      join availability_reasons r on r.organisation_id = ${organisation} and r.id = c.reason_id
      where c.organisation_id = ${organisation} and c.state <> 'full' and c.from_day <= ${to}::date
        and coalesce(c.to_day, 'infinity') >= ${from}::date
    ),
    limited_days as materialized (
      select l.athlete_id, ${day} as day, bool_or(l.state = 'unavailable') as unavailable,
        bool_or(l.cause = 'injury') as injury, bool_or(l.cause = 'illness') as illness,
        bool_or(l.cause not in ('injury', 'illness')) as other
      from limits l cross join lateral ${daysBetween(sql`l.from_day`, sql`l.to_day`)} as d(at)
      group by 1, 2
    ),
    by_day as (
      select m.slice, m.key, m.day, date_trunc('week', m.day::timestamp)::date as week, count(*)::float8 as roster,
        count(l.day) as limited, count(*) filter (where l.unavailable) as unavailable,
        count(*) filter (where not l.unavailable) as modified, count(*) filter (where l.injury) as injury,
        count(*) filter (where l.illness) as illness, count(*) filter (where l.other) as other
      from athlete_days m
      left join limited_days l on l.athlete_id = m.athlete_id and l.day = m.day
      group by 1, 2, 3
    ),
    sums as (
      select slice, key, week, count(*)::int as days, sum(roster)::float8 as roster,
        sum(limited / roster) as limited, sum(unavailable / roster) as unavailable,
        sum(modified / roster) as modified, sum(injury / roster) as injury,
        sum(illness / roster) as illness, sum(other / roster) as other
      from by_day
      group by grouping sets ((slice, key), (slice, key, week))
    ),
    affected as (
      select m.slice, m.key, date_trunc('week', m.day::timestamp)::date as week, count(distinct m.athlete_id)::int as affected
      from athlete_days m join limited_days l on l.athlete_id = m.athlete_id and l.day = m.day
      group by grouping sets ((1, 2), (1, 2, 3))
    )
    select s.slice, s.key, s.week::text as week, s.days, s.roster, s.limited, s.unavailable, s.modified, s.injury,
      s.illness, s.other, coalesce(a.affected, 0) as affected
    from sums s
    left join affected a on a.slice = s.slice and a.key = s.key and a.week is not distinct from s.week
    where s.slice = 'all' or s.week is null
    order by s.slice, s.key, s.week nulls first`);
  return [...rows];
}
