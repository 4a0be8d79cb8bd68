import { describe, expect, it } from "vitest";
import {
  maintenance,
  makeOrganisation,
  makePerson,
  makeSeason,
  memberScope,
  staffScope,
} from "../../harness";
import {
  answer,
  commit,
  countRows,
  importFile,
  makeTeams,
  sampleFile,
  snapshot,
  uploadAndView,
} from "./helpers";

async function makeSchool() {
  const organisation = await makeOrganisation();
  await makeSeason(staffScope(organisation));
  const person = await makePerson(organisation, { roles: ["lead"] });
  return { organisation, scope: await memberScope(person, organisation) };
}

describe("the plain roster", () => {
  it("asks for its team once, shows all 22 rows as new, and imports them", async () => {
    const { organisation, scope } = await makeSchool();
    const first = await uploadAndView(scope, "roster", await sampleFile("roster/samples/roster-plain.csv"));
    expect(first.failure).toBe(null);
    expect(first.state).toBe("needs_answers");
    expect(first.questions).toEqual([
      {
        kind: "teams",
        teams: [
          {
            key: "girls u15 soccer",
            name: "Girls U15 Soccer",
            rows: 22,
            guess: { sport: "soccer", sex: "girls", underAge: 15 },
          },
        ],
      },
    ]);
    expect(await countRows(organisation.id, "teams")).toBe(0);
    const preview = await answer(scope, first.id, makeTeams(first));
    expect(preview.state).toBe("previewed");
    expect(preview.counts).toMatchObject({
      rows: 22,
      create: 22,
      update: 0,
      unchanged: 0,
      rejected: 0,
      athletesMade: 22,
      guardiansMade: 22,
      membershipsMade: 22,
      teamsMade: 1,
    });
    expect(await countRows(organisation.id, "athletes")).toBe(0);
    const done = await commit(scope, first.id);
    expect(done.state).toBe("committed");
    expect(done.committed.by).toBeTruthy();
    for (const [table, rows] of Object.entries({
      teams: 1,
      athletes: 22,
      guardians: 22,
      guardianships: 22,
      roster_entries: 22,
    }))
      expect(await countRows(organisation.id, table), table).toBe(rows);
    const [lowri] =
      await maintenance()`select given_name, family_name, number, date_of_birth::text as born, sex, dominant_leg from athletes where number = 'MB-1001' and organisation_id = ${organisation.id}`;
    expect(lowri).toEqual({
      given_name: "Lowri",
      family_name: "Inchmere",
      number: "MB-1001",
      born: "2013-08-25",
      sex: "female",
      dominant_leg: "left",
    });
  });

  it("changes nothing the second time, row for row, and says where it was imported before", async () => {
    const { organisation, scope } = await makeSchool();
    const file = await sampleFile("roster/samples/roster-plain.csv");
    const first = await importFile(scope, "roster", file);
    const before = await snapshot(organisation.id);
    const again = await uploadAndView(scope, "roster", file);
    expect(again.sameFile?.id).toBe(first.id);
    expect(again.counts).toMatchObject({ create: 0, update: 0, unchanged: 22, rejected: 0 });
    const done = await commit(scope, again.id);
    expect(done.state).toBe("committed");
    expect(await snapshot(organisation.id)).toEqual(before);
  });
});

describe("the roster of a spreadsheet program, semicolons and Windows-1252", () => {
  it("imports 18 rows with their accents and warns where letters were lost", async () => {
    const { organisation, scope } = await makeSchool();
    const done = await importFile(
      scope,
      "roster",
      await sampleFile("roster/samples/roster-excel-semicolon-cp1252.csv"),
    );
    expect(done.state).toBe("committed");
    expect(done.reading).toMatchObject({
      encoding: "windows-1252",
      delimiter: ";",
      headerLine: 2,
      dayOrder: "day-first",
    });
    expect(done.counts).toMatchObject({ rows: 18, create: 18, rejected: 0, warned: 3 });
    const rows =
      await maintenance()`select number, family_name, date_of_birth::text as born from athletes where organisation_id = ${organisation.id} and number in ('2001', '2014') order by number`;
    expect(rows).toEqual([
      { number: "2001", family_name: "Fennimore", born: "2009-08-02" },
      { number: "2014", family_name: "Nuñez", born: "2010-04-19" },
    ]);
  });

  it("keeps a good name where a later file has lost its letter", async () => {
    const { organisation, scope } = await makeSchool();
    const file = await sampleFile("roster/samples/roster-excel-semicolon-cp1252.csv");
    await importFile(scope, "roster", file);
    await maintenance()`update athletes set family_name = 'Łukaszewska', name_key = 'bram lukaszewska', version = version + 1 where organisation_id = ${organisation.id} and number = '2002'`;
    const before = await snapshot(organisation.id);
    const again = await importFile(scope, "roster", file);
    expect(again.counts).toMatchObject({ unchanged: 18 });
    expect(await snapshot(organisation.id)).toEqual(before);
  });
});

describe("the roster with errors", () => {
  it("names each bad row, asks for nothing but the team, and imports the good ones", async () => {
    const { organisation, scope } = await makeSchool();
    const file = await sampleFile("roster/samples/roster-with-errors.csv");
    const first = await uploadAndView(scope, "roster", file);
    expect(first.questions.map(({ kind }) => kind)).toEqual(["teams"]);
    const done = await importFile(scope, "roster", file);
    expect(done.rows.items.map(({ line, problems }) => [line, problems[0]?.column])).toEqual([
      [5, "Date of birth"],
      [9, "Guardian’s e-mail"],
      [10, "Number"],
      [12, "Given name"],
      [14, "Number"],
    ]);
    expect(done.counts).toMatchObject({ rows: 16, create: 11, rejected: 5 });
    expect(await countRows(organisation.id, "athletes")).toBe(11);
    const all = await snapshot(organisation.id);
    const again = await importFile(scope, "roster", file);
    expect(again.counts).toMatchObject({ create: 0, update: 0, unchanged: 11, rejected: 5 });
    expect(await snapshot(organisation.id)).toEqual(all);
  });
});
