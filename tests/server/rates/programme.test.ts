import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { archiveTeam } from "~/features/accounts/settings.server";
import { tableFileOf } from "~/features/rates/csv-views.server";
import type { PlanInput } from "~/features/rates/programme/programme.schema";
import { listPlans, recordPlan } from "~/features/rates/programme/programme-plans.server";
import { programmeViewOf } from "~/features/rates/programme/programme-view.server";
import { parseRatesQuery } from "~/features/rates/rates.schema";
import { openView } from "~/features/rates/view.server";
import { addDays } from "~/platform/clock";
import { read } from "~db/client.server";
import {
  maintenance,
  makeAthlete,
  makeClub,
  makeInjury,
  makeProgramme,
  makeSession,
  makeWarmUp,
} from "../../harness";
import { cookieOf, openServer, post } from "../../harness/http";

type Club = Awaited<ReturnType<typeof makeClub>>;
type Scope = Club["scopes"]["lead"];

const plan: PlanInput = {
  area: "knee",
  contact: "without",
  onset: "sudden",
  caseDefinition: "time-loss",
  comparison: "warmed-up",
  words: "Knees of athletes who warmed up against the others'.",
};

const viewOf = (scope: Scope, search = "") => {
  const url = new URL(`http://x/club/rates/programme${search}`);
  return read(scope, async (tx) => {
    const view = await openView(tx, url, parseRatesQuery(url.searchParams));
    if (!view) throw new Error("No season.");
    return programmeViewOf(tx, view, url);
  });
};

/** Injuries and athlete-exposures by the row's key. */
async function countsOf(scope: Scope, id: string) {
  const { tables } = await viewOf(scope);
  const rows = tables.find((table) => table.id === id)?.rows ?? [];
  return Object.fromEntries(rows.map(({ key, cells }) => [key, [cells.injuries, cells.aes]]));
}

describe("the plan comes first", () => {
  it("leaves no result and no table before one is recorded, to the lead either", async () => {
    const { scopes, organisation, people } = await makeClub();
    expect(await viewOf(scopes.lead)).toEqual({ plans: null, result: null, tables: [] });
    const http = await openServer();
    const cookie = await cookieOf(people.lead);
    const file = `/${organisation.slug}/rates/csv/programme/warmed-up`;
    expect((await http.get(file).set("Cookie", cookie)).status).toBe(404);
    const page = await http.get(`/${organisation.slug}/rates/programme`).set("Cookie", cookie);
    expect(page.text).toContain("First the plan");
    expect(page.text).not.toContain("Does it work?");
    await recordPlan(scopes.lead, plan);
    expect((await http.get(file).set("Cookie", cookie)).status).toBe(200);
    const shown = await http.get(`/${organisation.slug}/rates/programme`).set("Cookie", cookie);
    expect(shown.text).toContain("Does it work?");
    expect(shown.text).toContain(plan.words.replace("'", "&#x27;"));
  });

  it("is the lead's to record and the athletic trainer's to read; coaches and administrators have neither", async () => {
    const { scopes, organisation, people } = await makeClub();
    for (const role of ["trainer", "coach", "admin"] as const)
      expect(() => recordPlan(scopes[role], plan), role).toThrow(/does not include/);
    const http = await openServer();
    const address = `/${organisation.slug}/rates/programme`;
    const form = { ...plan };
    for (const [role, page, sent] of [
      ["trainer", 200, 403],
      ["coach", 403, 403],
      ["admin", 403, 403],
      ["lead", 200, 302],
    ] as const) {
      const cookie = await cookieOf(people[role]);
      expect([role, (await http.get(address).set("Cookie", cookie)).status]).toEqual([role, page]);
      expect([role, (await post(http, address, form, cookie).redirects(0)).status]).toEqual([role, sent]);
    }
    const [row] = await maintenance()<{ rows: number }[]>`
      select count(*)::int as rows from evaluation_plans where organisation_id = ${organisation.id}`;
    expect(row?.rows).toBe(1);
    expect((await viewOf(scopes.trainer)).plans?.plan).toMatchObject({ area: "knee", words: plan.words });
  });

  it("is recorded once however often its form is sent, and never overwritten", async () => {
    const { scopes, organisation, people } = await makeClub();
    const id = "0b0f3a52-1d0e-4c5b-8f1e-6d3f1c0d9a11";
    await recordPlan(scopes.lead, { ...plan, id });
    await recordPlan(scopes.lead, { ...plan, id });
    await expect(
      recordPlan(scopes.lead, { ...plan, id, area: "ankle", words: "Something else altogether." }),
    ).rejects.toMatchObject({ code: "operation_mismatch" });
    const plans = await read(scopes.lead, listPlans);
    expect(plans).toMatchObject([{ id, area: "knee", recordedOn: scopes.lead.today }]);
    expect(plans[0]?.recordedBy).toBeTruthy();
    const events = await maintenance()<{ action: string; person: string }[]>`
      select action, person_id as person from audit_events
      where organisation_id = ${organisation.id} and subject_id = ${id}`;
    expect([...events]).toEqual([{ action: "evaluation_plan.record", person: people.lead.id }]);
    const stored = await maintenance()<{ text: string }[]>`
      select encode(plan, 'escape') as text from evaluation_plans where id = ${id}`;
    expect(stored[0]?.text).not.toContain("Knees");
  });

  it("keeps the plan recorded before the season when another follows in it, and shows both", async () => {
    const { scopes, organisation, season } = await makeClub();
    const early = await recordPlan(scopes.lead, plan);
    await maintenance()`update evaluation_plans set recorded_at = ${`${addDays(season.startsOn, -5)} 12:00+00`}
      where organisation_id = ${organisation.id}`;
    const late = await recordPlan(scopes.lead, { ...plan, area: "ankle", onset: "any" });
    const view = await viewOf(scopes.lead);
    expect(view.plans).toMatchObject({ counts: early, plan: early, timing: "before", later: [late] });
    expect(view.result?.filters).toMatchObject({ area: "knee", contact: "without", onset: "sudden" });
    const other = await viewOf(scopes.lead, `?plan=${late.id}`);
    expect(other.plans).toMatchObject({ counts: early, plan: late, timing: "during" });
    expect(other.result?.filters).toMatchObject({ area: "ankle", onset: "any" });
    const absent = "5b0f3a52-1d0e-4c5b-8f1e-6d3f1c0d9a11";
    await expect(viewOf(scopes.lead, `?plan=${absent}`)).rejects.toMatchObject({ code: "not_found" });
  });

  it("takes the injuries from the plan, whatever the address narrows them to", async () => {
    const { scopes } = await makeClub();
    await recordPlan(scopes.lead, plan);
    const { result } = await viewOf(scopes.lead, "?area=ankle&contact=direct&side=left&sex=female");
    expect(result?.filters).toMatchObject({ area: "knee", contact: "without", side: "any", sex: "female" });
  });
});

/** A team of four with sessions forty days ago, and what was recorded of their warm-ups. */
async function makeWarmedClub() {
  const club = await makeClub();
  const { staff, team } = club;
  const ids: string[] = [];
  for (let n = 0; n < 4; n++) ids.push((await makeAthlete(staff, { teamId: team.id })).id);
  const day = (n: number) => addDays(staff.today, -40 + n);
  await makeProgramme(staff, { teamIds: [team.id], startsOn: day(0) });
  await recordPlan(club.scopes.lead, plan);
  const train = (n: number, athletes = ids, teamId = team.id) =>
    makeSession(staff, {
      teamId,
      day: day(n),
      startTime: "18:00",
      minutes: Object.fromEntries(athletes.map((id) => [id, 60])),
    });
  const hurt = (athleteId: string, session: { id: string; day: string }, given = {}) =>
    makeInjury(staff, {
      athleteId,
      sessionId: session.id,
      onsetDay: session.day,
      unavailableFrom: addDays(session.day, 1),
      ...given,
    });
  return { ...club, ids, day, train, hurt };
}

describe("the files", () => {
  it("say that they are narrowed to the plan's injuries, and warm-ups to none, whatever the address says", async () => {
    const { staff, scopes, ids, train } = await makeWarmedClub();
    const session = await train(1);
    await makeWarmUp(staff, { sessionId: session.id, outcome: "full", athleteIds: ids });
    const url = new URL("http://x/club/rates/csv/programme/x?area=ankle&sex=female");
    const narrowedTo = (table: string) =>
      read(scopes.lead, async (tx) => {
        const view = await openView(tx, url, parseRatesQuery(url.searchParams));
        if (!view) throw new Error("No season.");
        const { text } = await tableFileOf(tx, view, url, { view: "programme", table });
        const [row] = Papa.parse<Record<string, string>>(text.replace(/^\uFEFF/, ""), {
          header: true,
          delimiter: ",",
        }).data;
        return row?.narrowed_to;
      });
    expect(await narrowedTo("warmed-up-ratios")).toBe("sex=female; area=knee; contact=without; onset=sudden");
    expect(await narrowedTo("measures")).toBe("sex=female");
  });
});

describe("a team that was archived since", () => {
  it("keeps its warm-ups in the season's compliance, as its exposure stays in the rates", async () => {
    const { staff, scopes, team, otherTeam, ids, train } = await makeWarmedClub();
    const session = await train(1);
    await makeWarmUp(staff, { sessionId: session.id, outcome: "full", athleteIds: ids });
    await archiveTeam(scopes.admin, team.id, true);
    const { result, tables } = await viewOf(scopes.lead);
    expect(result?.compliance.together).toEqual({ notRecorded: 0, held: 1 });
    const skipped = tables.find(({ id }) => id === "skipped");
    expect(skipped?.rows.map(({ key, cells }) => [key, cells.done])).toEqual(
      expect.arrayContaining([
        [team.id, 1],
        [otherTeam.id, 0],
      ]),
    );
  });
});

describe("who had warmed up", () => {
  it("is told by the session's record, the moment of the onset and the injury's own answer", async () => {
    const { staff, scopes, ids, train, hurt } = await makeWarmedClub();
    const [a = "", b = "", c = "", d = ""] = ids;
    const full = await train(1);
    // The fourth came late.
    await makeWarmUp(staff, { sessionId: full.id, athleteIds: [a, b, c], minutes: 20 });
    await hurt(a, full, { onsetTime: "18:40" });
    await hurt(b, full, { onsetTime: "18:10" });
    await hurt(c, full, { onsetTime: "18:40", warmedUp: false });
    await hurt(d, full, { warmedUp: true });
    const skipped = await train(2);
    await makeWarmUp(staff, {
      sessionId: skipped.id,
      outcome: "skipped",
      blocks: [],
      skipReason: "weather",
      minutes: null,
    });
    await hurt(a, skipped, { warmedUp: true });
    const unrecorded = await train(3);
    // Nobody knows of the others, so the one who was hurt stays with them.
    await hurt(b, unrecorded, { warmedUp: true });
    expect(await countsOf(scopes.lead, "warmed-up")).toEqual({
      "warmed_up training": [3, 3],
      "not_warmed_up training": [2, 5],
      "not_recorded training": [1, 4],
    });
    const { result } = await viewOf(scopes.lead);
    expect(result?.injuries.classes).toMatchObject({ differing: 3 });
    expect(result?.injuries.classes.byRecord).toMatchObject({ a: { events: 2 }, b: { events: 3 } });
  });

  it("leaves out the days before the start and teams without a programme, and counts what it leaves out", async () => {
    const { staff, scopes, ids, otherTeam, otherAthlete, train, hurt } = await makeWarmedClub();
    const before = await train(-3);
    await hurt(ids[0] ?? "", before);
    await train(1);
    const other = await train(2, [otherAthlete.id], otherTeam.id);
    await makeWarmUp(staff, { sessionId: other.id, athleteIds: [otherAthlete.id] });
    await hurt(otherAthlete.id, other);
    const headcount = await makeSession(staff, {
      teamId: before.teamId,
      day: addDays(staff.today, -20),
      exposureGrade: "headcount",
      headcount: 4,
      headcountMinutes: 60,
    });
    await hurt(ids[1] ?? "", headcount);
    expect(await countsOf(scopes.lead, "warmed-up")).toEqual({ "not_recorded training": [0, 4] });
    const { result } = await viewOf(scopes.lead);
    expect(result?.injuries).toMatchObject({
      counted: 3,
      unplaced: { outside: 2, noParticipations: 1, noSession: 0 },
      outside: { beforeStart: 4, noProgramme: 1 },
    });
    expect(result?.compliance.together).toEqual({ held: 2, notRecorded: 2 });
  });

  it("counts nothing of a team that reports nothing", async () => {
    const { scopes, train, staff, team } = await makeWarmedClub();
    const session = await train(1);
    await makeWarmUp(staff, { sessionId: session.id, athleteIds: [] });
    expect(await countsOf(scopes.lead, "warmed-up")).toEqual({});
    await makeInjury(staff, { athleteId: (await makeAthlete(staff, { teamId: team.id })).id });
    expect(await countsOf(scopes.lead, "warmed-up")).toEqual({ "not_warmed_up training": [0, 4] });
  });

  it("counts a trainer's own teams, and an athlete's history in every team", async () => {
    const { staff, scopes, ids, otherTeam, train, hurt } = await makeWarmedClub();
    const [a = ""] = ids;
    await makeProgramme(staff, { teamIds: [otherTeam.id], startsOn: addDays(staff.today, -60) });
    for (let n = 1; n <= 5; n++) {
      const session = await train(n, [a], otherTeam.id);
      await makeWarmUp(staff, { sessionId: session.id, athleteIds: n < 4 ? [a] : [] });
    }
    // On the same day as another session: the history ends the day before.
    const same = await train(8, [a], otherTeam.id);
    await makeWarmUp(staff, { sessionId: same.id, athleteIds: [a] });
    const own = await train(8, [a]);
    await makeWarmUp(staff, { sessionId: own.id, athleteIds: [a] });
    await hurt(a, own);
    const { result } = await viewOf(scopes.trainer);
    expect(await countsOf(scopes.trainer, "warmed-up")).toEqual({ "warmed_up training": [1, 1] });
    // Three of five: the only share there is, so there is nothing to part in three.
    expect(result?.injuries.thirds.reason).toContain("60.0 %");
  });
});

describe("low coverage", () => {
  it("withholds every rate and ratio below half of the held sessions", async () => {
    const { staff, scopes, ids, team, train, hurt } = await makeWarmedClub();
    const session = await train(1);
    await makeWarmUp(staff, { sessionId: session.id, athleteIds: ids.slice(0, 2) });
    await hurt(ids[0] ?? "", session);
    for (let n = 2; n < 5; n++) await makeSession(staff, { teamId: team.id, day: addDays(staff.today, -n) });
    const { result, tables } = await viewOf(scopes.lead);
    expect(result?.injuries.withheld).toContain("withheld");
    const shown = tables
      .filter(({ id }) => ["warmed-up", "warmed-up-ratios"].includes(id))
      .flatMap(({ rows }) => rows.map(({ cells }) => cells.rate ?? cells.ratio));
    expect(shown.length).toBeGreaterThan(4);
    for (const cell of shown) expect(cell).toEqual({ reason: expect.stringContaining("withheld") });
  });
});
