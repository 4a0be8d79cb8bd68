import { type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import type { RatesFilters } from "../filters";
import type { Band } from "../groups";
import { ageInYears, inTeams, type Range } from "../rollups/exposure.queries.server";
import { mondayOf } from "../rollups/rollups-marks.queries.server";
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

type Keys = { place: SQL; key: SQL };

/**
 * The group of an athlete's day of a piece `p`, and what the pieces of a roster `o` keep apart: a team, a sport or
 * nothing.
 */
function keysOf(by: PeopleGrouping, bands: readonly Band[], day: SQL): Keys {
  const band = bandLabel(ageInYears(sql`p.born`, day), bands);
  const nowhere = sql`''`;
  const keys: Record<PeopleGrouping, Keys> = {
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

/** CTE `pieces`: for each athlete the days on a roster of the view, once in the whole and once in each place. */
function rosterPieces(tx: Tx, { from, to, teamIds, people, by, bands }: Ask): SQL {
  const organisation = sql`${tx.scope.organisationId}::uuid`;
  const leftOn = sql`(a.archived_at at time zone ${tx.scope.timeZone})::date`;
  const { place } = keysOf(by, bands, sql`l.day`);
  return sql`
    on_roster as materialized (
      select r.athlete_id, r.team_id, t.sport, a.sex, a.date_of_birth as born,
        daterange(greatest(r.from_day, ${from}::date), least(r.to_day, ${leftOn}, ${to}::date), '[]') as days
      from roster_entries r
      join athletes a on a.organisation_id = ${organisation} and a.id = r.athlete_id
      join teams t on t.organisation_id = ${organisation} and t.id = r.team_id
      where r.organisation_id = ${organisation} and ${inTeams(sql`r.team_id`, teamIds)}
        and r.from_day <= ${to}::date and coalesce(r.to_day, 'infinity') >= ${from}::date
        and greatest(r.from_day, ${from}::date) <= coalesce(${leftOn}, 'infinity')
        and (${people.sex} = 'any' or a.sex = ${people.sex})
        and (${people.sport} = 'any' or t.sport = ${people.sport})
    ),
    pieces as materialized (
      select 'all' as slice, '' as place, athlete_id, sex, born, unnest(range_agg(days)) as days
      from on_roster group by athlete_id, sex, born
      union all
      select 'group', ${place}, o.athlete_id, o.sex, o.born, unnest(range_agg(o.days))
      from on_roster o group by 2, 3, 4, 5
    )`;
}

/** CTE `limited_days`: one row per athlete and day that was not full, with how and why. */
function limitedDays(tx: Tx, { from, to }: Range): SQL {
  const organisation = sql`${tx.scope.organisationId}::uuid`;
  return sql`
    limits as materialized (
      select c.athlete_id, c.state, r.cause, greatest(c.from_day, ${from}::date) as from_day,
        least(c.to_day, ${to}::date) as to_day
      from availability_contributions c
      join availability_reasons r on r.organisation_id = ${organisation} and r.id = c.reason_id
      where c.organisation_id = ${organisation} and c.state <> 'full' and c.from_day <= ${to}::date
        and coalesce(c.to_day, 'infinity') >= ${from}::date
    ),
    limited_days as materialized (
      select l.athlete_id, d.at::date as day, bool_or(l.state = 'unavailable') as unavailable,
        bool_or(l.cause = 'injury') as injury, bool_or(l.cause = 'illness') as illness,
        bool_or(l.cause not in ('injury', 'illness')) as other
      from limits l cross join lateral ${daysBetween(sql`l.from_day`, sql`l.to_day`)} as d(at)
      group by 1, 2
    )`;
}

/**
 * Prevalence by week and by group, from `from` to `to`. An athlete's day counts while a roster entry holds and not after
 * the day the athlete left; once in the whole, once in each team. A day is not full when any reason makes it so; the
 * most restrictive one gives its state, and each cause that limits the day is counted. A report of a coach that nobody
 * has taken up yet is among the other causes. The roster is counted day by day; the few days that were not full are
 * looked up in its pieces, so that no list of all athletes and days is sorted.
 */
export async function sumPrevalence(tx: Tx, ask: Ask): Promise<PrevalenceSums[]> {
  const { by, bands, people } = ask;
  const ofPiece = (day: SQL) => sql`case p.slice when 'all' then '' else ${keysOf(by, bands, day).key} end`;
  const isOfAge = (day: SQL) =>
    people.age === "any" ? sql`true` : sql`${bandLabel(ageInYears(sql`p.born`, day), bands)} = ${people.age}`;
  const day = sql`d.at::date`;
  const rows = await tx.execute<PrevalenceSums>(sql`
    with ${rosterPieces(tx, ask)},
    ${limitedDays(tx, ask)},
    rosters as (
      select p.slice, ${ofPiece(day)} as key, ${day} as day, count(*)::float8 as roster
      from pieces p cross join lateral ${daysBetween(sql`lower(p.days)`, sql`(upper(p.days) - 1)`)} as d(at)
      where ${isOfAge(day)}
      group by 1, 2, 3
    ),
    limited as materialized (
      select p.slice, ${ofPiece(sql`l.day`)} as key, l.*
      from limited_days l join pieces p on p.athlete_id = l.athlete_id and p.days @> l.day
      where ${isOfAge(sql`l.day`)}
    ),
    limited_rosters as (
      select slice, key, day, count(*) as limited, count(*) filter (where unavailable) as unavailable,
        count(*) filter (where not unavailable) as modified, count(*) filter (where injury) as injury,
        count(*) filter (where illness) as illness, count(*) filter (where other) as other
      from limited group by 1, 2, 3
    ),
    sums as (
      select r.slice, r.key, ${mondayOf(sql`r.day`)} as week, count(*)::int as days, sum(r.roster) as roster,
        coalesce(sum(l.limited / r.roster), 0) as limited,
        coalesce(sum(l.unavailable / r.roster), 0) as unavailable,
        coalesce(sum(l.modified / r.roster), 0) as modified, coalesce(sum(l.injury / r.roster), 0) as injury,
        coalesce(sum(l.illness / r.roster), 0) as illness, coalesce(sum(l.other / r.roster), 0) as other
      from rosters r
      left join limited_rosters l on l.slice = r.slice and l.key = r.key and l.day = r.day
      group by grouping sets ((1, 2), (1, 2, 3))
    ),
    affected as (
      select slice, key, ${mondayOf(sql`day`)} as week, count(distinct athlete_id)::int as athletes
      from limited group by grouping sets ((1, 2), (1, 2, 3))
    )
    select s.slice, s.key, s.week::text as week, s.days, s.roster, s.limited, s.unavailable, s.modified, s.injury,
      s.illness, s.other, coalesce(a.athletes, 0) as affected
    from sums s
    left join affected a on a.slice = s.slice and a.key = s.key and a.week is not distinct from s.week
    where s.slice = 'all' or s.week is null
    order by s.slice, s.key, s.week nulls first`);
  return [...rows];
}
