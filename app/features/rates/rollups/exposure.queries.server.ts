import { type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import type { RolledGroup } from "~db/schema/rollups";
import type { ExposureCell } from "../counting";
import { markedSlices, nothingMarked, readsRollups } from "./rollups-marks.queries.server";

/** The SQL of exposure: what counts as one athlete-exposure, and how headcounts and estimates are shared out. */

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

export function inTeams(column: SQL, teamIds: Range["teamIds"]): SQL {
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
export const countedGrade = sql`case when s.kind <> 'match' and s.exposure_grade = 'estimated' then 'none' else s.exposure_grade end`;

/** SQL: a session `s` is a training or a match that took place. */
export const tookPlace = sql`s.state in ('held', 'abandoned') and s.kind in ('training', 'match')`;

/** The rule of play of a team `t` for an estimate: players on the field and regulation minutes. */
const ruleOfPlay = (tx: Tx) => sql`
  select players_on_field, regulation_minutes from sport_rules
  where g.grade = 'estimated' and organisation_id = ${tx.scope.organisationId}::uuid and sport = t.sport
    and from_age < coalesce(t.under_age, 999)
  order by from_age desc limit 1`;

/** SQL over a session `s`, its grade `g.grade` and its rule `r`: players and minutes each of a headcount or an estimate. */
const players = sql`case g.grade when 'headcount' then s.headcount when 'estimated' then r.players_on_field end`;
const minutesEach = sql`case g.grade when 'headcount' then s.headcount_minutes::float8
  when 'estimated' then least(r.regulation_minutes, case when s.state = 'abandoned' then s.abandoned_after end) end`;

/**
 * Trainings and matches that took place, with the grade of their exposure and, for a headcount or an estimate, its
 * players and minutes each. The same rules as `exposureOfSession` of the sessions, for many sessions at once.
 * @param only a further condition on the session `s`
 */
const countedSessions = (tx: Tx, { from, to, teamIds }: Range, only: SQL = sql`true`) => sql`
  counted as (
    select s.id, s.team_id, s.day, s.kind, g.grade, ${players} as players, ${minutesEach} as minutes
    from sessions s
    join teams t on t.organisation_id = s.organisation_id and t.id = s.team_id
    cross join lateral (select ${countedGrade} as grade) g
    left join lateral (${ruleOfPlay(tx)}) r on true
    where s.organisation_id = ${tx.scope.organisationId}::uuid
      and s.day between ${from}::date and ${to}::date
      and ${tookPlace} and ${inTeams(sql`s.team_id`, teamIds)} and ${only}
  )`;

/**
 * A query of one row, for a lateral join: whether the sessions that meet a condition have exposure, in each unit.
 * @param only the condition on the session `s`
 */
export const exposureOf = (tx: Tx, { from, to }: Pick<Range, "from" | "to">, only: SQL) => sql`
  select coalesce(bool_or(e.exposed and g.grade <> 'estimated'), false) as aes,
    coalesce(bool_or(e.exposed), false) as hours
  from sessions s
  join teams t on t.organisation_id = s.organisation_id and t.id = s.team_id
  cross join lateral (select ${countedGrade} as grade) g
  left join lateral (${ruleOfPlay(tx)}) r on true
  cross join lateral (
    select case g.grade when 'recorded' then exists (
      select 1 from participations p where p.organisation_id = ${tx.scope.organisationId}::uuid and p.session_id = s.id
        and p.presence = 'took_part' and p.minutes > 0
    ) else coalesce(${players} > 0 and ${minutesEach} > 0, false) end as exposed
    -- Kept apart, so that it is asked once.
    offset 0
  ) e
  where s.organisation_id = ${tx.scope.organisationId}::uuid and s.day between ${from}::date and ${to}::date
    and ${tookPlace} and ${only}`;

const dayWithin = (day: SQL, from: string, to: string) =>
  sql`case when ${day} between ${from}::date and ${to}::date then ${day} end`;

/**
 * The same of a team's week from the roll-up, where nothing is marked. Seven days by name lead the index to one team's
 * rows, where a stretch of days would lead it to every team's; a day outside the range is null and meets nothing.
 */
export const exposureRolledUp = (
  tx: Tx,
  { from, to }: Pick<Range, "from" | "to">,
  team: SQL,
  monday: SQL,
) => sql`
  select coalesce(bool_or(e.aes > 0), false) as aes, coalesce(bool_or(e.hours > 0), false) as hours
  from exposure_rollup e
  where e.organisation_id = ${tx.scope.organisationId}::uuid and e.team_id = ${team}
    and e.day = any (array[${sql.join(
      [0, 1, 2, 3, 4, 5, 6].map((n) => dayWithin(sql`${monday} + ${sql.raw(String(n))}`, from, to)),
      sql`, `,
    )}])`;

/**
 * One row per athlete and session: recorded minutes, or the share of a headcount or of an estimate that falls on
 * each athlete of that day's roster who is not unavailable, so that a group's hours and its injuries stay together.
 * What lies above the roster has no athlete.
 */
const exposureParts = (tx: Tx, range: Range, only?: SQL) => sql`
  ${countedSessions(tx, range, only)},
  unavailable as materialized (
    select athlete_id, from_day, to_day from availability_contributions
    where organisation_id = ${tx.scope.organisationId}::uuid and state = 'unavailable'
  ),
  shared_sessions as materialized (
    select c.*, array(
      select u.athlete_id from unavailable u
      where u.from_day <= c.day and (u.to_day is null or u.to_day >= c.day)
    ) as absent
    from counted c where c.players > 0 and c.minutes > 0
  ),
  shared as materialized (
    select c.*, array(
      select r.athlete_id from roster_entries r
      where r.organisation_id = ${tx.scope.organisationId}::uuid and r.team_id = c.team_id
        and r.from_day <= c.day and (r.to_day is null or r.to_day >= c.day) and r.athlete_id <> all (c.absent)
    ) as sharers
    from shared_sessions c
  ),
  parts as (
    select c.team_id, c.day, c.kind, c.grade, p.athlete_id, 1::float8 as people, p.minutes::float8 as minutes
    from counted c
    join participations p on p.organisation_id = ${tx.scope.organisationId}::uuid and p.session_id = c.id
    where c.grade = 'recorded' and p.presence = 'took_part' and p.minutes > 0
    union all
    select c.team_id, c.day, c.kind, c.grade, s.athlete_id, least(1, c.players::float8 / cardinality(c.sharers)),
      c.minutes
    from shared c cross join lateral unnest(c.sharers) as s(athlete_id)
    union all
    select c.team_id, c.day, c.kind, c.grade, null, c.players - cardinality(c.sharers), c.minutes
    from shared c where c.players > cardinality(c.sharers)
  )`;

/** Exposure summed by team, day, kind, grade, sex and age in years on the day of the session; age null if not known. */
export const exposureCells = (tx: Tx, range: Range, only?: SQL) => sql`
  with ${exposureParts(tx, range, only)}
  select p.team_id, p.day, p.kind, p.grade, coalesce(a.sex, 'unknown') as sex,
    ${ageInYears(sql`a.date_of_birth`, sql`p.day`)} as age,
    sum(case when p.grade = 'estimated' then 0 else p.people end) as aes,
    sum(p.people * p.minutes) / 60 as hours
  from parts p
  left join athletes a on a.organisation_id = ${tx.scope.organisationId}::uuid and a.id = p.athlete_id
  group by 1, 2, 3, 4, 5, 6`;

/** The cells counted from the records themselves: what the roll-up must equal. */
export async function sumExposureCellsLive(tx: Tx, range: Range): Promise<ExposureCell[]> {
  const rows = await tx.execute<ExposureCell>(sql`
    select c.team_id as "teamId", c.day::text as day, c.kind, c.grade, c.sex, c.age, c.aes, c.hours
    from (${exposureCells(tx, range)}) c`);
  return [...rows];
}

/** The cells of a range as rows of `exposure_rollup`. */
export const exposureGroups = (tx: Tx, range: Range, only: SQL) => sql`
  select c.team_id, c.day, c.kind, c.grade, sum(c.aes) as aes, sum(c.hours) as hours,
    json_agg(json_build_array(c.sex, c.age, c.aes, c.hours)) as groups
  from (${exposureCells(tx, range, only)}) c group by 1, 2, 3, 4`;

type Rolled = Pick<ExposureCell, "teamId" | "day" | "kind" | "grade"> & { groups: RolledGroup[] };

const rolledRow = sql`r.team_id as "teamId", r.day, r.kind, r.grade, r.groups`;

const rolledUp = (tx: Tx, { from, to, teamIds }: Range, only: SQL) => sql`
  select ${rolledRow} from exposure_rollup r
  where r.organisation_id = ${tx.scope.organisationId}::uuid and r.day between ${from}::date and ${to}::date
    and ${inTeams(sql`r.team_id`, teamIds)} and ${only}`;

function unrolled(rows: Iterable<Rolled>): ExposureCell[] {
  const cells: ExposureCell[] = [];
  for (const { groups, teamId, day, kind, grade } of rows)
    for (const [sex, age, aes, hours] of groups)
      cells.push({ teamId, day, kind, grade, sex: sex as ExposureCell["sex"], age, aes, hours });
  return cells;
}

/**
 * Exposure by team, day, kind, grade, sex and age. Clean days of a team come from the roll-up, others from the same
 * counting as the live one; each statement answers from one snapshot of both. The first serves when nothing is marked,
 * as it mostly is: it is short to plan. It finds nothing where something is marked, and then the second decides.
 */
export async function sumExposureCells(tx: Tx, range: Range): Promise<ExposureCell[]> {
  if (!readsRollups(tx)) return sumExposureCellsLive(tx, range);
  const clean = await tx.execute<Rolled>(rolledUp(tx, range, nothingMarked(tx)));
  if (clean.length > 0) return unrolled(clean);
  const rows = await tx.execute<Rolled>(sql`
    with ${markedSlices(tx)}
    ${rolledUp(tx, range, sql`not exists (select 1 from marked_slices m where m.team_id = r.team_id and m.day = r.day)`)}
    union all
    select ${rolledRow}
    from (${exposureGroups(tx, range, sql`(s.team_id, s.day) in (select team_id, day from marked_slices)`)}) r`);
  return unrolled(rows);
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
