import { randomUUID } from "node:crypto";
import { addDays, weekStart } from "~/platform/clock";
import {
  maintenance,
  makeOrganisation,
  makePerson,
  makeSeason,
  memberScope,
  staffScope,
} from "../../harness";
import { type Plan, plantClub, randomOf } from "./generated-club";

/**
 * A club of four teams and two seasons that is simple enough to be counted from its raw rows in a few lines, and large
 * enough to compare groups, months and teams.
 */
const teamsOf = () =>
  [
    { name: "Girls Soccer", sport: "soccer", sex: "girls", risk: 0.16 },
    { name: "Boys Soccer", sport: "soccer", sex: "boys", risk: 0.1 },
    { name: "Girls Handball", sport: "handball", sex: "girls", risk: 0.05 },
    { name: "Boys Handball", sport: "handball", sex: "boys", risk: 0.22 },
  ].map((team) => ({ ...team, id: randomUUID(), underAge: 18 }));

type Random = ReturnType<typeof randomOf>;

function planAthletes(plan: Plan, random: Random, today: string) {
  for (const team of plan.teams)
    for (let n = 0; n < 12; n++) {
      const id = randomUUID();
      // Birthdays in mid-season add exposure to two bands.
      const born = addDays(today, -365 * random.int(13, 17) - random.int(0, 364));
      plan.athletes.push({ id, sex: team.sex === "girls" ? "female" : "male", born });
      plan.roster.push({ athleteId: id, teamId: team.id, from: addDays(today, -700), to: null });
    }
}

function addInjury(plan: Plan, random: Random, athleteId: string, day: string, sessionId: string | null) {
  const injuryId = randomUUID();
  const kind = random.int(1, 12);
  plan.injuries.push({
    ...{ injuryId, athleteId, version: 1, onsetDay: day, sessionId, outsideSport: false },
    ...{ bodyArea: "knee", side: "left", onset: sessionId ? "sudden" : "gradual", contact: "non_contact" },
    subsequence: kind === 1 ? "exacerbation" : "index",
    withdrawn: kind === 2,
    ...{ signs: [], firstCare: [], referredTo: [] },
  });
  // One in twelve loses no time.
  if (kind === 3) return;
  const reasonId = randomUUID();
  const change = (seq: number, fromDay: string, state: string) =>
    plan.changes.push({ reasonId, injuryId, athleteId, seq, fromDay, state });
  change(1, addDays(day, 1), "unavailable");
  change(2, addDays(day, 1 + random.int(1, 20)), "full");
}

function addSession(
  plan: Plan,
  random: Random,
  teamId: string,
  day: string,
  kind: "training" | "match",
  risk: number,
) {
  const id = randomUUID();
  plan.sessions.push({
    ...{
      id,
      teamId,
      day,
      kind,
      state: "held",
      startTime: "17:30",
      plannedMinutes: 90,
      exposureGrade: "recorded",
    },
  });
  const there: string[] = [];
  for (const { athleteId } of plan.roster.filter((entry) => entry.teamId === teamId)) {
    const presence = random.pick(["took_part", "took_part", "took_part", "absent"]);
    plan.parts.push({ sessionId: id, athleteId, presence, minutes: presence === "took_part" ? 90 : 0 });
    if (presence === "took_part") there.push(athleteId);
  }
  if (there.length > 0 && random.chance(kind === "match" ? risk * 2 : risk))
    addInjury(plan, random, random.pick(there), day, id);
  if (there.length > 0 && random.chance(0.04)) addInjury(plan, random, random.pick(there), day, null);
}

/** A Wednesday in the middle of a season: the same numbers on whatever day the tests run. */
const today = "2026-11-25";

/** Plants the club; the lead covers all teams, the trainer the first one. */
export async function plantComparedClub() {
  const organisation = await makeOrganisation();
  const staff = staffScope(organisation);
  const random = randomOf(7);
  const spans = [
    { from: addDays(today, -520), to: addDays(today, -250) },
    { from: addDays(today, -170), to: addDays(today, 90) },
  ];
  for (const { from, to } of spans) await makeSeason(staff, { startsOn: from, endsOn: to });
  const planned = teamsOf();
  const plan: Plan = {
    season: { from: spans[0]?.from ?? today, to: today },
    teams: planned.map(({ risk: _risk, ...team }) => team),
    ...{ athletes: [], roster: [], sessions: [], parts: [], injuries: [], changes: [] },
  };
  planAthletes(plan, random, today);
  for (const { from, to } of spans)
    for (const { id, risk } of planned)
      for (let week = addDays(weekStart(from), 7); addDays(week, 6) <= to; week = addDays(week, 7))
        for (const [offset, kind] of [
          [1, "training"],
          [3, "training"],
          [5, "match"],
        ] as const)
          if (addDays(week, offset) < today) addSession(plan, random, id, addDays(week, offset), kind, risk);
  await plantClub(staff, plan);
  const own = plan.teams[0];
  if (!own) throw new Error("the club has no team");
  const lead = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
  const trainer = await memberScope(
    await makePerson(organisation, { roles: ["trainer"], teams: [own.id] }),
    organisation,
  );
  return {
    lead: { ...lead, today },
    trainer: { ...trainer, today },
    teams: plan.teams,
    today,
    spans,
    rows: await readRaw(organisation.id),
  };
}

export type RawRow = {
  teamId: string;
  sport: string;
  day: string;
  /** Null for a gradual injury without a session. */
  kind: "training" | "match" | null;
  sex: string;
  born: string;
};

/** Athlete-exposures and counted injuries straight from the tables, one row each. */
async function readRaw(organisationId: string): Promise<{ exposures: RawRow[]; injuries: RawRow[] }> {
  const sql = maintenance();
  const exposures = await sql<RawRow[]>`
    select s.team_id as "teamId", t.sport, s.day::text as day, s.kind, a.sex, a.date_of_birth::text as born
    from participations p
    join sessions s on s.organisation_id = p.organisation_id and s.id = p.session_id
    join teams t on t.organisation_id = s.organisation_id and t.id = s.team_id
    join athletes a on a.organisation_id = p.organisation_id and a.id = p.athlete_id
    where p.organisation_id = ${organisationId} and p.presence = 'took_part' and p.minutes > 0`;
  const injuries = await sql<RawRow[]>`
    select m.team_id as "teamId", t.sport, coalesce(s.day, r.onset_day)::text as day, s.kind, a.sex,
      a.date_of_birth::text as born
    from injuries i
    join injury_revisions r
      on r.organisation_id = i.organisation_id and r.injury_id = i.id and r.version = i.version
    join athletes a on a.organisation_id = i.organisation_id and a.id = i.athlete_id
    join roster_entries m on m.organisation_id = i.organisation_id and m.athlete_id = i.athlete_id
    join teams t on t.organisation_id = m.organisation_id and t.id = m.team_id
    left join sessions s on s.organisation_id = i.organisation_id and s.id = r.session_id
    where i.organisation_id = ${organisationId} and not r.withdrawn and r.subsequence <> 'exacerbation'
      and exists (select 1 from availability_reasons v
        where v.organisation_id = i.organisation_id and v.injury_id = i.id)`;
  return { exposures: [...exposures], injuries: [...injuries] };
}

/** Completed years on a day, as people count them; nobody here is born on 29 February in a way that matters. */
export function ageAt({ born, day }: RawRow): number {
  const years = Number(day.slice(0, 4)) - Number(born.slice(0, 4));
  return day.slice(5) >= born.slice(5) ? years : years - 1;
}
