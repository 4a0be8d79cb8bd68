import { randomUUID } from "node:crypto";
import { beforeAll, describe, expect, it } from "vitest";
import { recordAttendance, recordHeadcount } from "~/features/sessions/attendance.server";
import { openAttendance, submitAttendance } from "~/features/sessions/attendance-page.server";
import { openSession } from "~/features/sessions/session-page.server";
import {
  addSession,
  editSession,
  getSession,
  listSessionsOfDay,
  listUnconfirmed,
  nextSessionForCoach,
  settle,
} from "~/features/sessions/sessions.server";
import { addDays } from "~/platform/clock";
import { read } from "~db/client.server";
import { maintenance, makeAthlete, makeAvailability, makeClub, makeSession } from "../../harness";

type Club = Awaited<ReturnType<typeof makeClub>>;
let club: Club;
let limited: string;
let out: string;

const took = (minutes: number) => ({ presence: "took_part", minutes });
const formOf = (values: Record<string, string>) => {
  const form = new FormData();
  for (const [name, value] of Object.entries(values)) form.set(name, value);
  return form;
};
const stored = (sessionId: string) => read(club.scopes.coach, (tx) => getSession(tx, sessionId));
const planned = (given: Partial<Parameters<typeof makeSession>[1]> = {}) =>
  makeSession(club.staff, {
    teamId: club.team.id,
    state: "planned",
    plannedMinutes: 90,
    actualMinutes: null,
    ...given,
  });

beforeAll(async () => {
  club = await makeClub();
  const teamId = club.team.id;
  limited = (await makeAthlete(club.staff, { teamId, givenName: "Runa" })).id;
  out = (await makeAthlete(club.staff, { teamId, givenName: "Tova" })).id;
  const change = { fromDay: club.staff.today, expectedOn: null };
  await makeAvailability(club.scopes.lead, {
    athleteId: limited,
    cause: "other",
    ...change,
    state: "modified",
    restrictions: ["no_cutting", "minutes_limit"],
    minutesLimit: 30,
  });
  await makeAvailability(club.scopes.lead, {
    athleteId: out,
    cause: "other",
    ...change,
    state: "unavailable",
    restrictions: [],
    minutesLimit: null,
  });
});

describe("attendance by one touch", () => {
  it("gives everyone available full time, keeps limits, never preselects the unavailable", async () => {
    const session = await planned();
    const page = await read(club.scopes.coach, (tx) => openAttendance(tx, club.scopes.coach, session.id, ""));
    const answer = await submitAttendance(
      club.scopes.coach,
      session.id,
      formOf({
        intent: "everyone",
        fullTime: "80",
        base: JSON.stringify(page.base),
        operationId: page.operationIds.attendance,
      }),
    );
    expect(answer).toEqual({ saved: true });
    const after = await read(club.scopes.coach, (tx) =>
      openAttendance(tx, club.scopes.coach, session.id, ""),
    );
    const partOf = (id: string) => after.athletes.find((athlete) => athlete.id === id)?.part;
    expect(partOf(club.athlete.id)).toEqual(took(80));
    expect(partOf(limited)).toEqual(took(30));
    expect(partOf(out)).toBeNull();
    expect(after.session).toMatchObject({
      state: "held",
      exposureGrade: "recorded",
      tookPart: 2,
      actualMinutes: 80,
    });
  });

  it("shows state and restrictions and nothing of why", async () => {
    const session = await planned();
    const page = await read(club.scopes.coach, (tx) => openSession(tx, club.scopes.coach, session.id));
    const athlete = page.athletes.find(({ id }) => id === limited);
    expect(athlete?.words).toMatch(/^Modified: no cutting, at most 30 minutes\. As of \d\d:\d\d$/);
    expect(Object.keys(athlete ?? {}).sort()).toEqual(
      "alerts expectedOn familyName givenName guest id minutesLimit part restrictions state words".split(" "),
    );
    expect(JSON.stringify(page)).not.toMatch(/injur|cause|diagnos/i);
  });

  it("names an athlete whose minutes cannot be read, and saves nothing", async () => {
    const session = await planned();
    const answer = await submitAttendance(
      club.scopes.coach,
      session.id,
      formOf({
        intent: "save",
        fullTime: "90",
        base: "{}",
        operationId: randomUUID(),
        [`presence-${limited}`]: "took_part",
        [`presence-${club.athlete.id}`]: "took_part",
        [`minutes-${club.athlete.id}`]: "lots",
      }),
    );
    expect(answer).toMatchObject({
      status: 400,
      errors: { fields: { [`minutes-${club.athlete.id}`]: [/minutes/i] } },
    });
    expect(await stored(session.id)).toMatchObject({ participations: 0, state: "planned" });
  });
});

describe("two people at once", () => {
  it("merges different athletes and equal answers, and shows both values of different ones", async () => {
    const { trainer, coach } = club.scopes;
    const session = await planned();
    const field = `athlete:${club.athlete.id}`;
    await recordAttendance(trainer, session.id, randomUUID(), { [field]: { base: null, value: took(90) } });
    const equal = await recordAttendance(coach, session.id, randomUUID(), {
      [field]: { base: null, value: took(90) },
      [`athlete:${limited}`]: { base: null, value: took(30) },
    });
    expect(equal).toMatchObject({ agreed: [field], tookPart: 2 });
    const changes = {
      [field]: { base: null, value: took(45) },
      [`athlete:${limited}`]: { base: took(30), value: null },
    };
    await expect(recordAttendance(coach, session.id, randomUUID(), changes)).rejects.toMatchObject({
      status: 409,
      details: { conflicts: [{ field, base: null, stored: took(90), value: took(45) }] },
    });
    expect(await stored(session.id)).toMatchObject({ tookPart: 2 });
  });

  it("answers the form with 409 and both values", async () => {
    const session = await planned();
    const field = `athlete:${club.athlete.id}`;
    await recordAttendance(club.scopes.trainer, session.id, randomUUID(), {
      [field]: { base: null, value: took(60) },
    });
    const answer = await submitAttendance(
      club.scopes.coach,
      session.id,
      formOf({
        intent: "save",
        fullTime: "90",
        base: "{}",
        operationId: randomUUID(),
        [`presence-${club.athlete.id}`]: "absent",
      }),
    );
    expect(answer).toMatchObject({ status: 409, conflicts: [{ field, stored: took(60) }] });
  });
});

describe("one grade per session", () => {
  const count = (headcount: number, minutes: number) => ({
    headcount: { base: null, value: headcount },
    minutes: { base: null, value: minutes },
  });

  it("takes a headcount while nothing better is known, and replaces it by recorded attendance", async () => {
    const session = await planned();
    await recordHeadcount(club.scopes.coach, session.id, randomUUID(), count(5, 60));
    const counted = await read(club.scopes.coach, (tx) => openSession(tx, club.scopes.coach, session.id));
    expect(counted.session).toMatchObject({ exposureGrade: "headcount", headcount: 5, state: "held" });
    // Two of the roster are available, so three of the five are unknown.
    expect(counted.exposure).toMatchObject({ aes: 5, hours: 5, unknown: { aes: 3, hours: 3 } });

    await recordAttendance(club.scopes.coach, session.id, randomUUID(), {
      [`athlete:${club.athlete.id}`]: { base: null, value: took(60) },
    });
    expect(await stored(session.id)).toMatchObject({ exposureGrade: "recorded", headcount: null });
    await expect(
      recordHeadcount(club.scopes.coach, session.id, randomUUID(), count(9, 60)),
    ).rejects.toMatchObject({ code: "conflict" });
  });

  it("falls back when attendance is cleared", async () => {
    const session = await planned();
    const field = `athlete:${club.athlete.id}`;
    await recordAttendance(club.scopes.coach, session.id, randomUUID(), {
      [field]: { base: null, value: took(60) },
    });
    await recordAttendance(club.scopes.coach, session.id, randomUUID(), {
      [field]: { base: took(60), value: null },
    });
    expect(await stored(session.id)).toMatchObject({ exposureGrade: "none", participations: 0 });
  });

  it("estimates a match that was held with neither", async () => {
    const session = await planned({ kind: "match" });
    await settle(club.scopes.coach, session.id, { state: "held", actualMinutes: null }, "planned");
    const page = await read(club.scopes.coach, (tx) => openSession(tx, club.scopes.coach, session.id));
    expect(page.session.exposureGrade).toBe("estimated");
    expect(page.exposure.aes).toBe(0);
    expect(page.exposure.hours).toBeGreaterThan(5);
  });
});

describe("whether it took place", () => {
  it("lists what nobody confirmed, own teams only", async () => {
    const day = addDays(club.staff.today, -3);
    const mine = await planned({ day });
    const other = await makeSession(club.staff, { teamId: club.otherTeam.id, state: "planned", day });
    const ids = await read(club.scopes.coach, async (tx) =>
      (await listUnconfirmed(tx, club.scopes.coach)).map(({ id }) => id),
    );
    expect(ids).toContain(mine.id);
    expect(ids).not.toContain(other.id);
    const all = await read(club.scopes.lead, (tx) => listUnconfirmed(tx, club.scopes.lead));
    expect(all.map(({ id }) => id)).toContain(other.id);
    await settle(club.scopes.coach, mine.id, { state: "cancelled", cancelReason: "Frozen pitch" }, "planned");
    expect(await stored(mine.id)).toMatchObject({ status: "cancelled", cancelReason: "Frozen pitch" });
  });

  it("is not cancelled over recorded attendance, nor confirmed before its day", async () => {
    const session = await planned();
    await recordAttendance(club.scopes.coach, session.id, randomUUID(), {
      [`athlete:${club.athlete.id}`]: { base: null, value: took(60) },
    });
    const cancel = { state: "cancelled" as const, cancelReason: "Rain" };
    await expect(settle(club.scopes.coach, session.id, cancel, "held")).rejects.toMatchObject({
      status: 409,
    });
    const later = await planned({ day: addDays(club.staff.today, 2) });
    await expect(
      settle(club.scopes.coach, later.id, { state: "held", actualMinutes: 90 }, "planned"),
    ).rejects.toMatchObject({ status: 409 });
  });

  it("tells the second person what the first chose", async () => {
    const session = await planned();
    await settle(club.scopes.trainer, session.id, { state: "cancelled", cancelReason: "Storm" }, "planned");
    await expect(
      settle(club.scopes.coach, session.id, { state: "held", actualMinutes: 60 }, "planned"),
    ).rejects.toMatchObject({ status: 409, details: { stored: "cancelled", value: "held" } });
  });

  it("merges edits of different fields and refuses different values of one", async () => {
    const session = await planned({ kind: "training", surface: "natural_grass" });
    const values = {
      day: session.day,
      startTime: null,
      kind: "training" as const,
      plannedMinutes: 90,
      surface: "natural_grass" as const,
      venueId: null,
    };
    await editSession(club.scopes.trainer, session.id, { ...values, plannedMinutes: 75 }, values);
    await editSession(club.scopes.trainer, session.id, { ...values, surface: "artificial_turf" }, values);
    expect(await stored(session.id)).toMatchObject({ plannedMinutes: 75, surface: "artificial_turf" });
    await expect(
      editSession(club.scopes.trainer, session.id, { ...values, plannedMinutes: 60 }, values),
    ).rejects.toMatchObject({ status: 409, fields: { plannedMinutes: [expect.stringContaining("75")] } });
    expect(() => editSession(club.scopes.coach, session.id, values, values)).toThrow(/role/);
  });
});

describe("own teams only", () => {
  it("answers a foreign session like an absent one", async () => {
    const foreign = await makeSession(club.staff, { teamId: club.otherTeam.id, state: "planned" });
    const { coach } = club.scopes;
    const absent = { status: 404 };
    await expect(read(coach, (tx) => openSession(tx, coach, foreign.id))).rejects.toMatchObject(absent);
    await expect(recordAttendance(coach, foreign.id, randomUUID(), {})).rejects.toMatchObject(absent);
    await expect(
      settle(coach, foreign.id, { state: "held", actualMinutes: 9 }, "planned"),
    ).rejects.toMatchObject(absent);
    const ofDay = await read(coach, (tx) => listSessionsOfDay(tx, coach, coach.today));
    expect(ofDay.every(({ teamId }) => teamId === club.team.id)).toBe(true);
  });

  it("adds a session for own teams, and proposes the one that is there already", async () => {
    const input = {
      teamId: club.team.id,
      day: addDays(club.staff.today, 5),
      startTime: "17:30",
      kind: "strength" as const,
      plannedMinutes: 45,
      surface: null,
      venueId: null,
    };
    const first = await addSession(club.scopes.coach, input);
    await expect(addSession(club.scopes.trainer, input)).rejects.toMatchObject({
      status: 409,
      details: { existing: first.id },
    });
    const second = await addSession(club.scopes.trainer, input, { another: true });
    expect(second.id).not.toBe(first.id);
    await expect(
      addSession(club.scopes.coach, { ...input, teamId: club.otherTeam.id }),
    ).rejects.toMatchObject({
      status: 404,
    });
  });

  it("shows the coach one session to act on", async () => {
    const next = await read(club.scopes.coach, (tx) => nextSessionForCoach(tx, club.scopes.coach));
    expect(next).toMatchObject({ teamId: club.team.id, day: club.staff.today });
  });

  it("is added once by two people who press at the same moment", async () => {
    const input = {
      teamId: club.team.id,
      day: addDays(club.scopes.coach.today, 9),
      startTime: "18:00",
      kind: "training" as const,
      plannedMinutes: 90,
      surface: null,
      venueId: null,
    };
    const both = await Promise.allSettled(
      [club.scopes.coach, club.scopes.trainer].map((scope) => addSession(scope, input)),
    );
    expect(both.map(({ status }) => status).sort()).toEqual(["fulfilled", "rejected"]);
    const rows = await maintenance()`
      select 1 from sessions where team_id = ${club.team.id} and day = ${input.day}`;
    expect(rows).toHaveLength(1);
  });

  it("keeps a guest of another team in the audit", async () => {
    const session = await planned();
    const guest = club.otherAthlete.id;
    const page = await read(club.scopes.coach, (tx) =>
      openAttendance(tx, club.scopes.coach, session.id, club.otherAthlete.givenName.slice(0, 4)),
    );
    expect(page.guests.map(({ id }) => id)).toContain(guest);
    await submitAttendance(
      club.scopes.coach,
      session.id,
      formOf({ intent: "guest", athlete: guest, operationId: page.operationIds.guest }),
    );
    const [event] = await maintenance()`select action from audit_events
      where athlete_id = ${guest} and subject_id = ${session.id}`;
    expect(event?.action).toBe("attendance.guest");
  });
});
