import { randomUUID } from "node:crypto";
import { and, eq, sql } from "drizzle-orm";
import type { MemberScope } from "~/features/accounts/scope.server";
import { editOrganisation, readOrganisation, saveTeam } from "~/features/accounts/settings.server";
import { setAthleteAvailability } from "~/features/availability/athlete-availability.server";
import { undoImport } from "~/features/imports/imports.server";
import { changeInjuryAvailability, editInjury, withdrawInjury } from "~/features/injuries/edit-injury.server";
import { editSchema, logSchema } from "~/features/injuries/injuries.schema";
import { logInjury } from "~/features/injuries/log-injury.server";
import { archiveAthlete, editAthlete } from "~/features/roster/roster.server";
import { joinTeam, leaveTeam } from "~/features/roster/team-memberships.server";
import { recordAttendance, recordHeadcount } from "~/features/sessions/attendance.server";
import { addSession, editBaseOf, editSession, getSession, settle } from "~/features/sessions/sessions.server";
import { addDays } from "~/platform/clock";
import type { FieldChange } from "~/platform/merge-fields";
import { read, write } from "~db/client.server";
import { athletes, participations, rosterEntries, sessions, sportRules, teams } from "~db/schema";
import { csvFile, importFile } from "../imports/helpers";
import type { Random } from "./generated-club";

/** What people do to a club that already has records, through the use cases where one exists, picked by chance. */

export type World = { scope: MemberScope; random: Random; undoable: string[] };
type Action = (world: World) => Promise<unknown>;

const pastDay = ({ scope, random }: World) => addDays(scope.today, -random.int(0, 170));

async function pick(
  { scope, random }: World,
  table: "sessions" | "athletes" | "teams",
  condition = sql`true`,
): Promise<string> {
  const rows = await read(scope, (tx) =>
    tx.execute<{ id: string }>(sql`select id from ${sql.identifier(table)}
      where organisation_id = ${scope.organisationId}::uuid and ${condition} order by id`),
  );
  return random.pick(rows)?.id ?? randomUUID();
}

const pastSession = (world: World, more = sql`true`) =>
  pick(world, "sessions", sql`day <= ${world.scope.today}::date and ${more}`);

async function pickInjury({ scope, random }: World) {
  const rows = await read(scope, (tx) =>
    tx.execute<{ id: string; version: number; athleteId: string; day: string }>(sql`
      select injury_id as id, version, athlete_id as "athleteId", onset_day::text as day from current_injuries
      where organisation_id = ${scope.organisationId}::uuid and not withdrawn order by 1`),
  );
  return random.pick(rows) as (typeof rows)[number];
}

async function correctAthlete(world: World, change: "dateOfBirth" | "sex") {
  const id = await pick(world, "athletes");
  const { scope, random } = world;
  const [row] = await read(scope, (tx) => tx.select().from(athletes).where(eq(athletes.id, id)));
  if (!row) return;
  const { givenName, familyName, number, visitor, researchConsent, sex, dateOfBirth } = row;
  const born = random.pick([null, addDays(scope.today, -365 * random.int(9, 27) - random.int(0, 364))]);
  await editAthlete(scope, id, row.version, {
    ...{ givenName, familyName, number, visitor, researchConsent, dominantLeg: "unknown" },
    dateOfBirth: change === "dateOfBirth" ? born : dateOfBirth,
    sex: change === "sex" ? random.pick(["female", "male", "not_stated"]) : (sex as "female"),
  });
}

async function tick(world: World, clear: boolean) {
  const { scope, random } = world;
  const id = await pastSession(world, clear ? sql`exposure_grade = 'recorded'` : sql`state <> 'cancelled'`);
  const stored = await read(scope, (tx) =>
    tx.select().from(participations).where(eq(participations.sessionId, id)),
  );
  const value = { presence: "took_part", minutes: random.pick([30, 62.5, 90]) };
  const changes: [string, FieldChange][] = (clear ? stored : stored.slice(0, 3)).map(
    ({ athleteId, presence, minutes }) => [
      `athlete:${athleteId}`,
      { base: { presence, minutes }, value: clear ? null : value },
    ],
  );
  const other = await pick(world, "athletes");
  if (!clear && !stored.some(({ athleteId }) => athleteId === other))
    changes.push([`athlete:${other}`, { base: null, value }]);
  await recordAttendance(scope, id, randomUUID(), Object.fromEntries(changes));
}

async function moveSession(world: World) {
  const { scope, random } = world;
  const id = await pastSession(world, sql`exposure_grade in ('none', 'headcount', 'estimated')`);
  const session = await read(scope, (tx) => getSession(tx, id));
  const base = editBaseOf(session);
  const kind = random.pick(["training", "match", "strength"] as const);
  await editSession(scope, id, { ...(base as object), day: pastDay(world), kind } as never, base);
}

async function editAnInjury(world: World) {
  const { scope, random } = world;
  const { id, version, athleteId, day } = await pickInjury(world);
  const own = await read(scope, (tx) =>
    tx.execute<{ id: string; day: string }>(sql`
      select s.id, s.day::text as day from sessions s join roster_entries r on r.organisation_id = s.organisation_id
        and r.team_id = s.team_id and r.athlete_id = ${athleteId}::uuid and r.from_day <= s.day
        and (r.to_day is null or r.to_day >= s.day)
      where s.organisation_id = ${scope.organisationId}::uuid and s.day <= ${scope.today}::date order by s.day, s.id`),
  );
  const session = random.chance(0.7) ? random.pick(own) : undefined;
  await editInjury(
    scope,
    id,
    editSchema.parse({
      operation: randomUUID(),
      version,
      day: session?.day ?? random.pick([day, pastDay(world)]),
      session: session?.id ?? random.pick(["", "outside"]),
      bodyArea: "knee",
      side: "left",
      onset: random.pick(["sudden", "gradual", ""]),
      subsequence: random.pick(["index", "exacerbation", ""]),
    }),
  );
}

const changeOf = (world: World, fromDay: string) => ({
  state: world.random.pick(["unavailable", "unavailable", "modified", "full"] as const),
  restrictions: ["no_contact" as const],
  minutesLimit: null,
  fromDay,
  expectedOn: null,
});

async function logAnInjury(world: World) {
  const { scope, random } = world;
  const input = {
    operation: randomUUID(),
    athlete: await pick(world, "athletes"),
    when: random.pick(["earlier", "outside"]),
    day: pastDay(world),
    bodyArea: "knee",
    side: "left",
    couldContinue: random.pick(["yes", "no"]),
  };
  const { id } = await logInjury(scope, logSchema.parse(input));
  if (random.chance(0.5)) await changeInjuryAvailability(scope, id, changeOf(world, input.day));
}

/** A file of athletes and one of their sessions; the second can be undone later. */
async function importFiles(world: World) {
  const { scope } = world;
  const id = await pick(world, "teams");
  const [team] = await read(scope, (tx) => tx.select().from(teams).where(eq(teams.id, id)));
  const people = [1, 2, 3].map((n) => ({ number: `X${n}`, name: `Given${n},Family${n},2011-0${n}-05` }));
  const roster = people.map(({ number, name }) => `${number},${name},female,${team?.name},2025-01-01`);
  await importFile(
    scope,
    "roster",
    csvFile(["Number,Given name,Family name,Date of birth,Sex,Team,In the team from", ...roster]),
  );
  const lines = [pastDay(world), pastDay(world)].flatMap((day) =>
    people.map(({ number }, n) => `${day},06:15,${team?.name},training,${number},${60 + n}`),
  );
  const exposure = csvFile(["Date,Start,Team,Kind,Athlete number,Minutes", ...lines]);
  const { id: imported, state } = await importFile(scope, "exposure", exposure);
  if (state === "committed") world.undoable.push(imported);
}

async function changeRule({ scope, random }: World) {
  const rule = {
    organisationId: scope.organisationId,
    sport: random.pick(["soccer", "volleyball", "other"]),
  };
  const at = and(eq(sportRules.sport, rule.sport), eq(sportRules.fromAge, 14));
  await write(scope, async (tx) => {
    if (random.chance(0.3)) return tx.delete(sportRules).where(at);
    const values = { playersOnField: random.int(5, 11), regulationMinutes: random.pick([40, 70, 80]) };
    const target = [sportRules.organisationId, sportRules.sport, sportRules.fromAge];
    return tx
      .insert(sportRules)
      .values({ ...rule, fromAge: 14, ...values })
      .onConflictDoUpdate({ target, set: values });
  });
}

async function moveClock({ scope, random }: World) {
  const organisation = await readOrganisation(scope);
  const timeZone = random.pick(["Pacific/Auckland", "America/Los_Angeles", "Europe/London"]);
  await editOrganisation(scope, organisation.version, { ...organisation, timeZone } as never);
}

export const actions: Record<string, Action> = {
  birthDate: (world) => correctAthlete(world, "dateOfBirth"),
  sex: (world) => correctAthlete(world, "sex"),
  archive: async (world) =>
    archiveAthlete(world.scope, await pick(world, "athletes"), world.random.chance(0.7)),
  join: async (world) =>
    joinTeam(world.scope, await pick(world, "athletes"), {
      ...{ team: await pick(world, "teams"), fromDay: pastDay(world), toDay: null },
    }),
  leave: async (world) => {
    const entries = await read(world.scope, (tx) =>
      tx.select().from(rosterEntries).orderBy(rosterEntries.id),
    );
    const { id, athleteId } = world.random.pick(entries);
    await leaveTeam(world.scope, athleteId, { entry: id, toDay: pastDay(world) });
  },
  tick: (world) => tick(world, false),
  clear: (world) => tick(world, true),
  headcount: async (world) => {
    const id = await pastSession(
      world,
      sql`exposure_grade in ('none', 'headcount') and state <> 'cancelled'`,
    );
    const { headcount, headcountMinutes: minutes } = await read(world.scope, (tx) => getSession(tx, id));
    await recordHeadcount(world.scope, id, randomUUID(), {
      headcount: { base: headcount, value: world.random.int(1, 30) },
      minutes: { base: minutes, value: 75 },
    });
  },
  settle: async (world) => {
    const id = await pastSession(world);
    const { state } = await read(world.scope, (tx) => getSession(tx, id));
    const outcome = world.random.pick([
      { state: "held", actualMinutes: null },
      { state: "abandoned", abandonedAfter: 20 },
      { state: "cancelled", cancelReason: "weather" },
    ] as const);
    await settle(world.scope, id, outcome, state);
  },
  moveSession,
  addSession: async (world) => {
    const session = await addSession(
      world.scope,
      { teamId: await pick(world, "teams"), day: pastDay(world), startTime: "18:00", kind: "match" } as never,
      { another: true },
    );
    await settle(world.scope, session.id, { state: "held", actualMinutes: 90 }, "planned");
  },
  deleteSession: async (world) => {
    const id = await pastSession(
      world,
      sql`exposure_grade in ('headcount', 'estimated') and not exists (select 1 from injury_revisions i
        where i.organisation_id = sessions.organisation_id and i.session_id = sessions.id)`,
    );
    await write(world.scope, (tx) => tx.delete(sessions).where(eq(sessions.id, id)));
  },
  illness: async (world) =>
    setAthleteAvailability(
      world.scope,
      await pick(world, "athletes"),
      { cause: "illness" },
      { ...changeOf(world, pastDay(world)), state: "unavailable" },
    ),
  injuryAvailability: async (world) => {
    const { id, day } = await pickInjury(world);
    await changeInjuryAvailability(world.scope, id, changeOf(world, addDays(day, world.random.int(0, 9))));
  },
  logInjury: logAnInjury,
  editInjury: editAnInjury,
  withdraw: async (world) => {
    const { id, version } = await pickInjury(world);
    await withdrawInjury(world.scope, id, { version, reason: "entered_twice" });
  },
  rule: changeRule,
  team: async (world) => {
    const id = await pick(world, "teams");
    const [team] = await read(world.scope, (tx) => tx.select().from(teams).where(eq(teams.id, id)));
    const { random } = world;
    if (team)
      await saveTeam(world.scope, id, {
        ...{ name: team.name, sex: team.sex as "girls", underAge: random.pick([12, 16, 18, null]) },
        sport: random.pick(["soccer", "volleyball", "other"]),
      });
  },
  timeZone: moveClock,
  import: importFiles,
  undo: async (world) => {
    const id = world.undoable.pop();
    if (id) await undoImport(world.scope, id);
  },
};
