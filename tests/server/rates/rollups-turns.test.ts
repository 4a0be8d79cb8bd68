import { randomUUID } from "node:crypto";
import { eq, sql } from "drizzle-orm";
import { describe, expect, it } from "vitest";
import { sumExposureCells } from "~/features/rates/rollups/exposure.queries.server";
import { rollUp, rollUpMarked } from "~/features/rates/rollups/rollups.server";
import { recordAttendance } from "~/features/sessions/attendance.server";
import { addDays } from "~/platform/clock";
import { read, type Scope, sqlState, type Tx, write } from "~db/client.server";
import { athletes, participations, sessions } from "~db/schema";
import { makeAthlete, makeClub, makeInjury, makeSession, owner, scopeOf } from "../../harness";
import { countMarks, expectAgreement, type Range } from "./rollups-agreement";

/** Writers, readers and the job at the same moment. */

const everything: Range[] = [{ from: "2000-01-01", to: "2100-01-01", teamIds: null }];

async function open() {
  const club = await makeClub();
  const { staff, team, athlete } = club;
  const day = addDays(staff.today, -10);
  const session = await makeSession(staff, { teamId: team.id, day, minutes: { [athlete.id]: 90 } });
  const job = scopeOf(club.organisation, ["job"]);
  await rollUp(job);
  expect(await countMarks(job.organisationId)).toBe(0);
  return { ...club, day, session, job };
}

/** A transaction that has done its work and stays open until it is told to end. */
async function holdOpen(scope: Scope, work: (tx: Tx) => Promise<unknown>) {
  let end = () => {};
  const told = new Promise<void>((resolve) => {
    end = resolve;
  });
  let reached = () => {};
  const worked = new Promise<void>((resolve) => {
    reached = resolve;
  });
  const closed = write(scope, async (tx) => {
    await work(tx);
    reached();
    await told;
  });
  await Promise.race([worked, closed]);
  return () => {
    end();
    return closed;
  };
}

const hours = async (scope: Scope) =>
  (await read(scope, (tx) => sumExposureCells(tx, everything[0] as Range))).reduce(
    (sum, cell) => sum + cell.hours,
    0,
  );

describe("a writer that is still open while the job runs", () => {
  it("is counted once it has committed, by its own mark", async () => {
    const { staff, scopes, team, session, job } = await open();
    const other = await makeAthlete(staff, { teamId: team.id });
    await rollUp(job);
    const before = await hours(scopes.lead);
    const end = await holdOpen(staff, (tx) =>
      tx.insert(participations).values({
        ...{ organisationId: staff.organisationId, sessionId: session.id, athleteId: other.id },
        ...{ presence: "took_part", minutes: 60 },
      }),
    );
    // Something else of the same day is marked and cleaned meanwhile.
    await write(staff, (tx) => tx.update(sessions).set({ kind: "match" }).where(eq(sessions.id, session.id)));
    expect(await rollUp(job)).toBe(true);
    expect(await hours(scopes.lead)).toBeCloseTo(before, 9);
    await end();
    expect(await countMarks(job.organisationId)).toBe(1);
    expect(await hours(scopes.lead)).toBeCloseTo(before + 1, 9);
    await expectAgreement(scopes.lead, everything, "committed");
    await rollUp(job);
    await expectAgreement(scopes.lead, everything, "clean");
  });

  it("reaches what others wrote after its mark: a birth date corrected beside a session being recorded", async () => {
    const { staff, scopes, team, athlete, day, job } = await open();
    const end = await holdOpen(staff, (tx) =>
      tx
        .update(athletes)
        .set({ dateOfBirth: addDays(day, -20 * 365) })
        .where(eq(athletes.id, athlete.id)),
    );
    // Not yet there when the correction was marked, and already rolled up with the old age when it commits.
    await makeSession(staff, { teamId: team.id, day: addDays(day, 3), minutes: { [athlete.id]: 45 } });
    await makeInjury(staff, { athleteId: athlete.id, onset: "gradual", onsetDay: addDays(day, 4) });
    await rollUp(job);
    await expectAgreement(scopes.lead, everything, "before the correction");
    await end();
    await expectAgreement(scopes.lead, everything, "after the correction");
    await rollUp(job);
    await expectAgreement(scopes.lead, everything, "clean");
    const cells = await read(scopes.lead, (tx) => sumExposureCells(tx, everything[0] as Range));
    expect(cells.map(({ age }) => age)).toEqual([19, 19]);
  });

  it("reaches a session that was moved beside the attendance", async () => {
    const { staff, scopes, session, athlete, day, job } = await open();
    const end = await holdOpen(staff, (tx) =>
      tx.update(participations).set({ minutes: 30 }).where(eq(participations.athleteId, athlete.id)),
    );
    await write(staff, (tx) =>
      tx
        .update(sessions)
        .set({ day: addDays(day, 5) })
        .where(eq(sessions.id, session.id)),
    );
    await rollUp(job);
    await end();
    await expectAgreement(scopes.lead, everything, "moved");
    await rollUp(job);
    await expectAgreement(scopes.lead, everything, "clean");
    expect(await hours(scopes.lead)).toBeCloseTo(0.5, 9);
  });
});

describe("the job", () => {
  it("may run twice at once: nothing is counted twice, and nothing stays marked", async () => {
    const { staff, scopes, team, athlete, day, job } = await open();
    for (let round = 0; round < 5; round++) {
      const minutes = { [athlete.id]: 30 + round };
      await makeSession(staff, { teamId: team.id, day: addDays(day, -round), minutes });
      await Promise.all([rollUp(job), rollUp(job), makeSession(staff, { teamId: team.id, day, minutes })]);
      await expectAgreement(scopes.lead, everything, `round ${round}`);
    }
    await rollUp(job);
    expect(await countMarks(job.organisationId)).toBe(0);
    await expectAgreement(scopes.lead, everything, "clean");
  });

  it("finds every organisation in which something was written, or takes the one it is given", async () => {
    const [one, two] = [await open(), await open()];
    for (const { staff, team } of [one, two])
      await makeSession(staff, { teamId: team.id, exposureGrade: "headcount" });
    await rollUpMarked({ organisationId: one.organisation.id });
    expect([await countMarks(one.organisation.id), await countMarks(two.organisation.id)]).toEqual([0, 1]);
    await rollUpMarked();
    expect(await countMarks(two.organisation.id)).toBe(0);
  });
});

describe("an organisation whose roll-up fails", () => {
  it("keeps no other waiting, whichever comes first", async () => {
    const clubs = [await open(), await open()];
    for (const [failing, other] of [clubs, clubs.toReversed()]) {
      if (!failing || !other) throw new Error("both are there");
      for (const { staff, team, athlete, day } of clubs)
        await makeSession(staff, { teamId: team.id, day, minutes: { [athlete.id]: 60 } });
      await owner().unsafe(`alter table exposure_rollup
        add constraint refuses_one check (organisation_id <> '${failing.organisation.id}') not valid`);
      await expect(rollUpMarked()).rejects.toThrow();
      await owner().unsafe("alter table exposure_rollup drop constraint refuses_one");
      expect(await countMarks(failing.organisation.id)).toBeGreaterThan(0);
      expect(await countMarks(other.organisation.id)).toBe(0);
      await rollUpMarked();
    }
  });
});

describe("an administrator", () => {
  it("reads neither rolled-up injuries nor what was marked, and counts exposure from the records", async () => {
    const { scopes, staff, team, athlete, day, job } = await open();
    await makeInjury(staff, { athleteId: athlete.id, onset: "gradual", onsetDay: day });
    await rollUp(job);
    await makeSession(staff, { teamId: team.id, day: addDays(day, 1), minutes: { [athlete.id]: 30 } });
    await makeInjury(staff, { athleteId: athlete.id, onset: "gradual", onsetDay: day });
    const rowsOf = (scope: Scope, table: string) =>
      read(scope, async (tx) => (await tx.execute(sql`select 1 from ${sql.identifier(table)}`)).length);
    for (const table of ["rollup_marks", "injury_rollup"]) {
      expect(await rowsOf(scopes.lead, table), table).toBeGreaterThan(0);
      expect(await rowsOf(scopes.admin, table), table).toBe(0);
    }
    expect(await hours(scopes.admin)).toBeCloseTo(2, 9);
  });
});

describe("a coach", () => {
  it("ticks attendance, which marks the session and nothing more, and reads no roll-up", async () => {
    const { scopes, session, athlete, job } = await open();
    const base = { presence: "took_part", minutes: 90 };
    const value = { presence: "took_part", minutes: 45 };
    await recordAttendance(scopes.coach, session.id, randomUUID(), {
      [`athlete:${athlete.id}`]: { base, value },
    });
    const marks = await read(scopes.lead, (tx) =>
      tx.execute(sql`select cause, session_id, team_id, athlete_id, injury_id from rollup_marks`),
    );
    expect([...marks]).toEqual([
      { cause: "attendance", session_id: session.id, team_id: null, athlete_id: null, injury_id: null },
    ]);
    for (const table of ["rollup_marks", "exposure_rollup", "injury_rollup"])
      expect(
        await read(scopes.coach, (tx) => tx.execute(sql`select 1 from ${sql.identifier(table)}`)),
      ).toHaveLength(0);
    expect(await hours(scopes.lead)).toBeCloseTo(0.75, 9);
    await rollUp(job);
    expect(await hours(scopes.lead)).toBeCloseTo(0.75, 9);
  });

  it("cannot write a roll-up or take a mark away", async () => {
    const { scopes, organisation } = await open();
    const attempts = [
      sql`insert into exposure_rollup values (${organisation.id}, current_date, gen_random_uuid(), 'match', 'recorded', 1, 1, '[]')`,
      sql`update rollup_marks set cause = 'team'`,
      sql`update exposure_rollup set aes = 0`,
    ];
    for (const attempt of attempts) {
      const state = await write(scopes.coach, (tx) => tx.execute(attempt)).then(() => "done", sqlState);
      expect(state).toBe("42501");
    }
    const gone = await write(scopes.coach, (tx) => tx.execute(sql`delete from rollup_marks`));
    expect(gone.count).toBe(0);
  });
});
