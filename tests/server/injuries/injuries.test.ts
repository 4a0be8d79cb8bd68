import { randomUUID } from "node:crypto";
import { beforeAll, describe, expect, it } from "vitest";
import {
  readAthleteAvailability,
  setAthleteAvailability,
} from "~/features/availability/athlete-availability.server";
import { availabilityChangeSchema } from "~/features/availability/availability.schema";
import { listNotFullyAvailable, stateOfDay } from "~/features/availability/availability.server";
import {
  addEncounter,
  closeReport,
  readQueue,
  readReceipt,
  readReport,
  sendCoachReport,
} from "~/features/injuries/coach-reports.server";
import { logDraft, saveDraft } from "~/features/injuries/drafts.server";
import {
  addNote,
  changeInjuryAvailability,
  editInjury,
  withdrawInjury,
} from "~/features/injuries/edit-injury.server";
import { editSchema, logSchema, reportSchema } from "~/features/injuries/injuries.schema";
import {
  findInjuryForNotice,
  listEncounters,
  listGaps,
  listInjuriesForToday,
  listOpenCoachReports,
  listUntouched,
} from "~/features/injuries/injuries.server";
import { exportInjuries, listInjuries } from "~/features/injuries/list-injuries.server";
import { logInjury, openLogForm } from "~/features/injuries/log-injury.server";
import { openEditForm, readInjury } from "~/features/injuries/read-injury.server";
import { addDays } from "~/platform/clock";
import { formatDay } from "~/platform/days";
import { read, type Scope } from "~db/client.server";
import { maintenance, makeAthlete, makeClub, makeInjury, makeSeason, makeSession } from "../../harness";

type Club = Awaited<ReturnType<typeof makeClub>>;
let club: Club;
beforeAll(async () => {
  club = await makeClub();
});

const day = (iso: string) => formatDay(iso, "figures");
const url = (query = "") => new URL(`http://localhost/club/injuries${query}`);

const logOf = (athleteId: string, given: Record<string, unknown> = {}) =>
  logSchema.parse({
    operation: randomUUID(),
    athlete: athleteId,
    when: "earlier",
    day: day(club.scopes.trainer.today),
    bodyArea: "knee",
    side: "left",
    couldContinue: "yes",
    ...given,
  });

const changeOf = (given: Record<string, unknown>) =>
  availabilityChangeSchema.parse({ state: "full", fromDay: day(club.scopes.trainer.today), ...given });

const stateOf = async (scope: Scope, athleteId: string, on = scope.today) =>
  (await read(scope, (tx) => stateOfDay(tx, [athleteId], on))).get(athleteId);

const freshAthlete = () => makeAthlete(club.staff, { teamId: club.team.id });

/** The edit form as it opens, with changes: what a person would send. */
async function editOf(injuryId: string, given: Record<string, unknown> = {}) {
  const page = await openEditForm(club.scopes.trainer, injuryId);
  return editSchema.parse({ ...page.values, operation: randomUUID(), ...given });
}

describe("logging", () => {
  it("saves the first group alone, finds the session of the day, and asks for the rest", async () => {
    const athlete = await freshAthlete();
    const session = await makeSession(club.staff, {
      teamId: club.team.id,
      day: addDays(club.scopes.trainer.today, -3),
    });
    const { id } = await logInjury(
      club.scopes.trainer,
      logOf(athlete.id, { day: day(session.day), movement: "cutting" }),
    );
    const page = await readInjury(club.scopes.trainer, id);
    expect(page.revision).toMatchObject({
      sessionId: session.id,
      movement: "cutting",
      bodyArea: "knee",
      side: "left",
    });
    expect(page.gaps.map(({ field }) => field)).toEqual([
      "onset",
      "contact",
      "warmedUp",
      "pathology",
      "certainty",
    ]);
    expect(page.history).toHaveLength(1);
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "full", asOf: null });
  });

  it("makes the athlete unavailable from the day of the onset for a serious knee sign, and tells the coach no reason", async () => {
    const athlete = await freshAthlete();
    const onset = addDays(club.scopes.trainer.today, -2);
    await logInjury(club.scopes.trainer, logOf(athlete.id, { day: day(onset), signs: ["pop", "swelling"] }));
    expect(await stateOf(club.scopes.coach, athlete.id, addDays(onset, -1))).toMatchObject({ state: "full" });
    expect(await stateOf(club.scopes.coach, athlete.id, onset)).toMatchObject({ state: "unavailable" });
    const state = await stateOf(club.scopes.coach, athlete.id);
    expect(Object.keys(state ?? {}).sort()).toEqual([
      "asOf",
      "expectedOn",
      "minutesLimit",
      "restrictions",
      "state",
    ]);
    const listed = await read(club.scopes.coach, (tx) =>
      listNotFullyAvailable(tx, club.scopes.coach, club.scopes.coach.today),
    );
    expect(listed.find(({ athleteId }) => athleteId === athlete.id)).toMatchObject({
      state: "unavailable",
      teams: [{ id: club.team.id, name: club.team.name }],
    });
  });

  it("saves a double press once, and refuses other values under the same id", async () => {
    const athlete = await freshAthlete();
    const input = logOf(athlete.id, { couldContinue: "no" });
    const [first, second] = await Promise.all([
      logInjury(club.scopes.trainer, input),
      logInjury(club.scopes.trainer, input),
    ]);
    expect(second).toEqual(first);
    await expect(logInjury(club.scopes.trainer, { ...input, side: "right" })).rejects.toMatchObject({
      code: "operation_mismatch",
    });
    const rows = await maintenance()`select 1 from injuries where athlete_id = ${athlete.id}`;
    const changes = await maintenance()`select 1 from availability_changes where athlete_id = ${athlete.id}`;
    expect([rows.length, changes.length]).toEqual([1, 1]);
  });

  it("refuses a day to come, and a session that is not there, beside their fields", async () => {
    const athlete = await freshAthlete();
    const tomorrow = day(addDays(club.scopes.trainer.today, 1));
    await expect(logInjury(club.scopes.trainer, logOf(athlete.id, { day: tomorrow }))).rejects.toMatchObject({
      fields: { day: [expect.stringContaining("not come yet")] },
    });
    const stranger = await makeAthlete(club.staff, { teamId: club.otherTeam.id });
    await expect(logInjury(club.scopes.lead, logOf(stranger.id, { when: "today" }))).rejects.toMatchObject({
      fields: { when: [expect.stringContaining("no session")] },
    });
  });

  it("does not let a trainer log for an athlete of another team, nor a coach log at all", async () => {
    await expect(logInjury(club.scopes.trainer, logOf(club.otherAthlete.id))).rejects.toMatchObject({
      code: "not_found",
    });
    expect(() => logInjury(club.scopes.coach, logOf(club.athlete.id))).toThrow(/does not include/);
  });

  it("keeps a draft sealed, restores it, and drops it with the saved record", async () => {
    const athlete = await freshAthlete();
    const operation = randomUUID();
    const values = {
      operation,
      athlete: athlete.id,
      "athlete-text": "Ines",
      bodyArea: "knee",
      signs: ["pop"],
    };
    expect(await saveDraft(club.scopes.trainer, logDraft(null), values)).toBeInstanceOf(Date);
    const [row] = await maintenance()<{ body: Uint8Array }[]>`select body from form_drafts`;
    expect(Buffer.from(row?.body ?? []).toString("utf8")).not.toContain("knee");
    const form = await openLogForm(club.scopes.trainer, { athleteId: null, reportId: null });
    expect(form).toMatchObject({
      operation,
      values: { bodyArea: "knee", signs: ["pop"] },
      athlete: { id: athlete.id },
    });
    await logInjury(club.scopes.trainer, logOf(athlete.id, { operation }));
    expect(
      (await openLogForm(club.scopes.trainer, { athleteId: null, reportId: null })).draftSavedAt,
    ).toBeNull();
    expect(await saveDraft(club.scopes.trainer, logDraft(null), values)).toBeNull();
    expect(
      (await openLogForm(club.scopes.trainer, { athleteId: null, reportId: null })).draftSavedAt,
    ).toBeNull();
  });
});

describe("the record", () => {
  it("keeps what stood before an edit, with who and what changed, and carries sealed texts on", async () => {
    const { id } = await logInjury(
      club.scopes.trainer,
      logOf((await freshAthlete()).id, { couldContinue: "no" }),
    );
    await editInjury(
      club.scopes.trainer,
      id,
      await editOf(id, {
        side: "right",
        diagnosisPair: "ligament_capsule:sprain",
        diagnosis: "medial ligament, grade 2",
        certainty: "clinical",
        further1: "cartilage_synovium:cartilage",
        further1Words: "meniscus",
        further1Certainty: "suspected",
      }),
    );
    await changeInjuryAvailability(club.scopes.trainer, id, changeOf({}), { close: true });
    const page = await readInjury(club.scopes.trainer, id);
    expect(page.revision).toMatchObject({ version: 3, side: "right", diagnosis: "medial ligament, grade 2" });
    expect(page.revision.closedOn).toBe(club.scopes.trainer.today);
    expect(page.further).toEqual(["cartilage injury, meniscus, suspected"]);
    expect(page.history.map(({ version }) => version)).toEqual([3, 2, 1]);
    expect(page.history[1]).toMatchObject({
      by: club.scopes.trainer.displayName,
      changes: expect.arrayContaining([
        { field: "side", from: "left", to: "right" },
        { field: "diagnosis", from: "nothing", to: "medial ligament, grade 2" },
      ]),
    });
    expect(page.history[0]?.changes.map(({ field }) => field)).toEqual(["closed on"]);
    const stored =
      await maintenance()`select side from injury_revisions where injury_id = ${id} order by version`;
    expect(stored.map(({ side }) => side)).toEqual(["left", "right", "right"]);
  });

  it("refuses an edit of a record that changed meanwhile", async () => {
    const { id } = await logInjury(club.scopes.trainer, logOf((await freshAthlete()).id));
    const stale = await editOf(id, { onset: "sudden" });
    await editInjury(club.scopes.lead, id, { ...(await editOf(id)), movement: "landing" });
    await expect(editInjury(club.scopes.trainer, id, stale)).rejects.toMatchObject({ code: "conflict" });
    expect((await readInjury(club.scopes.trainer, id)).revision).toMatchObject({
      movement: "landing",
      onset: null,
    });
  });

  it("counts time loss from the availability, ongoing until full, and gives the severity", async () => {
    const athlete = await freshAthlete();
    const { today } = club.scopes.trainer;
    const onset = addDays(today, -20);
    const { id } = await logInjury(
      club.scopes.trainer,
      logOf(athlete.id, { day: day(onset), couldContinue: "no" }),
    );
    expect(await readInjury(club.scopes.trainer, id)).toMatchObject({
      timeLoss: { days: 20, ongoing: true },
      severity: "8-28",
    });
    await changeInjuryAvailability(
      club.scopes.trainer,
      id,
      changeOf({ state: "modified", restrictions: ["no_contact"], fromDay: day(addDays(onset, 4)) }),
    );
    await changeInjuryAvailability(club.scopes.trainer, id, changeOf({ fromDay: day(addDays(onset, 8)) }));
    const page = await readInjury(club.scopes.trainer, id);
    expect(page).toMatchObject({ timeLoss: { days: 7, ongoing: false }, severity: "1-7" });
    expect(page.course.map(({ state }) => state)).toEqual(["unavailable", "modified", "full"]);
    expect(page.summary).toMatch(/7 days lost, fully available again\.$/);
    await changeInjuryAvailability(club.scopes.trainer, id, changeOf({ fromDay: day(onset) }));
    const corrected = await readInjury(club.scopes.trainer, id);
    expect(corrected.timeLoss).toEqual({ days: 0, ongoing: false });
    expect(corrected.changes).toHaveLength(4);
  });

  it("refuses a limit before the onset and a closing before full availability", async () => {
    const { today } = club.scopes.trainer;
    const { id } = await logInjury(
      club.scopes.trainer,
      logOf((await freshAthlete()).id, { couldContinue: "no" }),
    );
    await expect(
      changeInjuryAvailability(club.scopes.trainer, id, changeOf({ fromDay: day(addDays(today, -1)) })),
    ).rejects.toMatchObject({ fields: { fromDay: [expect.stringContaining("before the onset")] } });
    await expect(
      editInjury(club.scopes.trainer, id, await editOf(id, { closedOn: day(today) })),
    ).rejects.toMatchObject({ fields: { closedOn: [expect.stringContaining("not fully available")] } });
  });

  it("moves the availability with a corrected day of onset, both ways", async () => {
    const { today } = club.scopes.trainer;
    const athlete = await freshAthlete();
    const onset = addDays(today, -10);
    const { id } = await logInjury(
      club.scopes.trainer,
      logOf(athlete.id, { day: day(onset), couldContinue: "no" }),
    );
    await changeInjuryAvailability(club.scopes.trainer, id, changeOf({ fromDay: day(addDays(onset, 6)) }));
    await editInjury(club.scopes.trainer, id, await editOf(id, { day: day(addDays(onset, 2)) }));
    expect((await readInjury(club.scopes.trainer, id)).timeLoss).toEqual({ days: 3, ongoing: false });
    expect(await stateOf(club.scopes.coach, athlete.id, addDays(onset, 1))).toMatchObject({ state: "full" });
    await editInjury(club.scopes.trainer, id, await editOf(id, { day: day(addDays(onset, -1)) }));
    expect((await readInjury(club.scopes.trainer, id)).timeLoss).toEqual({ days: 6, ongoing: false });
    expect(await stateOf(club.scopes.coach, athlete.id, addDays(onset, -1))).toMatchObject({
      state: "unavailable",
    });
  });

  it("applies the safe default to an edit that brings the first reason, and leaves what was lifted", async () => {
    const athlete = await freshAthlete();
    const { id } = await logInjury(club.scopes.trainer, logOf(athlete.id));
    await editInjury(club.scopes.trainer, id, await editOf(id, { signs: ["locked"] }));
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "unavailable" });
    await changeInjuryAvailability(club.scopes.trainer, id, changeOf({}));
    await editInjury(club.scopes.trainer, id, await editOf(id, { signs: [] }));
    await editInjury(club.scopes.trainer, id, await editOf(id, { signs: ["locked", "pop"] }));
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "full" });
  });

  it("gives an injury one reason when two people enter its availability at once", async () => {
    const athlete = await freshAthlete();
    const { id } = await logInjury(club.scopes.trainer, logOf(athlete.id));
    const change = changeOf({ state: "unavailable" });
    await Promise.all(
      [club.scopes.trainer, club.scopes.lead].map((scope) => changeInjuryAvailability(scope, id, change)),
    );
    await changeInjuryAvailability(club.scopes.trainer, id, changeOf({}));
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "full" });
  });

  it("does not let an injury follow another athlete's", async () => {
    const [athlete, another] = [await freshAthlete(), await freshAthlete()];
    const { id } = await logInjury(club.scopes.trainer, logOf(athlete.id));
    const foreign = await logInjury(club.scopes.trainer, logOf(another.id));
    for (const subsequentTo of [foreign.id, id, randomUUID()])
      await expect(
        editInjury(club.scopes.trainer, id, await editOf(id, { subsequentTo })),
      ).rejects.toMatchObject({ fields: { subsequentTo: expect.anything() } });
  });

  it("applies the safe default again to an edit that brings a reason nobody knew when it was lifted", async () => {
    const athlete = await freshAthlete();
    const { id } = await logInjury(club.scopes.trainer, logOf(athlete.id, { couldContinue: "no" }));
    await changeInjuryAvailability(club.scopes.trainer, id, changeOf({}));
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "full" });
    await editInjury(club.scopes.trainer, id, await editOf(id, { suspectedConcussion: "yes" }));
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "unavailable" });
  });

  it("leaves the expected day of an athlete who is out already when an edit brings a further reason", async () => {
    const { today } = club.scopes.trainer;
    const athlete = await freshAthlete();
    const { id } = await logInjury(club.scopes.trainer, logOf(athlete.id, { couldContinue: "no" }));
    const expectedOn = addDays(today, 20);
    const change = changeOf({ state: "unavailable", expectedOn: day(expectedOn) });
    await changeInjuryAvailability(club.scopes.trainer, id, change);
    await editInjury(club.scopes.trainer, id, await editOf(id, { signs: ["pop"] }));
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "unavailable", expectedOn });
  });

  it("keeps a withdrawn record, counts it nowhere, and sets its availability aside", async () => {
    const athlete = await freshAthlete();
    const { id } = await logInjury(club.scopes.trainer, logOf(athlete.id, { couldContinue: "no" }));
    await withdrawInjury(club.scopes.trainer, id, { version: 1, reason: "wrong_athlete" });
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "full" });
    expect((await listInjuries(club.scopes.trainer, url())).lines.some((line) => line.id === id)).toBe(false);
    const page = await readInjury(club.scopes.trainer, id);
    expect(page.revision.withdrawn).toBe(true);
    expect(page.history[0]).toMatchObject({ reason: "wrong_athlete" });
    await expect(
      addNote(club.scopes.trainer, id, { operation: randomUUID(), text: "x" }),
    ).rejects.toMatchObject({
      code: "conflict",
    });
  });

  it("signs follow-up notes and appends a note once", async () => {
    const { id } = await logInjury(club.scopes.trainer, logOf((await freshAthlete()).id));
    const note = { operation: randomUUID(), text: "Swelling is down." };
    await addNote(club.scopes.trainer, id, note);
    await addNote(club.scopes.trainer, id, note);
    expect((await readInjury(club.scopes.trainer, id)).notes).toMatchObject([
      { text: "Swelling is down.", by: club.scopes.trainer.displayName },
    ]);
  });

  it("suggests the relation to earlier injuries and points out the other knee", async () => {
    const { today } = club.scopes.trainer;
    const athlete = await freshAthlete();
    await makeInjury(club.staff, {
      athleteId: athlete.id,
      side: "left",
      onsetDay: addDays(today, -30),
      diagnosis: "ACL tear",
    });
    const { id } = await logInjury(club.scopes.trainer, logOf(athlete.id, { side: "left" }));
    expect((await readInjury(club.scopes.trainer, id)).relation).toMatchObject({
      waitsFor: "pathology",
      hasEarlier: true,
    });
    await editInjury(
      club.scopes.trainer,
      id,
      await editOf(id, { diagnosisPair: "ligament_capsule:sprain", certainty: "suspected" }),
    );
    expect((await readInjury(club.scopes.trainer, id)).relation).toMatchObject({
      subsequence: "recurrent",
      timing: "early",
    });
    const other = await logInjury(club.scopes.trainer, logOf(athlete.id, { side: "right" }));
    expect((await readInjury(club.scopes.trainer, other.id)).relation.contralateralAcl).toBe(true);
  });

  it("audits each reading of a record", async () => {
    const { id } = await logInjury(club.scopes.trainer, logOf((await freshAthlete()).id));
    await readInjury(club.scopes.lead, id);
    const events = await maintenance()`
      select person_id, action from audit_events where subject_id = ${id} order by at`;
    expect(events.map(({ action }) => action)).toEqual(["injury.create", "injury.read"]);
    expect(events[1]?.person_id).toBe(club.people.lead.id);
  });
});

describe("who sees what", () => {
  it("hides injuries of other teams' athletes from a trainer, and everything clinical from a coach", async () => {
    const injury = await makeInjury(club.staff, { athleteId: club.otherAthlete.id });
    await expect(readInjury(club.scopes.trainer, injury.id)).rejects.toMatchObject({ code: "not_found" });
    expect((await readInjury(club.scopes.lead, injury.id)).name).toContain("Tomos");
    for (const use of [
      () => readInjury(club.scopes.coach, injury.id),
      () => listInjuries(club.scopes.coach, url()),
      () => readQueue(club.scopes.coach),
      () => readAthleteAvailability(club.scopes.coach, club.athlete.id),
      () => readInjury(club.scopes.admin, injury.id),
    ])
      expect(use).toThrow(/does not include/);
    expect(await read(club.scopes.coach, (tx) => findInjuryForNotice(tx, injury.id))).toBeUndefined();
    expect(await read(club.scopes.coach, listGaps)).toEqual([]);
    expect(await read(club.scopes.coach, listOpenCoachReports)).toEqual([]);
  });

  it("shows a trainer the injury of a guest that happened in a session of the trainer's team", async () => {
    const session = await makeSession(club.staff, { teamId: club.team.id });
    const injury = await makeInjury(club.staff, { athleteId: club.otherAthlete.id, sessionId: session.id });
    expect((await readInjury(club.scopes.trainer, injury.id)).teams).toEqual([club.team.name]);
  });

  it("tells an administrator the state and nothing to act on", async () => {
    const athlete = await freshAthlete();
    await setAthleteAvailability(
      club.scopes.trainer,
      athlete.id,
      { cause: "illness" },
      changeOf({ state: "modified", restrictions: ["no_sprinting"] }),
    );
    expect(await stateOf(club.scopes.admin, athlete.id)).toMatchObject({
      state: "modified",
      restrictions: [],
    });
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ restrictions: ["no_sprinting"] });
  });
});

describe("coaches' reports", () => {
  const reportOf = (athleteId: string, given: Record<string, unknown> = {}) =>
    reportSchema.parse({
      operation: randomUUID(),
      athlete: athleteId,
      when: "earlier",
      day: day(club.scopes.coach.today),
      bodyArea: "knee",
      side: "left",
      couldContinue: "no",
      signs: ["pop"],
      phoned: "mother, 18:10",
      note: "Fell after a turn.",
      ...given,
    });

  it("sets the safe default, reaches the queue, is sent once, and is not readable by the coach", async () => {
    const athlete = await freshAthlete();
    const input = reportOf(athlete.id);
    const receipt = await sendCoachReport(club.scopes.coach, input);
    expect(receipt).toEqual({ cautions: ["knee"], unavailable: true });
    expect(await sendCoachReport(club.scopes.coach, input)).toEqual(receipt);
    expect((await readReceipt(club.scopes.coach, input.operation))?.cautions[0]?.title).toMatch(
      /serious knee/,
    );
    expect(await readReceipt(club.scopes.trainer, input.operation)).toBeNull();
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "unavailable" });
    const [report, ...more] = (await readQueue(club.scopes.trainer)).filter(
      ({ athleteId }) => athleteId === athlete.id,
    );
    expect(more).toEqual([]);
    expect(await readReport(club.scopes.trainer, report?.id ?? "")).toMatchObject({
      phoned: "mother, 18:10",
      note: "Fell after a turn.",
      urgency: "urgent",
    });
    expect(() => readReport(club.scopes.coach, report?.id ?? "")).toThrow(/does not include/);
    const [stored] = await maintenance()<
      { note: Uint8Array }[]
    >`select note from coach_reports where id = ${report?.id ?? ""}`;
    expect(Buffer.from(stored?.note ?? []).toString("utf8")).not.toContain("turn");
  });

  it("becomes an injury that takes over what was set, counts once, and can be logged once", async () => {
    const athlete = await freshAthlete();
    await sendCoachReport(club.scopes.coach, reportOf(athlete.id));
    const report = (await readQueue(club.scopes.trainer)).find(({ athleteId }) => athleteId === athlete.id);
    const form = await openLogForm(club.scopes.trainer, { athleteId: null, reportId: report?.id ?? null });
    expect(form.values).toMatchObject({
      athlete: athlete.id,
      bodyArea: "knee",
      signs: ["pop"],
      couldContinue: "no",
    });
    const input = logSchema.parse({ ...form.values, operation: form.operation, report: form.reportId });
    const { id } = await logInjury(club.scopes.trainer, input);
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "unavailable" });
    const page = await readInjury(club.scopes.trainer, id);
    expect(page.revision).toMatchObject({ phoned: "mother, 18:10", description: "Fell after a turn." });
    await changeInjuryAvailability(club.scopes.trainer, id, changeOf({}));
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "full" });
    await expect(logInjury(club.scopes.trainer, { ...input, operation: randomUUID() })).rejects.toMatchObject(
      { code: "conflict" },
    );
    expect((await readReport(club.scopes.trainer, report?.id ?? "")).injuryId).toBe(id);
  });

  it("makes the athlete unavailable again when the trainer sees a sign that the lifted report did not have", async () => {
    const athlete = await freshAthlete();
    await sendCoachReport(club.scopes.coach, reportOf(athlete.id, { signs: [] }));
    const { reasons } = await readAthleteAvailability(club.scopes.trainer, athlete.id);
    await setAthleteAvailability(
      club.scopes.trainer,
      athlete.id,
      { reasonId: reasons[0]?.id ?? "" },
      changeOf({}),
    );
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "full" });
    const report = (await readQueue(club.scopes.trainer)).find(({ athleteId }) => athleteId === athlete.id);
    const form = await openLogForm(club.scopes.trainer, { athleteId: null, reportId: report?.id ?? null });
    const answers = { ...form.values, operation: form.operation, report: form.reportId };
    await logInjury(club.scopes.trainer, logSchema.parse({ ...answers, suspectedConcussion: "yes" }));
    expect(await stateOf(club.scopes.coach, athlete.id)).toMatchObject({ state: "unavailable" });
  });

  it("counts from the true onset when the trainer corrects the day of a report", async () => {
    const { today } = club.scopes.trainer;
    const athlete = await freshAthlete();
    await sendCoachReport(club.scopes.coach, reportOf(athlete.id));
    const report = (await readQueue(club.scopes.trainer)).find(({ athleteId }) => athleteId === athlete.id);
    const form = await openLogForm(club.scopes.trainer, { athleteId: null, reportId: report?.id ?? null });
    const input = logSchema.parse({
      ...form.values,
      operation: form.operation,
      report: form.reportId,
      when: "earlier",
      day: day(addDays(today, -3)),
      time: "",
    });
    const { id } = await logInjury(club.scopes.trainer, input);
    expect((await readInjury(club.scopes.trainer, id)).timeLoss).toEqual({ days: 3, ongoing: true });
    expect(await stateOf(club.scopes.coach, athlete.id, addDays(today, -2))).toMatchObject({
      state: "unavailable",
    });
  });

  it("leaves no word of what was seen in the audit, which administrators read", async () => {
    const athlete = await freshAthlete();
    await sendCoachReport(club.scopes.coach, reportOf(athlete.id, { suspectedConcussion: "yes" }));
    await logInjury(club.scopes.trainer, logOf(athlete.id, { suspectedConcussion: "yes" }));
    const rows = await maintenance()<{ fields: unknown }[]>`
      select fields from audit_events where athlete_id = ${athlete.id}`;
    expect(rows.length).toBeGreaterThan(2);
    expect(JSON.stringify(rows)).not.toMatch(/concussion|knee|emergency|injury|illness|report/);
  });

  it("can be closed with a reason, which lifts what it set only when that is said", async () => {
    const [kept, lifted] = [await freshAthlete(), await freshAthlete()];
    for (const athlete of [kept, lifted]) await sendCoachReport(club.scopes.coach, reportOf(athlete.id));
    const queue = await readQueue(club.scopes.trainer);
    const idOf = (athleteId: string) => queue.find((row) => row.athleteId === athleteId)?.id ?? "";
    await closeReport(club.scopes.trainer, idOf(kept.id), { reason: "Seen, unsure.", availability: "keep" });
    await closeReport(club.scopes.trainer, idOf(lifted.id), { reason: "A bruise.", availability: "full" });
    expect(await stateOf(club.scopes.coach, kept.id)).toMatchObject({ state: "unavailable" });
    expect(await stateOf(club.scopes.coach, lifted.id)).toMatchObject({ state: "full" });
    expect(await readReport(club.scopes.trainer, idOf(lifted.id))).toMatchObject({
      closedReason: "A bruise.",
      decided: true,
    });
    await expect(
      closeReport(club.scopes.trainer, idOf(lifted.id), { reason: "Again.", availability: "keep" }),
    ).rejects.toMatchObject({ code: "conflict" });
  });

  it("does not let a coach report an athlete of another team, nor lift anything", async () => {
    await expect(sendCoachReport(club.scopes.coach, reportOf(club.otherAthlete.id))).rejects.toMatchObject({
      code: "not_found",
    });
    const receipt = await sendCoachReport(
      club.scopes.coach,
      reportOf((await freshAthlete()).id, { couldContinue: "yes", signs: [] }),
    );
    expect(receipt).toEqual({ cautions: [], unavailable: false });
  });
});

describe("lists", () => {
  it("filters by state, area, severity and words, and escapes what a spreadsheet would run", async () => {
    const own = await makeClub();
    const scope = own.scopes.trainer;
    const athlete = await makeAthlete(own.staff, {
      teamId: own.team.id,
      givenName: "=cmd",
      familyName: "Test",
    });
    await makeInjury(own.staff, {
      athleteId: athlete.id,
      bodyArea: "ankle",
      side: "right",
      diagnosis: "deltoid ligament",
    });
    await makeInjury(own.staff, {
      athleteId: own.athlete.id,
      onsetDay: addDays(scope.today, -10),
      unavailableFrom: addDays(scope.today, -10),
      closedOn: scope.today,
    });
    const found = async (query: string) =>
      (await listInjuries(scope, url(query))).lines.map(({ site }) => site);
    expect(await found("")).toEqual(["right ankle", "left knee"]);
    expect(await found("?state=closed")).toEqual(["left knee"]);
    expect(await found("?state=open")).toEqual(["right ankle"]);
    expect(await found("?area=ankle")).toEqual(["right ankle"]);
    expect(await found("?severity=8-28")).toEqual(["left knee"]);
    expect(await found("?severity=0")).toEqual(["right ankle"]);
    expect(await found("?q=DELTOID ankle")).toEqual(["right ankle"]);
    expect(await found("?q=deltoid knee")).toEqual([]);
    expect(await found("?state=nonsense&area=wing")).toHaveLength(2);
    expect(await found(`?team=${own.team.id}`)).toHaveLength(2);
    await expect(listInjuries(scope, url(`?team=${own.otherTeam.id}`))).rejects.toMatchObject({
      code: "not_found",
    });
    const csv = await exportInjuries(scope, url("?area=ankle"));
    expect(csv).toContain("'=cmd Test");
    expect(csv.trim().split("\r\n")).toHaveLength(2);
  });

  it("is of one athlete and of every season where the address names one", async () => {
    const { trainer } = club.scopes;
    const [athlete, another] = [await freshAthlete(), await freshAthlete()];
    const years = addDays(trainer.today, -2000);
    const old = await logInjury(trainer, logOf(athlete.id, { day: day(years) }));
    const fresh = await logInjury(trainer, logOf(athlete.id));
    await logInjury(trainer, logOf(another.id));
    const list = await listInjuries(trainer, url(`?athlete=${athlete.id}`));
    expect(list.lines.map(({ id }) => id)).toEqual([fresh.id, old.id]);
    expect(list).toMatchObject({ athlete: `${athlete.givenName} ${athlete.familyName}`, season: null });
    const csv = await exportInjuries(trainer, url(`?athlete=${athlete.id}`));
    expect(csv.trim().split("\r\n")).toHaveLength(3);
    await expect(listInjuries(trainer, url(`?athlete=${club.otherAthlete.id}`))).rejects.toMatchObject({
      code: "not_found",
    });
  });

  it("keeps an injury after the season's last day in the list of that season", async () => {
    const summer = await makeClub();
    const { trainer } = summer.scopes;
    const { startsOn } = summer.season;
    await maintenance()`update seasons set ends_on = ${addDays(trainer.today, -1)} where id = ${summer.season.id}`;
    const { id } = await makeInjury(summer.staff, { athleteId: summer.athlete.id, onsetDay: trainer.today });
    const ids = async (season: string) =>
      (await listInjuries(trainer, url(`?season=${season}`))).lines.map((line) => line.id);
    expect(await ids(summer.season.id)).toEqual([id]);
    const before = {
      name: "The one before",
      startsOn: addDays(startsOn, -300),
      endsOn: addDays(startsOn, -30),
    };
    expect(await ids((await makeSeason(summer.staff, before)).id)).toEqual([]);
  });

  it("gives today's injuries, the gaps, and the open ones nobody touched for 14 days", async () => {
    const own = await makeClub();
    const { today } = own.scopes.trainer;
    const old = await makeInjury(own.staff, {
      athleteId: own.athlete.id,
      onsetDay: addDays(today, -40),
      unavailableFrom: addDays(today, -40),
    });
    await maintenance()`update injury_revisions set recorded_at = now() - interval '20 days' where injury_id = ${old.id}`;
    await maintenance()`update availability_changes set set_at = now() - interval '20 days' where athlete_id = ${own.athlete.id}`;
    await maintenance()`update injuries set created_at = now() - interval '20 days' where id = ${old.id}`;
    const fresh = await makeInjury(own.staff, {
      athleteId: own.athlete.id,
      contact: null,
      couldContinue: true,
    });
    await read(own.scopes.trainer, async (tx) => {
      expect((await listInjuriesForToday(tx)).map(({ injuryId }) => injuryId)).toEqual([fresh.id]);
      expect(
        (await listGaps(tx)).find(({ injuryId }) => injuryId === fresh.id)?.gaps.map(({ field }) => field),
      ).toEqual(["session", "contact", "subsequence"]);
      expect((await listUntouched(tx)).map(({ injuryId }) => injuryId)).toEqual([old.id]);
      expect(await listUntouched(tx, 30)).toEqual([]);
    });
    await addNote(own.scopes.trainer, old.id, { operation: randomUUID(), text: "Seen." });
    expect(await read(own.scopes.trainer, (tx) => listUntouched(tx))).toEqual([]);
  });

  it("opens the facts of an injury for a guardian's notice", async () => {
    const session = await makeSession(club.staff, { teamId: club.team.id });
    const injury = await makeInjury(club.staff, {
      athleteId: club.athlete.id,
      sessionId: session.id,
      onsetTime: "17:40",
      signs: ["pop"],
      phoned: "father",
      diagnosis: "suspected ligament injury",
    });
    expect(await read(club.scopes.trainer, (tx) => findInjuryForNotice(tx, injury.id))).toMatchObject({
      onsetTime: "17:40",
      session: { kind: "training", teamName: club.team.name },
      signs: ["pop"],
      phoned: "father",
      diagnosis: "suspected ligament injury",
      urgency: "urgent",
    });
  });

  it("notes an encounter once", async () => {
    const input = {
      operation: randomUUID(),
      athlete: club.athlete.id,
      kind: "taping" as const,
      minutes: 10,
      note: "ankle",
    };
    await addEncounter(club.scopes.trainer, input);
    await addEncounter(club.scopes.trainer, input);
    const listed = await read(club.scopes.trainer, (tx) => listEncounters(tx, club.scopes.trainer.today));
    expect(listed).toMatchObject([{ kind: "taping", minutes: 10 }]);
  });
});
