import { describe, expect, it } from "vitest";
import type { MemberScope } from "~/features/accounts/scope.server";
import { viewImport } from "~/features/imports/imports.server";
import {
  maintenance,
  makeOrganisation,
  makePerson,
  makeSeason,
  makeSession,
  memberScope,
  staffScope,
} from "../../harness";
import { commit, countRows, csvFile, importFile, sampleFile, snapshot, uploadAndView } from "./helpers";

async function makeSchool() {
  const organisation = await makeOrganisation();
  const staff = staffScope(organisation);
  await makeSeason(staff, { name: "2026/27", startsOn: "2026-08-01", endsOn: "2027-06-30" });
  const person = await makePerson(organisation, { roles: ["lead"] });
  return { organisation, staff, scope: await memberScope(person, organisation) };
}

async function withGirls() {
  const school = await makeSchool();
  await importFile(school.scope, "roster", await sampleFile("roster/samples/roster-plain.csv"));
  return school;
}

async function teamNamed(organisationId: string, name: string) {
  const [row] =
    await maintenance()`select id from teams where organisation_id = ${organisationId} and name = ${name}`;
  return String(row?.id);
}

const head = "Date,Start,Team,Kind,Athlete number,Minutes,Presence";
const exposure = (rows: string[], header = head) => csvFile([header, ...rows], "exposure.csv");

async function importExposure(scope: MemberScope, rows: string[], header?: string) {
  const view = await uploadAndView(scope, "exposure", exposure(rows, header));
  return commit(scope, view.id);
}

describe("exposure by athlete", () => {
  it("brings the sample's 454 participations in 24 sessions, and nothing the second time", async () => {
    const { organisation, scope } = await withGirls();
    const file = await sampleFile("exposure/samples/exposure-by-athlete.csv");
    const preview = await uploadAndView(scope, "exposure", file);
    expect(preview.state).toBe("previewed");
    expect(preview.counts).toMatchObject({
      rows: 454,
      create: 454,
      rejected: 0,
      sessionsMade: 24,
      participationsMade: 454,
    });
    expect(await countRows(organisation.id, "sessions")).toBe(0);
    const done = await commit(scope, preview.id);
    expect(done.state).toBe("committed");
    const [sum] = await maintenance()`
      select count(*)::int as n, sum(minutes)::float8 as minutes, count(distinct athlete_id)::int as athletes
      from participations where organisation_id = ${organisation.id}`;
    expect(sum).toEqual({ n: 454, minutes: 33_297, athletes: 22 });
    const sessions = await maintenance()`
      select distinct state, exposure_grade, surface is not null as surface from sessions where organisation_id = ${organisation.id}`;
    expect(sessions).toEqual([{ state: "held", exposure_grade: "recorded", surface: true }]);
    const lengths = await maintenance()`
      select s.actual_minutes, max(p.minutes)::int as most from sessions s
      join participations p on p.organisation_id = s.organisation_id and p.session_id = s.id
      where s.organisation_id = ${organisation.id} group by s.id, s.actual_minutes`;
    expect(lengths.every(({ actual_minutes, most }) => actual_minutes === most)).toBe(true);
    const before = await snapshot(organisation.id);
    const again = await importFile(scope, "exposure", file);
    expect(again.counts).toMatchObject({ unchanged: 454, create: 0, update: 0, rejected: 0 });
    expect(await snapshot(organisation.id)).toEqual(before);
  });

  it("rejects every row of unknown athletes with the mend, and imports nothing", async () => {
    const { organisation, scope } = await makeSchool();
    const view = await importFile(
      scope,
      "exposure",
      await sampleFile("exposure/samples/exposure-by-athlete.csv"),
    );
    expect(view.counts).toMatchObject({ create: 0, rejected: 454 });
    expect(view.rows.items[0]?.problems[0]).toMatchObject({
      column: "Athlete number",
      cell: "MB-1001",
      reason: "No athlete has the number “MB-1001”.",
      mend: "Import the roster first, or correct the number.",
    });
    expect(await countRows(organisation.id, "sessions")).toBe(0);
  });

  it("fills a planned session of that day and start, keeps its plan, and warns of another start", async () => {
    const { organisation, staff, scope } = await withGirls();
    const teamId = await teamNamed(organisation.id, "Girls U15 Soccer");
    const planned = await makeSession(staff, {
      teamId,
      day: "2026-09-07",
      startTime: "17:30",
      kind: "training",
      state: "planned",
      plannedMinutes: 90,
      actualMinutes: null,
    });
    const view = await importExposure(scope, [
      "2026-09-07,17:30,Girls U15 Soccer,training,MB-1001,75,took part",
      "2026-09-07,19:00,Girls U15 Soccer,training,MB-1002,60,took part",
    ]);
    expect(view.counts).toMatchObject({ create: 2, sessionsMade: 1, sessionsChanged: 1, warned: 1 });
    const [row] = await maintenance()`
      select state, exposure_grade, planned_minutes, actual_minutes, version from sessions
      where organisation_id = ${organisation.id} and id = ${planned.id}`;
    expect(row).toEqual({
      state: "held",
      exposure_grade: "recorded",
      planned_minutes: 90,
      actual_minutes: 75,
      version: 2,
    });
  });

  it("asks for the start where a day has several sessions of the kind", async () => {
    const { organisation, staff, scope } = await withGirls();
    const teamId = await teamNamed(organisation.id, "Girls U15 Soccer");
    for (const startTime of ["10:00", "15:00"])
      await makeSession(staff, { teamId, day: "2026-09-12", startTime, kind: "match", state: "planned" });
    const view = await importExposure(scope, ["2026-09-12,,Girls U15 Soccer,match,MB-1001,60,took part"]);
    expect(view.counts).toMatchObject({ rejected: 1, create: 0 });
    expect(view.rows.items[0]?.problems[0]?.reason).toBe(
      "Girls U15 Soccer has several sessions of this kind on 12 Sep 2026 (10:00, 15:00).",
    );
  });

  it("changes minutes with old and new shown, warns off the roster and outside any season, refuses the future", async () => {
    const { scope } = await withGirls();
    await importExposure(scope, ["2026-09-07,17:30,Girls U15 Soccer,training,MB-1001,75,took part"]);
    const view = await uploadAndView(
      scope,
      "exposure",
      exposure([
        "2026-09-07,17:30,Girls U15 Soccer,training,MB-1001,70,took part",
        "2026-07-15,17:30,Girls U15 Soccer,training,MB-1002,60,took part",
        "2031-09-07,17:30,Girls U15 Soccer,training,MB-1003,60,took part",
      ]),
    );
    expect(view.counts).toMatchObject({ update: 1, create: 1, rejected: 1, warned: 1 });
    const updates = await viewImport(scope, view.id, new URL("http://x/?rows=update"));
    expect(updates.rows.items[0]?.changes).toEqual([{ field: "Minutes", before: "75", after: "70" }]);
    const warned = await viewImport(scope, view.id, new URL("http://x/?rows=warned"));
    expect(warned.rows.items[0]?.warnings.map(({ warning }) => warning)).toEqual([
      "15 Jul 2026 lies in no season: rates of a season leave it out.",
      "Not on the roster of Girls U15 Soccer on 15 Jul 2026. Imported all the same; correct the roster if it is wrong.",
    ]);
    expect(view.rows.items[0]?.problems[0]?.reason).toMatch(/lies in the future/);
  });

  it("takes one line for an athlete named twice in a session, by number and by name", async () => {
    const { scope } = await withGirls();
    const view = await importExposure(
      scope,
      [
        "2026-09-07,17:30,Girls U15 Soccer,training,MB-1001,,75",
        '2026-09-07,17:30,Girls U15 Soccer,training,,"Inchmere, Lowri",60',
      ],
      "Date,Start,Team,Kind,Athlete number,Athlete name,Minutes",
    );
    expect(view.counts).toMatchObject({ create: 1, rejected: 1 });
    expect(view.rows.items[0]?.problems[0]?.reason).toBe(
      "Line 2 already has this athlete in the same session.",
    );
  });
});

describe("exposure by headcount", () => {
  it("brings 28 sessions of the sample, names the two bad rows, and nothing the second time", async () => {
    const { organisation, scope } = await makeSchool();
    const roster = await uploadAndView(
      scope,
      "roster",
      await sampleFile("roster/samples/roster-excel-semicolon-cp1252.csv"),
    );
    expect(roster.state).toBe("needs_answers");
    await importFile(scope, "roster", await sampleFile("roster/samples/roster-excel-semicolon-cp1252.csv"));
    const file = await sampleFile("exposure/samples/exposure-by-headcount.csv");
    const done = await importFile(scope, "exposure", file);
    expect(done.state).toBe("committed");
    expect(done.reading?.dayOrder).toBe("day-first");
    expect(done.counts).toMatchObject({ rows: 30, create: 28, rejected: 2, sessionsMade: 28 });
    expect(
      done.rows.items.map(({ line, problems }) => [line, problems[0]?.column, problems[0]?.cell]),
    ).toEqual([
      [13, "Players", "fourteen"],
      [16, "Date", "31/11/2026"],
    ]);
    const [sum] = await maintenance()`
      select count(*)::int as n, min(exposure_grade) as grade, sum(headcount)::int as heads from sessions
      where organisation_id = ${organisation.id}`;
    expect(sum?.n).toBe(28);
    expect(sum?.grade).toBe("headcount");
    const before = await snapshot(organisation.id);
    const again = await importFile(scope, "exposure", file);
    expect(again.counts).toMatchObject({ unchanged: 28, create: 0, rejected: 2 });
    expect(await snapshot(organisation.id)).toEqual(before);
  });

  it("never lowers a session that is recorded by athlete", async () => {
    const { organisation, scope } = await withGirls();
    await importExposure(scope, ["2026-09-07,17:30,Girls U15 Soccer,training,MB-1001,75,took part"]);
    const before = await snapshot(organisation.id);
    const view = await importExposure(
      scope,
      ["2026-09-07,17:30,Girls U15 Soccer,training,14,75"],
      "Date,Start,Team,Kind,Players,Minutes",
    );
    expect(view.counts).toMatchObject({ unchanged: 1, warned: 1 });
    expect(await snapshot(organisation.id)).toEqual(before);
  });
});
