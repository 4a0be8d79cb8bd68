import { describe, expect, it } from "vitest";
import { makeOrganisation, makePerson, makeSeason, memberScope, staffScope, maintenance } from "../../harness";
import { answer, commit, countRows, importFile, makeTeams, sampleFile, snapshot, uploadAndView } from "./helpers";

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
    expect(preview.counts).toMatchObject({ rows: 22, create: 22, update: 0, unchanged: 0, rejected: 0, athletesMade: 22, guardiansMade: 22, membershipsMade: 22, teamsMade: 1 });
    expect(await countRows(organisation.id, "athletes")).toBe(0);
    const done = await commit(scope, first.id);
    expect(done.state).toBe("committed");
    expect(done.committed.by).toBeTruthy();
    for (const [table, rows] of Object.entries({ teams: 1, athletes: 22, guardians: 22, guardianships: 22, roster_entries: 22 }))
      expect(await countRows(organisation.id, table), table).toBe(rows);
    const [lowri] = await maintenance()`select given_name, family_name, number, date_of_birth::text as born, sex, dominant_leg from athletes where number = 'MB-1001' and organisation_id = ${organisation.id}`;
    expect(lowri).toEqual({ given_name: "Lowri", family_name: "Inchmere", number: "MB-1001", born: "2013-08-25", sex: "female", dominant_leg: "left" });
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
