import { maintenance } from "../../harness";
import type { World } from "../../server/rates/brute-force";
import type { Plan } from "../../server/rates/generated-club";

/** The rows of an organisation as they are stored, one world per season, for a count that uses none of our code. */
export type RawSeason = { id: string; name: string; from: string; to: string; world: World };

export type RawWarmUp = { teamId: string; day: string; kind: string; state: string; outcome: string | null };

type Facts = { organisationId: string; timeZone: string; bands: World["bands"] };

async function factsOf(slug: string): Promise<Facts> {
  const [row] = await maintenance()<Facts[]>`
    select organisation_id as "organisationId", time_zone as "timeZone", age_bands as bands
    from organisations where slug = ${slug}`;
  if (!row) throw new Error(`There is no ${slug}.`);
  return row;
}

/** Everything that the counts need, season by season, the latest first. */
export async function readSeasons(slug: string, today: string): Promise<RawSeason[]> {
  const sql = maintenance();
  const { organisationId: org, timeZone, bands } = await factsOf(slug);
  const teams = await sql<Plan["teams"]>`
    select id, name, sport, sex, under_age as "underAge" from teams where organisation_id = ${org}`;
  const athletes = await sql<(Plan["athletes"][number] & { leftOn: string | null })[]>`
    select id, sex, date_of_birth::text as born, (archived_at at time zone ${timeZone})::date::text as "leftOn"
    from athletes where organisation_id = ${org}`;
  const roster = await sql<Plan["roster"]>`
    select athlete_id as "athleteId", team_id as "teamId", from_day::text as "from", to_day::text as "to"
    from roster_entries where organisation_id = ${org}`;
  const sessions = await sql<Plan["sessions"]>`
    select id, team_id as "teamId", day::text as day, kind, state, abandoned_after as "abandonedAfter",
      exposure_grade as "exposureGrade", headcount, headcount_minutes::float8 as "headcountMinutes"
    from sessions where organisation_id = ${org}`;
  const parts = await sql<Plan["parts"]>`
    select session_id as "sessionId", athlete_id as "athleteId", presence, minutes::float8 as minutes
    from participations where organisation_id = ${org}`;
  const injuries = await sql<Plan["injuries"]>`
    select r.injury_id as "injuryId", i.athlete_id as "athleteId", r.onset_day::text as "onsetDay", r.onset,
      r.session_id as "sessionId", r.outside_sport as "outsideSport", r.body_area as "bodyArea", r.side,
      r.contact, r.movement, r.tissue, r.subsequence, r.withdrawn
    from injuries i
    join injury_revisions r on r.organisation_id = i.organisation_id and r.injury_id = i.id and r.version = i.version
    where i.organisation_id = ${org}`;
  const changes = await sql<Plan["changes"]>`
    select c.reason_id as "reasonId", r.injury_id as "injuryId", c.athlete_id as "athleteId", c.seq,
      c.from_day::text as "fromDay", c.state
    from availability_changes c
    join availability_reasons r on r.organisation_id = c.organisation_id and r.id = c.reason_id
    where c.organisation_id = ${org}`;
  const confirmed = await sql<{ teamId: string; week: string }[]>`
    select team_id as "teamId", week_start::text as week from no_injury_weeks where organisation_id = ${org}`;
  const rules = await sql<{ sport: string; fromAge: number; players: number; minutes: number }[]>`
    select sport, from_age as "fromAge", players_on_field as players, regulation_minutes as minutes
    from sport_rules where organisation_id = ${org}`;
  const seasons = await sql<{ id: string; name: string; from: string; to: string }[]>`
    select id, name, starts_on::text as "from", least(ends_on, ${today}::date)::text as "to"
    from seasons where organisation_id = ${org} and starts_on <= ${today} order by starts_on desc`;
  const left = new Map(athletes.flatMap(({ id, leftOn }) => (leftOn ? [[id, leftOn] as const] : [])));
  return seasons.map(({ id, name, from, to }) => {
    const plan: Plan = { season: { from, to }, teams, athletes, roster, sessions, parts, injuries, changes };
    return { id, name, from, to, world: { plan, rules, bands, today, seasonId: id, confirmed, left } };
  });
}

/**
 * The trainings and matches that took place between two days, after their team had begun the programme, each with what
 * its warm-up record says; null without a record.
 */
export async function readWarmUps(slug: string, from: string, to: string): Promise<RawWarmUp[]> {
  const { organisationId } = await factsOf(slug);
  return maintenance()<RawWarmUp[]>`
    select s.team_id as "teamId", s.day::text as day, s.kind, s.state, w.outcome
    from sessions s
    join (
      select team_id, min(starts_on) as starts_on from programme_assignments
      where organisation_id = ${organisationId} group by team_id
    ) p on p.team_id = s.team_id and p.starts_on <= s.day
    left join warm_ups w on w.organisation_id = s.organisation_id and w.session_id = s.id
    where s.organisation_id = ${organisationId} and s.day between ${from} and ${to}
      and s.state in ('held', 'abandoned') and s.kind in ('training', 'match')`;
}
