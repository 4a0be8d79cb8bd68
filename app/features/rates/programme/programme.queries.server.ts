import { type SQL, sql } from "drizzle-orm";
import type { AgeBand } from "~/statistics";
import type { Tx } from "~db/client.server";
import { type CountedKind, kindsOf } from "../counting";
import type { RatesFilters } from "../filters";
import { ageInYears, inTeams, type Range } from "../rollups/exposure.queries.server";
import type { InjuryPlace, Third, WarmUpClass } from "./programme";

/**
 * The SQL of the programme: athlete-exposures by what was recorded of the athlete's own warm-up, and by the share of
 * the athlete's own earlier participations that were warmed up. Participations are summed in the database.
 */

/** Whose exposure is asked for: the range, the address's sessions and people, and what silent teams had left out. */
export type Asked = {
  range: Range;
  filters: Pick<RatesFilters, "sessions" | "sex" | "age" | "sport">;
  bands: readonly (AgeBand & { label: string })[];
  /** Days of teams that reported nothing: they count nowhere. */
  silent: readonly { teamId: string; day: string }[];
};

/** Fewer earlier participations than this say too little of an athlete's compliance. */
export const enoughEarlier = 5;

const org = (tx: Tx) => sql`${tx.scope.organisationId}::uuid`;

/** An array of one type as one parameter: driver and planner see a single value. */
const arrayOf = (values: readonly string[], type: "uuid" | "date") =>
  sql`array(select jsonb_array_elements_text(${JSON.stringify(values)}::text::jsonb))::${sql.raw(type)}[]`;

/** The day from which a team follows a programme: the first one it was given. */
const starts = (tx: Tx) => sql`
  starts as materialized (
    select team_id, min(starts_on) as starts_on from programme_assignments
    where organisation_id = ${org(tx)} group by team_id
  )`;

/** SQL: why a team's day stands outside the comparison; null inside it. */
const outside = (day: SQL) =>
  sql`case when st.starts_on is null then 'no_programme' when ${day} < st.starts_on then 'before_start' end`;

/**
 * CTEs `starts` and `parts`: one row per recorded participation in a training or match of any team, with what its
 * session's warm-up record says of this athlete.
 * @param only a further condition on the participation `p`
 */
const parts = (tx: Tx, { from, to }: Pick<Range, "from" | "to">, only: SQL = sql`true`) => sql`
  ${starts(tx)},
  parts as materialized (
    select s.team_id, s.day, s.kind, p.athlete_id, ${outside(sql`s.day`)} as outside,
      case when w.outcome is null then 'not_recorded'
        when w.outcome <> 'skipped' and a.athlete_id is not null then 'warmed_up'
        else 'not_warmed_up' end as class
    from sessions s
    join participations p on p.organisation_id = ${org(tx)} and p.session_id = s.id
      and p.presence = 'took_part' and p.minutes > 0
    left join starts st on st.team_id = s.team_id
    left join warm_ups w on w.organisation_id = ${org(tx)} and w.session_id = s.id
    left join warm_up_athletes a on a.organisation_id = ${org(tx)} and a.session_id = s.id
      and a.athlete_id = p.athlete_id
    where s.organisation_id = ${org(tx)} and s.day between ${from}::date and ${to}::date
      and s.kind in ('training', 'match') and s.state in ('held', 'abandoned') and s.exposure_grade = 'recorded'
      and ${only}
  )`;

/** SQL: of participations, those from the team's start on whose warm-up is recorded, and of these the warmed-up ones. */
const known = sql`count(*) filter (where outside is null and class <> 'not_recorded')`;
const done = sql`count(*) filter (where outside is null and class = 'warmed_up')`;

/** SQL over an age: the label of its band, "unknown" where no band holds it, as `bandOf` says it. */
function bandLabel(age: SQL, bands: Asked["bands"]) {
  if (bands.length === 0) return sql`'unknown'`;
  const cases = bands.map(
    ({ from, to, label }) =>
      sql`when ${age} >= ${from}::int ${to === null ? sql`` : sql`and ${age} <= ${to}::int`} then ${label}::text`,
  );
  return sql`case ${sql.join(cases, sql` `)} else 'unknown' end`;
}

/** SQL: an athlete `a`, a team `t` and a day belong to the people that the address asks for. */
function isAsked({ filters, bands }: Asked) {
  const { sex, age, sport } = filters;
  const years = ageInYears(sql`a.date_of_birth`, sql`h.day`);
  return sql.join(
    [
      sql`true`,
      ...(sex === "any" ? [] : [sql`a.sex = ${sex}`]),
      ...(age === "any" ? [] : [sql`${bandLabel(years, bands)} = ${age}`]),
      ...(sport === "any" ? [] : [sql`t.sport = ${sport}`]),
    ],
    sql` and `,
  );
}

/**
 * CTEs up to `asked`: the participations of the view. An athlete's history is that of the whole organisation, whichever
 * teams are looked at, and of the days before each participation's own.
 */
const asked = (tx: Tx, ask: Asked) => {
  const kinds = kindsOf[ask.filters.sessions].map((kind) => sql`${kind}`);
  return sql`
  ${parts(tx, ask.range)},
  histories as materialized (
    select team_id, day, kind, athlete_id, class, outside, ${known} over earlier as known, ${done} over earlier as done
    from parts
    window earlier as (
      partition by athlete_id order by day range between unbounded preceding and interval '1 day' preceding
    )
  ),
  silent as materialized (
    select * from unnest(
      ${arrayOf(
        ask.silent.map(({ teamId }) => teamId),
        "uuid",
      )},
      ${arrayOf(
        ask.silent.map(({ day }) => day),
        "date",
      )}
    ) as q(team_id, day)
  ),
  asked as materialized (
    select h.team_id, h.kind, h.class, h.outside,
      h.outside is null and h.known < ${enoughEarlier}::int as early,
      case when h.outside is null and h.known >= ${enoughEarlier}::int then h.done::float8 / h.known end as share
    from histories h
    join athletes a on a.organisation_id = ${org(tx)} and a.id = h.athlete_id
    join teams t on t.organisation_id = ${org(tx)} and t.id = h.team_id
    where h.kind in (${sql.join(kinds, sql`, `)}) and ${inTeams(sql`h.team_id`, ask.range.teamIds)}
      and not exists (select 1 from silent q where q.team_id = h.team_id and q.day = h.day)
      and ${isAsked(ask)}
  )`;
};

export type ExposureSums = {
  classes: { teamId: string; kind: CountedKind; place: WarmUpClass | Outside; aes: number }[];
  /** How many athlete-exposures had each share of warmed-up earlier participations; those too early have none. */
  shares: { share: number; aes: number }[];
};
export type Outside = "before_start" | "no_programme";

/** Athlete-exposures of recorded sessions by team, kind and what is known of the warm-up, and by share. */
export async function sumExposures(tx: Tx, ask: Asked): Promise<ExposureSums> {
  const rows = await tx.execute<{
    teamId: string | null;
    kind: CountedKind;
    place: WarmUpClass | Outside;
    share: number | null;
    aes: number;
  }>(sql`
    with ${asked(tx, ask)}
    select team_id as "teamId", kind, place, share, count(*)::int as aes
    from (select team_id, kind, coalesce(outside, class) as place, share from asked) placed
    group by grouping sets ((team_id, kind, place), (share))`);
  const sums: ExposureSums = { classes: [], shares: [] };
  for (const { teamId, kind, place, share, aes } of rows)
    if (teamId !== null) sums.classes.push({ teamId, kind, place, aes });
    else if (share !== null) sums.shares.push({ share, aes });
  return sums;
}

/**
 * Athlete-exposures from the team's start on, by team, kind and third.
 * @param cuts up to and with the first is the lowest third, from the second on the highest
 */
export async function sumThirds(tx: Tx, ask: Asked, [low, high]: readonly [number, number]) {
  const rows = await tx.execute<{ teamId: string; kind: CountedKind; third: Third; aes: number }>(sql`
    with ${asked(tx, ask)}
    select team_id as "teamId", kind,
      case when early then 'early' when share <= ${low}::float8 then 'lowest'
        when share >= ${high}::float8 then 'highest' else 'middle' end as third,
      count(*)::int as aes
    from asked where outside is null group by 1, 2, 3`);
  return [...rows];
}

/**
 * What is known of the warm-ups behind injuries, one row per injury: what its session's record says of this athlete at
 * the moment of the onset, and the athlete's history before the day the injury is counted on.
 */
export async function placeInjuries(
  tx: Tx,
  { from, to }: Pick<Range, "from" | "to">,
  injuries: readonly { id: string; athleteId: string; day: string }[],
): Promise<InjuryPlace[]> {
  if (injuries.length === 0) return [];
  const ids = (pick: (injury: (typeof injuries)[number]) => string) => injuries.map(pick);
  const rows = await tx.execute<InjuryPlace>(sql`
    with hurt as materialized (
      select * from unnest(
        ${arrayOf(
          ids(({ id }) => id),
          "uuid",
        )}, ${arrayOf(
          ids(({ athleteId }) => athleteId),
          "uuid",
        )},
        ${arrayOf(
          ids(({ day }) => day),
          "date",
        )}
      ) as q(injury_id, athlete_id, day)
    ),
    ${parts(tx, { from, to }, sql`p.athlete_id in (select athlete_id from hurt)`)}
    select h.injury_id as "injuryId", s.id is not null as "hasSession",
      coalesce(s.exposure_grade = 'recorded', false) as "isRecorded", ${outside(sql`h.day`)} as outside,
      case when w.outcome is null then 'not_recorded'
        when w.outcome = 'skipped' or a.athlete_id is null or ${duringWarmUp} then 'not_warmed_up'
        else 'warmed_up' end as "byRecord",
      coalesce(e.known, 0)::int as known, coalesce(e.done, 0)::int as done
    from hurt h
    join current_injuries i on i.organisation_id = ${org(tx)} and i.injury_id = h.injury_id
    left join sessions s on s.organisation_id = ${org(tx)} and s.id = i.session_id
    left join starts st on st.team_id = s.team_id
    left join warm_ups w on w.organisation_id = ${org(tx)} and w.session_id = s.id
    left join warm_up_athletes a on a.organisation_id = ${org(tx)} and a.session_id = s.id
      and a.athlete_id = h.athlete_id
    left join lateral (
      select ${known} as known, ${done} as done from parts where athlete_id = h.athlete_id and parts.day < h.day
    ) e on true`);
  return [...rows];
}

/** Minutes that a warm-up is taken to last when nobody said, as where an injury's record proposes its answer. */
const usualMinutes = 15;

/** SQL: the onset came before the warm-up can have been over. Sessions that pass midnight injure on the next day. */
const duringWarmUp = sql`coalesce(
  (i.onset_day + i.onset_time) < (s.day + s.start_time) + make_interval(mins => coalesce(w.minutes, ${usualMinutes}::int)),
  false)`;

/** The day from which each team follows a programme. */
export async function findStarts(tx: Tx): Promise<Map<string, string>> {
  const rows = await tx.execute<{ teamId: string; startsOn: string }>(sql`
    with ${starts(tx)} select team_id as "teamId", starts_on::text as "startsOn" from starts`);
  return new Map(rows.map(({ teamId, startsOn }) => [teamId, startsOn]));
}
