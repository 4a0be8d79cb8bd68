import { randomUUID } from "node:crypto";
import { beforeAll, describe, expect, it } from "vitest";
import {
  addGuardian,
  editGuardian,
  endGuardianship,
  guardianVersionOf,
  readGuardians,
} from "~/features/roster/guardians.server";
import { athleteSchema, guardianSchema, newAthleteSchema } from "~/features/roster/roster.schema";
import {
  addAlert,
  addAthlete,
  archiveAthlete,
  editAthlete,
  listRoster,
  readAthlete,
  removeAlert,
} from "~/features/roster/roster.server";
import {
  maintenance,
  makeAthlete,
  makeAvailability,
  makeClub,
  makeGuardian,
  makeInjury,
} from "../../harness";

type Club = Awaited<ReturnType<typeof makeClub>>;
let club: Club;
const here = new URL("http://local/");
const query = { q: "", page: 1, show: "current" as const };
const absent = { status: 404 };

const typed = (given: Record<string, string> = {}) =>
  athleteSchema.parse({ givenName: "Wren", familyName: "Ashdown", sex: "female", ...given });
const typedNew = (given: Record<string, string> = {}) =>
  newAthleteSchema.parse({
    givenName: "Wren",
    familyName: "Ashdown",
    sex: "female",
    team: club.team.id,
    fromDay: "1 9 2026",
    ...given,
  });
const stored = async (id: string) => (await maintenance()`select * from athletes where id = ${id}`)[0];

beforeAll(async () => {
  club = await makeClub();
});

describe("adding an athlete", () => {
  it("puts them on the team from the day, with a name that folding finds", async () => {
    const id = await addAthlete(club.scopes.trainer, typedNew({ givenName: "Zoë", familyName: "O’Malley" }));
    expect(await stored(id)).toMatchObject({ given_name: "Zoë", name_key: "zoe omalley" });
    const { entries } = await readAthlete(club.scopes.trainer, here, id);
    expect(entries).toMatchObject([{ teamId: club.team.id, fromDay: "2026-09-01", toDay: null }]);
  });

  it("adds one athlete, and one guardian, however often the form is pressed", async () => {
    const [first, second] = [randomUUID(), randomUUID()];
    const input = typedNew({ givenName: "Pressed", familyName: "Twice" });
    const press = () => addAthlete(club.scopes.trainer, input, first);
    const [id, again] = await Promise.all([press(), press()]);
    expect(again).toBe(id);
    const rows = await maintenance()`select 1 from athletes where given_name = 'Pressed'`;
    expect(rows).toHaveLength(1);
    const guardian = guardianSchema.parse({ name: "Ottilie Ashdown", phone: "+44 1632 960155" });
    const add = () => addGuardian(club.scopes.trainer, id, guardian, second);
    await Promise.all([add(), add()]);
    expect((await readGuardians(club.scopes.trainer, id)).guardians).toHaveLength(1);
  });

  it("names who has a number already, and stores nothing", async () => {
    await addAthlete(club.scopes.trainer, typedNew({ givenName: "Holder", number: "0042" }));
    const before = await maintenance()`select count(*) from athletes`;
    await expect(
      addAthlete(club.scopes.trainer, typedNew({ givenName: "Second", number: "0042" })),
    ).rejects.toMatchObject({
      status: 409,
      fields: { number: [expect.stringMatching(/Holder Ashdown.*0042/)] },
    });
    expect(await maintenance()`select count(*) from athletes`).toEqual(before);
  });

  it("takes a number that another organisation uses", async () => {
    const elsewhere = await makeClub();
    await makeAthlete(elsewhere.staff, { number: "7007" });
    await expect(addAthlete(club.scopes.trainer, typedNew({ number: "7007" }))).resolves.toBeTypeOf("string");
  });

  it("refuses a foreign team, a visitor whom nobody could see, and a coach", async () => {
    expect(() => addAthlete(club.scopes.trainer, typedNew({ team: club.otherTeam.id }))).toThrow(/not found/);
    const visitor = typedNew({ team: "", fromDay: "", visitor: "yes" });
    expect(() => addAthlete(club.scopes.trainer, visitor)).toThrow(
      expect.objectContaining({ fields: { team: [expect.stringContaining("your teams")] } }),
    );
    await expect(addAthlete(club.scopes.lead, visitor)).resolves.toBeTypeOf("string");
    expect(() => addAthlete(club.scopes.coach, typedNew())).toThrow(/role/);
  });

  it("asks for the team and the day in words", () => {
    const without = newAthleteSchema.safeParse({ givenName: "A", familyName: "B", sex: "male" });
    expect(without.error?.issues).toMatchObject([
      { path: ["team"], message: expect.stringContaining("visitor") },
    ]);
    const day = newAthleteSchema.safeParse({
      givenName: "A",
      familyName: "B",
      sex: "male",
      team: randomUUID(),
    });
    expect(day.error?.issues.map(({ path }) => path)).toEqual([["fromDay"]]);
  });
});

describe("editing an athlete", () => {
  it("refuses the slower of two, keeps what the faster saved, and lets the slower save again", async () => {
    const { id } = await makeAthlete(club.staff, { teamId: club.team.id });
    await editAthlete(club.scopes.lead, id, 1, typed({ givenName: "Faster", dominantLeg: "left" }));
    await expect(
      editAthlete(club.scopes.trainer, id, 1, typed({ givenName: "Slower" })),
    ).rejects.toMatchObject({
      status: 409,
      message: expect.stringContaining("What you typed is still here"),
    });
    expect(await stored(id)).toMatchObject({ given_name: "Faster", dominant_leg: "left", version: 2 });
    await editAthlete(club.scopes.trainer, id, 2, typed({ givenName: "Slower" }));
    expect(await stored(id)).toMatchObject({ given_name: "Slower", name_key: "slower ashdown", version: 3 });
  });

  it("keeps the own number and refuses another's", async () => {
    const { id } = await makeAthlete(club.staff, { teamId: club.team.id, number: "11" });
    await makeAthlete(club.staff, { number: "12", givenName: "Unseen", familyName: "Holder" });
    await editAthlete(club.scopes.trainer, id, 1, typed({ number: "11" }));
    await expect(editAthlete(club.scopes.trainer, id, 2, typed({ number: "12" }))).rejects.toMatchObject({
      status: 409,
      fields: { number: [expect.stringContaining("12")] },
    });
  });

  it("notes in the audit which fields changed, and no value", async () => {
    const { id } = await makeAthlete(club.staff, {
      teamId: club.team.id,
      givenName: "Wren",
      familyName: "Ashdown",
    });
    await editAthlete(club.scopes.trainer, id, 1, typed({ number: "9901" }));
    const [event] = await maintenance()`select fields from audit_events
      where action = 'athlete.edit' and subject_id = ${id}`;
    expect(event?.fields.fields).toContain("number");
    expect(event?.fields.fields).not.toContain("givenName");
    expect(JSON.stringify(event)).not.toContain("9901");
  });

  it("archives and brings back; a foreign athlete is absent", async () => {
    const { id } = await makeAthlete(club.staff, { teamId: club.team.id });
    const shown = async (show: "current" | "archived") =>
      (await listRoster(club.scopes.trainer, here, { ...query, show })).rows.map((row) => row.id);
    await archiveAthlete(club.scopes.trainer, id, true);
    expect(await shown("current")).not.toContain(id);
    expect(await shown("archived")).toContain(id);
    await archiveAthlete(club.scopes.trainer, id, false);
    expect(await shown("current")).toContain(id);
    const foreign = club.otherAthlete.id;
    await expect(archiveAthlete(club.scopes.trainer, foreign, true)).rejects.toMatchObject(absent);
    await expect(editAthlete(club.scopes.trainer, foreign, 1, typed())).rejects.toMatchObject(absent);
    await expect(readAthlete(club.scopes.trainer, here, foreign)).rejects.toMatchObject(absent);
  });
});

describe("guardians", () => {
  const limits = "Father may be told nothing: order of the county court, file 88.";
  const guardian = (given: Record<string, string> = {}) =>
    guardianSchema.parse({ name: "Ottilie Ashdown", phone: "+44 1632 960155", mayBeTold: "yes", ...given });

  /** What the form of the athlete's first guardian would carry. */
  async function versionOf(athleteId: string) {
    const [row] = (await readGuardians(club.scopes.trainer, athleteId)).guardians;
    return row ? guardianVersionOf(row) : "";
  }

  it("does not let a page left open take back a limit, or the guardian's own wish, entered since", async () => {
    const { id } = await makeAthlete(club.staff, { teamId: club.team.id });
    const input = guardian({ wantsEmail: "yes", email: "home@example.org" });
    const guardianId = await addGuardian(club.scopes.trainer, id, input);
    const opened = await versionOf(id);
    const edit = (seen: string, given: typeof input) =>
      editGuardian(club.scopes.trainer, id, guardianId, seen, given);
    await edit(opened, { ...input, mayBeTold: false, legalLimits: limits });
    await expect(edit(opened, input)).rejects.toMatchObject({ code: "conflict" });
    const again = await versionOf(id);
    await maintenance()`update guardians set wants_email = false, version = version + 1 where id = ${guardianId}`;
    await expect(edit(again, input)).rejects.toMatchObject({ code: "conflict" });
    expect((await readGuardians(club.scopes.trainer, id)).guardians).toMatchObject([
      { mayBeTold: false, legalLimits: limits, wantsEmail: false },
    ]);
  });

  it("keeps legal limits sealed, opens them for those who keep contacts, and says nothing of them elsewhere", async () => {
    const { id } = await makeAthlete(club.staff, { teamId: club.team.id });
    const guardianId = await addGuardian(club.scopes.trainer, id, guardian({ legalLimits: limits }));
    const read = await readGuardians(club.scopes.trainer, id);
    expect(read.guardians).toMatchObject([{ id: guardianId, legalLimits: limits, mayDecide: false }]);
    const [row] =
      await maintenance()`select legal_limits from guardianships where guardian_id = ${guardianId}`;
    expect(row?.legal_limits.length).toBeGreaterThan(limits.length);
    const everywhere = await maintenance()`select
      (select string_agg(g::text, ' ') from guardianships g) as bonds,
      (select string_agg(a::text, ' ') from audit_events a) as audit`;
    const hex = Buffer.from("county court").toString("hex");
    expect(JSON.stringify(everywhere)).not.toMatch(new RegExp(`county court|${hex}`));
    const page = await readAthlete(club.scopes.trainer, here, id);
    expect(page.guardians).toMatchObject([{ limited: true }]);
    expect(JSON.stringify(page)).not.toContain("county court");
    const opened =
      await maintenance()`select 1 from audit_events where action = 'guardians.read' and subject_id = ${id}`;
    expect(opened).toHaveLength(1);
    expect(() => readGuardians(club.scopes.coach, id)).toThrow(/role/);
    await expect(readGuardians(club.scopes.trainer, club.otherAthlete.id)).rejects.toMatchObject(absent);
  });

  it("begins anew with a corrected address, and stays stopped with the same", async () => {
    const { id } = await makeAthlete(club.staff, { teamId: club.team.id });
    const stopped = await makeGuardian(club.staff, {
      athleteIds: [id],
      email: "old@example.org",
      emailStoppedAt: new Date(),
    });
    const correct = async (email: string) => {
      await editGuardian(
        club.scopes.trainer,
        id,
        stopped.id,
        await versionOf(id),
        guardian({ email, legalLimits: "None by post." }),
      );
      return (await readGuardians(club.scopes.trainer, id)).guardians[0];
    };
    expect(await correct("old@example.org")).toMatchObject({ emailStoppedAt: expect.any(Date) });
    expect(await correct("new@example.org")).toMatchObject({
      emailStoppedAt: null,
      email: "new@example.org",
      legalLimits: "None by post.",
    });
  });

  it("ends one bond and leaves the sibling's", async () => {
    const one = await makeAthlete(club.staff, { teamId: club.team.id });
    const other = await makeAthlete(club.staff, { teamId: club.team.id });
    const both = await makeGuardian(club.staff, { athleteIds: [one.id, other.id] });
    await endGuardianship(club.scopes.trainer, one.id, both.id);
    expect((await readGuardians(club.scopes.trainer, one.id)).guardians).toEqual([]);
    expect((await readGuardians(club.scopes.trainer, other.id)).guardians).toHaveLength(1);
    await expect(editGuardian(club.scopes.trainer, one.id, both.id, "1.1", guardian())).rejects.toMatchObject(
      absent,
    );
  });

  it("is not accepted without a way to reach them", () => {
    const answer = guardianSchema.safeParse({ name: "Nobody" });
    expect(answer.error?.issues).toMatchObject([
      { path: ["phone"], message: expect.stringContaining("cannot be reached") },
    ]);
  });
});

describe("what a coach is given", () => {
  it("is the name, the teams, the state and the alert, and nothing else of the athlete", async () => {
    const born = "2011-03-14";
    const athlete = await makeAthlete(club.staff, {
      teamId: club.team.id,
      givenName: "Perdita",
      number: "55512",
      dateOfBirth: born,
      dominantLeg: "left",
      researchConsent: true,
    });
    await makeGuardian(club.staff, { athleteIds: [athlete.id], name: "Cosima Guardian" });
    await makeInjury(club.staff, {
      athleteId: athlete.id,
      diagnosis: "Partial tear of the anterior cruciate",
      unavailableFrom: club.staff.today,
    });
    await addAlert(club.scopes.trainer, athlete.id, {
      text: "Carries adrenaline: use it, call an ambulance.",
      agreedWith: "Cosima Guardian",
    });
    const page = await readAthlete(club.scopes.coach, here, athlete.id);
    expect(page.alerts.map(({ text }) => text)).toEqual(["Carries adrenaline: use it, call an ambulance."]);
    expect(page.state?.state).toBe("unavailable");
    const roster = await listRoster(club.scopes.coach, here, query);
    expect(roster.rows.map(({ givenName }) => givenName)).toContain("Perdita");
    for (const given of [page, roster])
      expect(JSON.stringify(given)).not.toMatch(
        /55512|2011-03-14|Cosima|example\.org|960111|injur|knee|cruciate|tear|sprain|diagnos|"left"|"researchConsent":true/i,
      );
    const trainers = JSON.stringify(await readAthlete(club.scopes.trainer, here, athlete.id));
    for (const told of ["55512", born, "Cosima Guardian"]) expect(trainers).toContain(told);
  });

  it("hides restrictions and the expected day from the administrator", async () => {
    const athlete = await makeAthlete(club.staff, { teamId: club.team.id });
    await makeAvailability(club.scopes.lead, {
      athleteId: athlete.id,
      state: "modified",
      restrictions: ["no_cutting"],
      expectedOn: "2027-01-10",
    });
    const coach = await readAthlete(club.scopes.coach, here, athlete.id);
    expect(coach.state).toMatchObject({ restrictions: ["no_cutting"], expectedOn: "2027-01-10" });
    const admin = await readAthlete(club.scopes.admin, here, athlete.id);
    expect(admin.state).toMatchObject({ state: "modified", restrictions: [], expectedOn: null });
  });

  it("loses an alert once it is no longer needed; coaches set none", async () => {
    const athlete = await makeAthlete(club.staff, { teamId: club.team.id });
    const alert = { text: "Inhaler in the kit bag.", agreedWith: "Mother" };
    expect(() => addAlert(club.scopes.coach, athlete.id, alert)).toThrow(/role/);
    await addAlert(club.scopes.trainer, athlete.id, alert);
    const [set] = (await readAthlete(club.scopes.trainer, here, athlete.id)).alerts;
    await removeAlert(club.scopes.trainer, athlete.id, set?.id ?? "");
    expect((await readAthlete(club.scopes.coach, here, athlete.id)).alerts).toEqual([]);
    await expect(addAlert(club.scopes.trainer, club.otherAthlete.id, alert)).rejects.toMatchObject(absent);
  });
});
