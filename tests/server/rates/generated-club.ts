import { randomUUID } from "node:crypto";
import { addDays } from "~/platform/clock";
import { type Scope, write } from "~db/client.server";
import {
  athletes,
  availabilityChanges,
  availabilityReasons,
  injuries,
  injuryDiagnoses,
  injuryRevisions,
  participations,
  rosterEntries,
  sessions,
  teams,
} from "~db/schema";

/** A club made by chance from a seed, with the corners that counting gets wrong; the test counts it by hand. */

type Insert<T extends { $inferInsert: object }> = Omit<T["$inferInsert"], "organisationId">;
export type Plan = {
  season: { from: string; to: string };
  teams: { id: string; name: string; sport: string; sex: string; underAge: number | null }[];
  athletes: { id: string; sex: "female" | "male" | "not_stated"; born: string | null }[];
  roster: { athleteId: string; teamId: string; from: string; to: string | null }[];
  sessions: (Insert<typeof sessions> & {
    id: string;
    teamId: string;
    day: string;
    kind: string;
    state: string;
  })[];
  parts: { sessionId: string; athleteId: string; presence: string; minutes: number }[];
  injuries: (Insert<typeof injuryRevisions> & { injuryId: string; athleteId: string; onsetDay: string })[];
  changes: {
    reasonId: string;
    injuryId: string | null;
    athleteId: string;
    seq: number;
    fromDay: string;
    state: string;
  }[];
};

/** mulberry32: small, seeded, good enough to vary a test. */
export function randomOf(seed: number) {
  let state = seed;
  const next = () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  return {
    chance: (share: number) => next() < share,
    int: (from: number, to: number) => from + Math.floor(next() * (to - from + 1)),
    pick: <T>(list: readonly T[]) => list[Math.floor(next() * list.length)] as T,
  };
}

export function planClub(seed: number, today: string): Plan {
  const random = randomOf(seed);
  const season = { from: addDays(today, -160), to: addDays(today, 100) };
  const dayIn = () => addDays(season.from, random.int(-20, 160));
  const teamRows = [
    { sport: "soccer", sex: "girls", underAge: 16 },
    { sport: "soccer", sex: "boys", underAge: 18 },
    { sport: "volleyball", sex: "mixed", underAge: null },
    { sport: "other", sex: "women", underAge: null },
  ].map((team, index) => ({ ...team, id: randomUUID(), name: `Team ${index}` }));
  const athleteRows = Array.from({ length: 36 }, (_, index) => ({
    id: randomUUID(),
    sex: random.pick(["female", "female", "male", "male", "not_stated"] as const),
    born:
      index === 0
        ? "2008-02-29"
        : index === 1
          ? null
          : addDays(season.from, -365 * random.int(9, 27) + random.int(0, 200)),
  }));
  const roster = athleteRows.flatMap(({ id }) => {
    const [first, second] = [random.pick(teamRows), random.pick(teamRows)];
    const moves = random.chance(0.3) && first.id !== second.id ? dayIn() : null;
    return [
      { athleteId: id, teamId: first.id, from: addDays(season.from, -60), to: moves && addDays(moves, -1) },
      ...(moves ? [{ athleteId: id, teamId: second.id, from: moves, to: null }] : []),
      ...(!moves && first.id !== second.id && random.chance(0.6)
        ? [{ athleteId: id, teamId: second.id, from: dayIn(), to: null }]
        : []),
    ];
  });
  const plan: Plan = {
    season,
    teams: teamRows,
    athletes: athleteRows,
    roster,
    sessions: [],
    parts: [],
    injuries: [],
    changes: [],
  };
  for (let n = 0; n < 220; n++) addSession(plan, random, dayIn());
  for (let n = 0; n < 200; n++) addInjury(plan, random, dayIn(), today);
  return plan;
}

export type Random = ReturnType<typeof randomOf>;

function addSession(plan: Plan, random: Random, day: string) {
  const id = randomUUID();
  const kind = random.pick(["training", "training", "match", "match", "strength", "other"]);
  const state = random.pick(["held", "held", "held", "held", "abandoned", "cancelled", "planned"]);
  const grade = random.pick([
    "recorded",
    "recorded",
    "recorded",
    "recorded",
    "headcount",
    "estimated",
    "none",
  ]);
  const team = random.pick(plan.teams);
  const past = day < addDays(plan.season.from, 160);
  plan.sessions.push({
    id,
    teamId: team.id,
    day,
    kind,
    state: past ? state : "planned",
    startTime: random.pick(["17:30", "23:30", "00:00", "01:30"]),
    plannedMinutes: 90,
    actualMinutes: random.pick([75, 90, null]),
    abandonedAfter: state === "abandoned" ? random.pick([20, 55, null]) : null,
    exposureGrade: grade,
    headcount: grade === "headcount" ? random.pick([0, 3, 9, 40]) : null,
    headcountMinutes: grade === "headcount" ? random.pick([60, 72.5, null]) : null,
  });
  if (grade !== "recorded") return;
  for (const { athleteId } of plan.roster.filter(({ teamId }) => teamId === team.id)) {
    if (plan.parts.some((part) => part.sessionId === id && part.athleteId === athleteId)) continue;
    const presence = random.pick(["took_part", "took_part", "took_part", "present_only", "absent"]);
    const minutes = presence === "took_part" ? random.pick([0, 30, 62.5, 90]) : 0;
    plan.parts.push({ sessionId: id, athleteId, presence, minutes });
  }
}

function addInjury(plan: Plan, random: Random, anyDay: string, today: string) {
  const injuryId = randomUUID();
  const codes = codesOf(plan.injuries.length);
  const athlete = random.pick(plan.athletes);
  const session = random.chance(0.65) ? random.pick(plan.sessions) : null;
  // A session that ends after midnight injures on the next day.
  const onsetDay = session ? addDays(session.day, random.chance(0.1) ? 1 : 0) : anyDay;
  if (onsetDay > today) return;
  plan.injuries.push({
    injuryId,
    athleteId: athlete.id,
    version: 1,
    onsetDay,
    sessionId: session?.id ?? null,
    outsideSport: !session && random.chance(0.3),
    ...codes,
    onset: random.pick(["sudden", "sudden", "sudden_repetitive", "gradual", "gradual", null]),
    subsequence: random.pick(["index", "index", "recurrent", "local", "other_site", "exacerbation", null]),
    withdrawn: random.chance(0.06),
    signs: [],
    firstCare: [],
    referredTo: [],
  });
  if (random.chance(0.2)) return;
  const reasonId = randomUUID();
  const change = (seq: number, fromDay: string, state: string) =>
    plan.changes.push({ reasonId, injuryId, athleteId: athlete.id, seq, fromDay, state });
  const start = addDays(onsetDay, random.pick([0, 0, 1, 3]));
  change(1, start, random.pick(["unavailable", "unavailable", "modified"]));
  if (random.chance(0.25)) return;
  const back = addDays(start, random.int(0, 30));
  change(2, back, random.pick(["full", "full", "modified"]));
  // A correction of the day of return, and a setback.
  if (random.chance(0.3)) change(3, addDays(back, random.int(-3, 6)), "full");
  if (random.chance(0.2)) change(4, addDays(back, 12), "unavailable");
}

/** What was hurt and how, from a stream of its own. */
function codesOf(index: number) {
  const random = randomOf(index + 1000);
  return {
    bodyArea: random.pick(["knee", "knee", "ankle", "thigh", "head", "multiple"]),
    side: random.pick(["left", "left", "right", "both", "none", "unknown"]),
    contact: random.pick([
      "non_contact",
      "indirect_athlete",
      "indirect_object",
      "direct_athlete",
      "unknown",
      null,
    ]),
    movement: random.pick(["cutting", "landing", "none", null]),
    tissue: random.pick(["ligament_capsule", "bone", null]),
  };
}

const chunked = <T>(list: readonly T[]) =>
  Array.from({ length: Math.ceil(list.length / 500) }, (_, n) => list.slice(n * 500, n * 500 + 500));

/** Writes a plan into the database; every injury gets an earlier revision that must not count. */
export async function plantClub(scope: Scope, plan: Plan) {
  const { organisationId } = scope;
  const org = { organisationId };
  await write(scope, async (tx) => {
    await tx
      .insert(teams)
      .values(plan.teams.map((team) => ({ ...org, nameKey: team.name.toLowerCase(), ...team })));
    await tx.insert(athletes).values(
      plan.athletes.map(({ id, sex, born }, index) => ({
        ...org,
        id,
        sex,
        dateOfBirth: born,
        givenName: "Ada",
        familyName: `Test ${index}`,
        nameKey: `ada test ${index}`,
      })),
    );
    await tx.insert(rosterEntries).values(
      plan.roster.map(({ athleteId, teamId, from, to }) => ({
        ...org,
        id: randomUUID(),
        athleteId,
        teamId,
        fromDay: from,
        toDay: to,
      })),
    );
    for (const rows of chunked(plan.sessions))
      await tx.insert(sessions).values(rows.map((row) => ({ ...org, ...row })));
    for (const rows of chunked(plan.parts))
      await tx.insert(participations).values(rows.map((row) => ({ ...org, ...row })));
    await tx
      .insert(injuries)
      .values(
        plan.injuries.map(({ injuryId, athleteId }) => ({ ...org, id: injuryId, athleteId, version: 2 })),
      );
    await tx.insert(injuryRevisions).values(
      plan.injuries.flatMap(({ athleteId: _athlete, ...row }) => [
        { ...org, ...row, version: 1, withdrawn: false, outsideSport: false, subsequence: "index" },
        { ...org, ...row, version: 2 },
      ]),
    );
    await tx.insert(injuryDiagnoses).values(
      plan.injuries.flatMap(({ injuryId }) =>
        [1, 2].map((position) => ({
          ...org,
          injuryId,
          version: 2,
          position,
          tissue: "bone",
          pathology: "bone_contusion",
          certainty: "clinical",
        })),
      ),
    );
    const reasons = new Map(plan.changes.map((change) => [change.reasonId, change]));
    await tx.insert(availabilityReasons).values(
      [...reasons.values()].map(({ reasonId, injuryId, athleteId }) => ({
        ...org,
        id: reasonId,
        athleteId,
        injuryId,
        cause: injuryId ? "injury" : "illness",
      })),
    );
    await tx.insert(availabilityChanges).values(
      plan.changes.map(({ injuryId: _injury, ...change }) => ({
        ...org,
        id: randomUUID(),
        restrictions: [],
        ...change,
      })),
    );
  });
}
