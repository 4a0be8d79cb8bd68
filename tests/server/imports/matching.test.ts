import { describe, expect, it } from "vitest";
import { listImportsWithRejectedRows, viewImport } from "~/features/imports/imports.server";
import { read } from "~db/client.server";
import { maintenance, makeClub, makePerson, memberScope } from "../../harness";
import { answer, commit, countRows, csvFile, importFile, page, snapshot, uploadAndView } from "./helpers";

const roster = (rows: string[], header = "Number,Given name,Family name,Date of birth,Team") =>
  csvFile([header, ...rows], "roster.csv");

async function open() {
  const club = await makeClub();
  return { club, scope: club.scopes.lead, id: club.organisation.id, team: club.team.name };
}

describe("matching a roster with what is stored", () => {
  it("keeps leading zeros and two athletes with one name apart", async () => {
    const { scope, id, team } = await open();
    const done = await importFile(
      scope,
      "roster",
      roster([`007,Tam,Longreach,2011-06-25,${team}`, `7,Tam,Longreach,2011-07-01,${team}`]),
    );
    expect(done.counts).toMatchObject({ create: 2, rejected: 0 });
    const rows =
      await maintenance()`select number from athletes where organisation_id = ${id} and family_name = 'Longreach' order by number`;
    expect(rows.map(({ number }) => number)).toEqual(["007", "7"]);
  });

  it("never blanks by an absent column or an empty cell, and shows old and new", async () => {
    const { scope, id, team } = await open();
    await importFile(
      scope,
      "roster",
      roster(
        [`A1,Tam,Longreach,2011-06-25,${team},male,left,Ida Longreach,ida@example.org,+44 1632 960010`],
        "Number,Given name,Family name,Date of birth,Team,Sex,Dominant leg,Guardian name,Guardian email,Guardian phone",
      ),
    );
    const before = await snapshot(id);
    const same = await importFile(
      scope,
      "roster",
      roster(["A1,Tam,Longreach,,,"], "Number,Given name,Family name,Date of birth,Sex,Guardian phone"),
    );
    expect(same.counts).toMatchObject({ unchanged: 1, update: 0 });
    expect(await snapshot(id)).toEqual(before);
    const changed = await uploadAndView(
      scope,
      "roster",
      roster(
        ["A1,Tam,Longreach-Vexley,2011-06-26,ida@example.org,+44 1632 960099"],
        "Number,Given name,Family name,Date of birth,Guardian email,Guardian phone",
      ),
    );
    // Another name and another birthday under one number: a person decides.
    expect(changed.counts).toMatchObject({ rejected: 1, doubtful: 1 });
    const decided = await answer(scope, changed.id, {
      "doubt.2": `same:${changed.doubts[0]?.problems[0]?.candidates?.[0]?.id}`,
    });
    expect(decided.counts).toMatchObject({ update: 1, rejected: 0, doubtful: 0 });
    expect(decided.rows.items[0]?.changes).toEqual([
      { field: "Family name", before: "Longreach", after: "Longreach-Vexley" },
      { field: "Date of birth", before: "2011-06-25", after: "2011-06-26" },
      { field: "Guardian’s phone", before: "+44 1632 960010", after: "+44 1632 960099" },
    ]);
    await commit(scope, changed.id);
    const [row] =
      await maintenance()`select family_name, dominant_leg, sex, version from athletes where organisation_id = ${id} and number = 'A1'`;
    expect(row).toEqual({ family_name: "Longreach-Vexley", dominant_leg: "left", sex: "male", version: 2 });
  });

  it("rejects a doubtful row until a person says it is another athlete", async () => {
    const { scope, id, team } = await open();
    await importFile(scope, "roster", roster([`A1,Tam,Longreach,2011-06-25,${team}`]));
    const view = await uploadAndView(scope, "roster", roster([`B9,Tam,Longreach,2011-06-25,${team}`]));
    expect(view.counts).toMatchObject({ rejected: 1, doubtful: 1, create: 0 });
    expect(view.doubts[0]?.problems[0]?.candidates).toMatchObject([
      { name: "Tam Longreach", number: "A1", dateOfBirth: "2011-06-25", teams: [team] },
    ]);
    const decided = await answer(scope, view.id, { "doubt.2": "separate" });
    expect(decided.counts).toMatchObject({ create: 1, rejected: 0 });
    await commit(scope, view.id);
    expect(
      (
        await maintenance()`select 1 from athletes where organisation_id = ${id} and family_name = 'Longreach'`
      ).length,
    ).toBe(2);
  });

  it("keeps a membership that is there and shares a guardian of siblings", async () => {
    const { scope, id, team } = await open();
    const header =
      "Number,Given name,Family name,Date of birth,Team,In the team from,Guardian name,Guardian email";
    await importFile(
      scope,
      "roster",
      roster(
        [
          `A1,Tam,Longreach,2011-06-25,${team},2026-08-15,Ida Longreach,ida@example.org`,
          `A2,Una,Longreach,2013-06-25,${team},2026-08-15,Ida Longreach,IDA@example.org`,
        ],
        header,
      ),
    );
    const count = async (table: string) => countRows(id, table);
    expect(
      (await maintenance()`select 1 from guardians where organisation_id = ${id} and name = 'Ida Longreach'`)
        .length,
    ).toBe(1);
    const entries = await count("roster_entries");
    const later = await importFile(
      scope,
      "roster",
      roster([`A1,Tam,Longreach,2011-06-25,${team},2026-09-01,Ida Longreach,ida@example.org`], header),
    );
    expect(later.counts).toMatchObject({ unchanged: 1, warned: 1 });
    expect(await count("roster_entries")).toBe(entries);
  });

  it("keeps two parents who share one address, the second time too", async () => {
    const { scope, id, team } = await open();
    const file = roster(
      [
        `A1,Tam,Longreach,2011-06-25,${team},Ida Longreach,home@example.org`,
        `A1,Tam,Longreach,2011-06-25,${team},Olaf Longreach,home@example.org`,
      ],
      "Number,Given name,Family name,Date of birth,Team,Guardian name,Guardian email",
    );
    await importFile(scope, "roster", file);
    const before = await snapshot(id);
    expect(before.guardians?.filter((row) => row.includes("home@example.org"))).toHaveLength(2);
    expect((await importFile(scope, "roster", file)).counts).toMatchObject({ unchanged: 2 });
    expect(await snapshot(id)).toEqual(before);
  });
});

describe("what stops and asks", () => {
  it("asks for an ambiguous date order and for the order of names, once", async () => {
    const { scope, team } = await open();
    const file = roster(
      [`1,Tam Longreach,03/04/2011,${team}`, `2,Una Vexley,05/06/2012,${team}`],
      "Number,Full name,Date of birth,Team",
    );
    const view = await uploadAndView(scope, "roster", file);
    expect(view.state).toBe("needs_answers");
    expect(view.questions.map(({ kind }) => kind)).toEqual(["day-order", "name-order"]);
    const ready = await answer(scope, view.id, { dayOrder: "day-first", nameOrder: "given-first" });
    expect(ready.state).toBe("previewed");
    expect(ready.counts).toMatchObject({ create: 2 });
    await commit(scope, view.id);
    const [row] =
      await maintenance()`select family_name, date_of_birth::text as born from athletes where organisation_id = ${scope.organisationId} and number = '1'`;
    expect(row).toEqual({ family_name: "Longreach", born: "2011-04-03" });
  });

  it("remembers a mapping that was put right by hand, once the import is done", async () => {
    const { scope, team } = await open();
    const file = () =>
      roster([`1,Tam,Longreach,2011-04-03,${team}`], "Kit code,Given name,Family name,Date of birth,Team");
    const view = await uploadAndView(scope, "roster", file());
    expect(view.headings[0]).toMatchObject({ header: "Kit code", key: null });
    const mapped = await answer(scope, view.id, {
      "column.0": "number",
      "column.1": "givenName",
      "column.2": "familyName",
      "column.3": "dateOfBirth",
      "column.4": "teamName",
    });
    expect(mapped.headings[0]).toMatchObject({ key: "number", confidence: "person" });
    await commit(scope, view.id);
    const next = await uploadAndView(scope, "roster", file());
    expect(next.headings[0]).toMatchObject({ key: "number", confidence: "remembered" });
    expect(next.counts).toMatchObject({ unchanged: 1 });
  });

  it("takes columns and an unchanged reading from one form, and drops the columns with another header row", async () => {
    const { scope, team } = await open();
    const rows = [
      "Members of the club",
      "Kit code,Given name,Family name,Date of birth,Team",
      `1,Tam,Longreach,2011-04-03,${team}`,
      `2,Una,Vexley,2012-01-30,${team}`,
    ];
    const view = await uploadAndView(scope, "roster", csvFile(rows));
    expect(view.reading).toMatchObject({ headerLine: 2, titleLines: ["Members of the club"] });
    const columns = Object.fromEntries(
      ["number", "givenName", "familyName", "dateOfBirth", ""].map((key, index) => [`column.${index}`, key]),
    );
    const mapped = await answer(scope, view.id, {
      ...columns,
      encoding: "utf-8",
      delimiter: ",",
      headerLine: "2",
    });
    expect(mapped.headings.map(({ key }) => key)).toEqual([
      "number",
      "givenName",
      "familyName",
      "dateOfBirth",
      null,
    ]);
    const moved = await answer(scope, view.id, { ...columns, headerLine: "3" });
    expect(moved.state).toBe("needs_answers");
    expect(moved.reading?.header[1]).toBe("Tam");
    expect(moved.questions.map(({ kind }) => kind)).toContain("columns");
  });

  it("refuses one column chosen for two headings and keeps what was answered", async () => {
    const { scope, team } = await open();
    const view = await uploadAndView(scope, "roster", roster([`1,Tam,Longreach,2011-04-03,${team}`]));
    await expect(
      answer(scope, view.id, { "column.0": "number", "column.1": "number" }),
    ).rejects.toMatchObject({
      fields: { "column.1": ["“Number” is chosen twice. Choose it for one heading only."] },
    });
    expect((await viewImport(scope, view.id, page())).state).toBe("previewed");
  });
});

describe("a trainer of listed teams", () => {
  it("imports into own teams only, cannot make teams, and does not see other imports or athletes", async () => {
    const { club, scope: lead, id } = await open();
    const trainer = club.scopes.trainer;
    await importFile(lead, "roster", roster([`B7,Ulf,Coldstream,2009-02-17,${club.otherTeam.name}`]));
    const view = await uploadAndView(
      trainer,
      "roster",
      roster([
        `A1,Tam,Longreach,2011-06-25,${club.team.name}`,
        `A2,Una,Vexley,2011-06-25,${club.otherTeam.name}`,
        "A3,Ida,Vexley,2011-06-25,A Team Nobody Knows",
        `B7,Ulf,Coldstream,2009-02-17,${club.team.name}`,
        "A4,Pia,Vexley,2011-06-25,",
      ]),
    );
    expect(view.state).toBe("previewed");
    expect(view.counts).toMatchObject({ create: 1, rejected: 4 });
    expect(view.rows.items.map(({ problems }) => problems[0]?.reason)).toEqual([
      `“${club.otherTeam.name}” is not one of your teams.`,
      "“A Team Nobody Knows” is not one of your teams.",
      "This athlete is in the organisation already, outside your teams.",
      "The row names no team, and you cover listed teams only.",
    ]);
    await commit(trainer, view.id);
    expect((await maintenance()`select 1 from teams where organisation_id = ${id}`).length).toBe(2);
    const leads = await uploadAndView(lead, "roster", roster([`Z1,Zeb,Nuñez,2011-06-25,${club.team.name}`]));
    await expect(viewImport(trainer, leads.id, page())).rejects.toMatchObject({ code: "not_found" });
    await expect((async () => viewImport(club.scopes.coach, view.id, page()))()).rejects.toMatchObject({
      code: "forbidden",
    });
    const stranger = await makeClub({ slug: "elsewhere" });
    await expect(viewImport(stranger.scopes.lead, leads.id, page())).rejects.toMatchObject({
      code: "not_found",
    });
  });

  it("tells today of imports with rejected rows, until the mended file comes", async () => {
    const { club, scope } = await open();
    const bad = () => roster([`A1,Tam,Longreach,2011-02-30,${club.team.name}`]);
    const done = await importFile(scope, "roster", bad());
    expect(await read(scope, listImportsWithRejectedRows)).toMatchObject([
      { id: done.id, rejected: 1, fileName: "roster.csv" },
    ]);
    const other = await memberScope(
      await makePerson(club.organisation, { roles: ["trainer"], teams: [club.team.id] }),
      club.organisation,
    );
    expect(await read(other, listImportsWithRejectedRows)).toEqual([]);
    await importFile(scope, "roster", roster([`A1,Tam,Longreach,2011-02-28,${club.team.name}`]));
    expect(await read(scope, listImportsWithRejectedRows)).toEqual([]);
  });
});
