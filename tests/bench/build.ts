import { randomUUID } from "node:crypto";
import type postgres from "postgres";
import { defaultAgeBands, defaultSportRules } from "~/features/accounts/founding.server";

/**
 * Clubs of one size, made in sets by the superuser with triggers off. Each has three seasons of eight teams with
 * eighteen athletes; nine sessions in ten have recorded attendance, the others a headcount or an estimate.
 */

export type Shape = { teams: number; athletes: number; sessionsPerTeam: number; injuriesPerThousand: number };
/** Some 25,000 participations a club: 200 clubs make five million. */
export const shape: Shape = { teams: 8, athletes: 18, sessionsPerTeam: 217, injuriesPerThousand: 6 };

/** @param teams of each club; left out: those of the shape */
export async function addClubs(sql: postgres.Sql, count: number, teams = shape.teams): Promise<string[]> {
  const ids = Array.from({ length: count }, () => randomUUID());
  // Ten at a time, so that the sorts of a statement stay in memory.
  for (let from = 0; from < ids.length; from += 10) await addSome(sql, ids.slice(from, from + 10), teams);
  return ids;
}

async function addSome(sql: postgres.Sql, ids: readonly string[], teams: number) {
  await sql.begin(async (tx) => {
    await tx`create temp table clubs on commit drop as
      select id, row_number() over () as n, current_date - 3 * 365 as first_day from unnest(${ids as string[]}::uuid[]) as id`;
    await addPeople(tx, teams);
    await addSessions(tx);
    await addInjuries(tx);
  });
}

async function addPeople(tx: postgres.TransactionSql, teams: number) {
  await tx`insert into organisations (organisation_id, slug, name, kind, time_zone, phone, age_bands)
    select id, 'club-' || id, 'Club', 'club', 'Europe/London', '1', ${tx.json(defaultAgeBands as never)} from clubs`;
  for (const [sport, fromAge, players, minutes] of defaultSportRules)
    await tx`insert into sport_rules select id, ${sport}, ${fromAge}, ${players}, ${minutes} from clubs`;
  await tx`insert into seasons (organisation_id, id, name, starts_on, ends_on)
    select id, gen_random_uuid(), 'Season ' || y, first_day + y * 365 + 1, first_day + y * 365 + 364
    from clubs, generate_series(0, 2) y`;
  await tx`create temp table squads on commit drop as
    select id as club, first_day, gen_random_uuid() as team, t, 11 + t % 8 as under_age
    from clubs, generate_series(1, ${teams}::int) t`;
  await tx`insert into teams (organisation_id, id, name, name_key, sport, sex, under_age)
    select club, team, 'Team ' || t, 'team ' || t, (array['soccer', 'handball', 'basketball', 'volleyball'])[1 + t % 4],
      (array['girls', 'boys'])[1 + t % 2], under_age from squads`;
  await tx`create temp table players on commit drop as
    select club, team, first_day, t, gen_random_uuid() as athlete,
      current_date - ((under_age - 1.0 - 2 * random()) * 365)::int as born
    from squads, generate_series(1, ${shape.athletes}::int)`;
  await tx`insert into athletes (organisation_id, id, given_name, family_name, name_key, date_of_birth, sex)
    select club, athlete, 'Ada', 'Bench', 'ada bench', born, (array['female', 'male'])[1 + t % 2] from players`;
  await tx`insert into roster_entries (organisation_id, id, athlete_id, team_id, from_day)
    select club, gen_random_uuid(), athlete, team, first_day from players`;
}

async function addSessions(tx: postgres.TransactionSql) {
  await tx`create temp table held on commit drop as
    select club, team, gen_random_uuid() as session, first_day + s * 1090 / ${shape.sessionsPerTeam}::int as day,
      case when s % 3 = 0 then 'match' else 'training' end as kind,
      case when s % 20 = 3 then 'headcount' when s % 20 = 9 then 'estimated' else 'recorded' end as grade
    from squads, generate_series(1, ${shape.sessionsPerTeam}::int) s`;
  await tx`insert into sessions (organisation_id, id, team_id, day, kind, state, exposure_grade, headcount, headcount_minutes)
    select club, session, team, day, kind, 'held', grade, case when grade = 'headcount' then 15 end,
      case when grade = 'headcount' then 80 end from held`;
  await tx`insert into participations (organisation_id, session_id, athlete_id, presence, minutes)
    select h.club, h.session, p.athlete, 'took_part', 60 + 10 * (random() * 3)::int
    from held h join players p on p.team = h.team
    where h.grade = 'recorded' and random() < 0.89
    order by 1, 2, 3`;
}

/** Two in three sudden, of a session; half with time loss. */
async function addInjuries(tx: postgres.TransactionSql) {
  await tx`create temp table hurt on commit drop as
    select h.club, h.session, p.athlete, h.day, gen_random_uuid() as injury, random() < 0.67 as sudden, random() as luck
    from held h join players p on p.team = h.team
    where h.grade = 'recorded' and random() < ${shape.injuriesPerThousand / 1000}::float8`;
  await tx`insert into injuries (organisation_id, id, athlete_id) select club, injury, athlete from hurt`;
  await tx`insert into injury_revisions (organisation_id, injury_id, version, onset_day, session_id, body_area, side, onset,
      contact, signs, first_care, referred_to, subsequence)
    select club, injury, 1, day, case when sudden then session end, 'knee', 'left',
      case when sudden then 'sudden' else 'gradual' end, 'non_contact', '{}', '{}', '{}', 'index' from hurt`;
  await tx`create temp table reasons on commit drop as
    select *, gen_random_uuid() as reason from hurt where luck < 0.5`;
  await tx`insert into availability_reasons (organisation_id, id, athlete_id, cause, injury_id)
    select club, reason, athlete, 'injury', injury from reasons`;
  await tx`insert into availability_changes (organisation_id, id, reason_id, athlete_id, from_day, state, restrictions, seq)
    select club, gen_random_uuid(), reason, athlete, day + 1, 'unavailable', array[]::text[], 1 from reasons
    union all
    select club, gen_random_uuid(), reason, athlete, day + 2 + (luck * 60)::int, 'full', array[]::text[], 2 from reasons`;
}

/** Rolls up in one statement what only has to be there, so that the measured club is one among many in every table. */
export async function rollUpOthers(sql: postgres.Sql) {
  await sql`insert into exposure_rollup (organisation_id, day, team_id, kind, grade, aes, hours, groups)
    select organisation_id, day, team_id, kind, 'recorded', sum(aes), sum(hours),
      json_agg(json_build_array(sex, age, aes, hours))
    from (
      select s.organisation_id, s.day, s.team_id, s.kind, a.sex, extract(year from age(s.day, a.date_of_birth))::int as age,
        count(*) as aes, sum(p.minutes)::float8 / 60 as hours
      from sessions s
      join participations p on p.organisation_id = s.organisation_id and p.session_id = s.id
      join athletes a on a.organisation_id = p.organisation_id and a.id = p.athlete_id
      where not exists (select 1 from exposure_rollup e where e.organisation_id = s.organisation_id)
      group by 1, 2, 3, 4, 5, 6
    ) c group by 1, 2, 3, 4`;
}
