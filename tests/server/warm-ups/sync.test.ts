import { randomUUID } from "node:crypto";
import { beforeAll, describe, expect, it } from "vitest";
import type { Operation } from "~/features/sessions/sync.schema";
import { syncOperations } from "~/features/sessions/sync.server";
import { submitWarmUp } from "~/features/warm-ups/warm-up-page.server";
import { complianceByTeam, openWarmUp, recordWarmUp } from "~/features/warm-ups/warm-ups.server";
import { addDays } from "~/platform/clock";
import type { FieldValue } from "~/platform/merge-fields";
import { read } from "~db/client.server";
import { warmUpBlocks } from "~db/schema/codes";
import {
  maintenance,
  makeAthlete,
  makeAvailability,
  makeClub,
  makeProgramme,
  makeSession,
  makeWarmUp,
} from "../../harness";

type Club = Awaited<ReturnType<typeof makeClub>>;
let club: Club;
let out: string;

const held = (given: Partial<Parameters<typeof makeSession>[1]> = {}) =>
  makeSession(club.staff, { teamId: club.team.id, ...given });
const operation = (
  sessionId: string,
  fields: Record<string, [FieldValue, FieldValue]>,
  kind: Operation["kind"] = "warm-up",
): Operation => ({
  id: randomUUID(),
  kind,
  sessionId,
  fields: Object.fromEntries(Object.entries(fields).map(([name, [base, value]]) => [name, { base, value }])),
});
const tick = (sessionId: string, block: string) =>
  operation(sessionId, { [`block:${block}`]: [false, true], skipReason: [null, null] });
const stateOf = async (sessionId: string) =>
  (await read(club.scopes.coach, (tx) => openWarmUp(tx, club.scopes.coach, sessionId))).state;

beforeAll(async () => {
  club = await makeClub();
  out = (await makeAthlete(club.staff, { teamId: club.team.id, givenName: "Tova" })).id;
  await makeAvailability(club.scopes.lead, {
    athleteId: out,
    cause: "other",
    fromDay: club.staff.today,
    expectedOn: null,
    state: "unavailable",
    restrictions: [],
    minutesLimit: null,
  });
});

describe("ticks of a phone", () => {
  it("records a block with everyone whose restrictions allow it, and the programme's version", async () => {
    const programme = await makeProgramme(club.staff, { teamIds: [club.team.id] });
    const session = await held();
    const [answer] = await syncOperations(club.scopes.coach, [tick(session.id, "running")]);
    expect(answer).toMatchObject({ status: "applied", result: { state: { blocks: ["running"] } } });
    const state = await stateOf(session.id);
    expect(state.athleteIds).toContain(club.athlete.id);
    expect(state.athleteIds).not.toContain(out);
    const [row] = await maintenance()`select outcome, programme_id, programme_version from warm_ups
      where session_id = ${session.id}`;
    expect(row).toEqual({ outcome: "part", programme_id: programme.id, programme_version: 1 });
  });

  it("answers a replay with the first result and changes nothing", async () => {
    const session = await held();
    const ticked = tick(session.id, "running");
    const untick = operation(session.id, { "block:running": [true, false], skipReason: [null, null] });
    await syncOperations(club.scopes.coach, [ticked, untick]);
    const again = await syncOperations(club.scopes.coach, [ticked, untick]);
    expect(again.map(({ status }) => status)).toEqual(["replayed", "replayed"]);
    expect((await stateOf(session.id)).recorded).toBe(false);
  });

  it("refuses another body under the same id, and goes on with the next operation", async () => {
    const session = await held();
    const first = tick(session.id, "running");
    await syncOperations(club.scopes.coach, [first]);
    const other = { ...tick(session.id, "balance"), id: first.id };
    const answers = await syncOperations(club.scopes.coach, [other, tick(session.id, "strength")]);
    expect(answers).toMatchObject([{ status: "refused", code: "operation_mismatch" }, { status: "applied" }]);
    expect((await stateOf(session.id)).blocks).toEqual(["running", "strength"]);
    await expect(recordWarmUp(club.scopes.coach, session.id, first.id, {})).rejects.toMatchObject({
      status: 422,
    });
  });

  it("refuses another person's id", async () => {
    const session = await held();
    const mine = tick(session.id, "running");
    await syncOperations(club.scopes.coach, [mine]);
    expect(await syncOperations(club.scopes.trainer, [mine])).toMatchObject([
      { status: "refused", code: "operation_mismatch" },
    ]);
  });

  it("merges two phones that tick different blocks, and agrees on the same one", async () => {
    const session = await held();
    await syncOperations(club.scopes.coach, [tick(session.id, "running")]);
    const answers = await syncOperations(club.scopes.trainer, [
      tick(session.id, "balance"),
      tick(session.id, "running"),
    ]);
    expect(answers.map(({ status }) => status)).toEqual(["applied", "merged"]);
    expect((await stateOf(session.id)).blocks).toEqual(["running", "balance"]);
  });

  it("shows both values when one phone ticked and the other skipped", async () => {
    const session = await held();
    await syncOperations(club.scopes.coach, [tick(session.id, "running")]);
    const skip = operation(session.id, {
      ...Object.fromEntries(
        warmUpBlocks.map((block) => [`block:${block}`, [false, false] as [FieldValue, FieldValue]]),
      ),
      skipReason: [null, "no_time"],
    });
    const [answer] = await syncOperations(club.scopes.trainer, [skip]);
    expect(answer).toMatchObject({
      status: "conflict",
      conflicts: [{ field: "block:running", base: false, stored: true, value: false }],
    });
    const [bare] = await syncOperations(club.scopes.trainer, [
      operation(session.id, { skipReason: [null, "no_time"] }),
    ]);
    expect(bare).toMatchObject({ status: "refused", code: "conflict" });
    expect(await stateOf(session.id)).toMatchObject({ blocks: ["running"], skipReason: null });
  });

  it("takes simultaneous replays once", async () => {
    const session = await held();
    const ticked = tick(session.id, "running");
    const answers = await Promise.all([1, 2, 3].map(() => syncOperations(club.scopes.coach, [ticked])));
    expect(
      answers
        .flat()
        .map(({ status }) => status)
        .sort(),
    ).toEqual(["applied", "replayed", "replayed"]);
    const rows = await maintenance()`select version from warm_ups where session_id = ${session.id}`;
    expect(rows).toEqual([{ version: 1 }]);
  });

  it.each([
    ["an unknown field", { "block:stretching": [false, true] }],
    ["minutes that are none", { "block:running": [false, true], minutes: [null, -4] }],
    ["a reason not of the list", { skipReason: [null, "rainbow"] }],
    ["minutes before any block", { minutes: [null, 15] }],
  ] as const)("refuses %s and stores nothing", async (_what, fields) => {
    const session = await held();
    const given = fields as unknown as Record<string, [FieldValue, FieldValue]>;
    const [answer] = await syncOperations(club.scopes.coach, [operation(session.id, given)]);
    expect(answer).toMatchObject({ status: "refused", code: "invalid" });
    expect((await stateOf(session.id)).recorded).toBe(false);
  });

  it("answers another team's session like an absent one, and a session to come or cancelled with words", async () => {
    const foreign = await held({ teamId: club.otherTeam.id });
    const later = await held({ state: "planned", day: addDays(club.staff.today, 1) });
    const cancelled = await held({ state: "cancelled" });
    const answers = await syncOperations(
      club.scopes.coach,
      [foreign, later, cancelled].map(({ id }) => tick(id, "running")),
    );
    expect(answers).toMatchObject([
      { status: "refused", code: "not_found" },
      { status: "refused", code: "conflict" },
      { status: "refused", code: "conflict" },
    ]);
    const [stranger] = await syncOperations(club.scopes.coach, [
      operation((await held()).id, {
        "block:running": [false, true],
        [`athlete:${club.otherAthlete.id}`]: [false, true],
      }),
    ]);
    expect(stranger).toMatchObject({ status: "refused", code: "not_found" });
  });

  it("is not for an administrator", async () => {
    const session = await held();
    expect(await syncOperations(club.scopes.admin, [tick(session.id, "running")])).toMatchObject([
      { status: "refused", code: "forbidden" },
    ]);
  });
});

describe("sessions of a phone", () => {
  const fresh = (day: string): Record<string, [FieldValue, FieldValue]> => ({
    teamId: [null, club.team.id],
    day: [null, day],
    kind: [null, "other"],
    plannedMinutes: [null, 60],
  });

  it("adds one, takes its attendance, and settles it", async () => {
    const id = randomUUID();
    const field = `athlete:${club.athlete.id}`;
    const answers = await syncOperations(club.scopes.coach, [
      operation(id, fresh(club.staff.today), "add-session"),
      operation(id, { [field]: [null, { presence: "took_part", minutes: 60 }] }, "attendance"),
      operation(id, { state: ["held", "abandoned"], abandonedAfter: [null, 40] }, "session"),
      operation(id, { cancelReason: [null, "Rain"] }, "cancel"),
    ]);
    expect(answers.map(({ status }) => status)).toEqual(["applied", "applied", "applied", "refused"]);
    const [row] =
      await maintenance()`select state, abandoned_after, exposure_grade from sessions where id = ${id}`;
    expect(row).toEqual({ state: "abandoned", abandoned_after: 40, exposure_grade: "recorded" });
  });

  it("proposes the session another phone added, unless it is another one", async () => {
    const day = addDays(club.staff.today, -6);
    const [first, second] = [randomUUID(), randomUUID()];
    await syncOperations(club.scopes.coach, [operation(first, fresh(day), "add-session")]);
    const [answer] = await syncOperations(club.scopes.trainer, [
      operation(second, fresh(day), "add-session"),
    ]);
    expect(answer).toMatchObject({ status: "conflict", existing: first });
    const again = operation(second, { ...fresh(day), another: [null, true] }, "add-session");
    expect(await syncOperations(club.scopes.trainer, [again])).toMatchObject([{ status: "applied" }]);
    const taken = operation(first, { ...fresh(day), another: [null, true] }, "add-session");
    expect(await syncOperations(club.scopes.trainer, [taken])).toMatchObject([
      { status: "refused", code: "conflict" },
    ]);
  });
});

describe("the form without script", () => {
  const form = (values: Record<string, unknown>, base: Record<string, FieldValue> = {}) => ({
    operationId: randomUUID(),
    base: JSON.stringify(base),
    listed: `${club.athlete.id} ${out}`,
    joining: club.athlete.id,
    ...values,
  });

  it("saves all blocks and everyone, and undoes it", async () => {
    const session = await held();
    const base = { [`athlete:${club.athlete.id}`]: true };
    const answer = await submitWarmUp(club.scopes.coach, session.id, form({ intent: "all" }, base));
    expect(await stateOf(session.id)).toMatchObject({
      blocks: [...warmUpBlocks],
      athleteIds: [club.athlete.id],
    });
    if (!("saved" in answer)) throw new Error("The form was not saved.");
    const now = Object.fromEntries(warmUpBlocks.map((block) => [`block:${block}`, true]));
    await submitWarmUp(
      club.scopes.coach,
      session.id,
      form({ intent: "undo", undo: JSON.stringify(answer.undo) }, { ...base, ...now }),
    );
    expect((await stateOf(session.id)).recorded).toBe(false);
  });

  it("skips with a reason, which is not the same as not recorded, and takes it back", async () => {
    const session = await held();
    await submitWarmUp(club.scopes.coach, session.id, form({ intent: "skip", skipReason: "weather" }));
    expect(await stateOf(session.id)).toMatchObject({ recorded: true, skipReason: "weather", blocks: [] });
    await submitWarmUp(club.scopes.coach, session.id, form({ intent: "unskip" }, { skipReason: "weather" }));
    expect((await stateOf(session.id)).recorded).toBe(false);
  });

  it("answers with both values when somebody else saved something else", async () => {
    const session = await held();
    await submitWarmUp(
      club.scopes.trainer,
      session.id,
      form({ intent: "save", blocks: "running", minutes: "12" }),
    );
    const answer = await submitWarmUp(
      club.scopes.coach,
      session.id,
      form({ intent: "save", blocks: "running", minutes: "15" }),
    );
    expect(answer).toMatchObject({ conflicts: [{ field: "minutes", stored: 12, value: 15 }] });
  });
});

describe("compliance by team", () => {
  it("counts held sessions of own teams by the targets of their day", async () => {
    const own = await makeClub();
    const day = (back: number) => addDays(own.staff.today, -back);
    const on = { teamId: own.team.id };
    const session = (back: number, given: Partial<Parameters<typeof makeSession>[1]> = {}) =>
      makeSession(own.staff, { ...on, day: day(back), minutes: { [own.athlete.id]: 60 }, ...given });
    const full = await session(1);
    await makeWarmUp(own.staff, { sessionId: full.id, athleteIds: [own.athlete.id] });
    const part = await session(2);
    await makeWarmUp(own.staff, { sessionId: part.id, outcome: "part", blocks: ["running", "balance"] });
    const skipped = await session(3);
    await makeWarmUp(own.staff, {
      sessionId: skipped.id,
      outcome: "skipped",
      blocks: [],
      skipReason: "weather",
    });
    await session(4);
    await session(5, { state: "cancelled", minutes: {} });
    await session(6, { state: "planned", minutes: {} });
    const shown = await session(7, { state: "planned", minutes: {} });
    await makeWarmUp(own.staff, { sessionId: shown.id });
    const missed = await session(8, { state: "planned", minutes: {} });
    const skip = { outcome: "skipped" as const, blocks: [], skipReason: "forgot" as const };
    await makeWarmUp(own.staff, { sessionId: missed.id, ...skip });
    await makeSession(own.staff, { teamId: own.otherTeam.id, day: day(1) });

    const range = {
      from: day(30),
      to: addDays(own.staff.today, 30),
      teamIds: [own.team.id, own.otherTeam.id],
    };
    const [team, ...others] = await read(own.scopes.coach, (tx) => complianceByTeam(tx, range));
    expect(others).toEqual([]);
    expect(team?.compliance).toMatchObject({
      sessions: 6,
      recorded: 5,
      notRecorded: 1,
      ofRecorded: { successes: 2, trials: 5 },
      ofHeld: { successes: 2, trials: 6 },
      completeness: { warmUps: 3 },
      athleteDose: { successes: 1, trials: 4 },
      skipReasons: { weather: 1, forgot: 1 },
    });
    const all = await read(own.scopes.lead, (tx) => complianceByTeam(tx, range));
    expect(all.map(({ compliance }) => compliance.sessions)).toEqual(
      all.map(({ teamId }) => (teamId === own.team.id ? 6 : 1)),
    );
  });
});
