import { describe, expect, it } from "vitest";
import { requestCommit, undoImport, viewImport } from "~/features/imports/imports.server";
import { maintenance, makeClub, makeInjury, owner } from "../../harness";
import { commit, countRows, csvFile, importFile, page, snapshot, uploadAndView } from "./helpers";

const header =
  "Number,Given name,Family name,Date of birth,Sex,Team,In the team from,Guardian name,Guardian email,Guardian relation";
const roster = (rows: string[], name = "roster.csv") => csvFile([header, ...rows], name);

async function open() {
  const club = await makeClub();
  const team = club.team.name;
  const rows = [
    `A1,Tam,Longreach,2011-06-25,male,${team},2026-09-01,Ida Longreach,ida@example.org,mother`,
    `A2,Una,Vexley,2012-01-30,female,${team},2026-09-01,Olaf Vexley,olaf@example.org,father`,
  ];
  return { club, scope: club.scopes.lead, id: club.organisation.id, team, rows };
}

const exposure = (team: string, minutes: number) =>
  csvFile(
    [
      "Date,Start,Team,Kind,Athlete number,Minutes",
      `2026-09-07,17:30,${team},training,A1,${minutes}`,
      `2026-09-07,17:30,${team},training,A2,60`,
    ],
    "exposure.csv",
  );

describe("undoing an import", () => {
  it("restores what was there, row for row: made ones gone, changed ones as they were", async () => {
    const { scope, id, team, rows } = await open();
    const empty = await snapshot(id);
    const first = await importFile(scope, "roster", roster(rows));
    const imported = await snapshot(id);
    const second = await importFile(
      scope,
      "roster",
      roster([
        `A1,Tam,Longreach,2011-06-26,male,${team},2026-09-01,Ida Longreach,ida.new@example.org,guardian`,
        `A3,Pia,Hollowell,2011-08-01,female,New Team,2026-09-01,,,`,
      ]),
      {},
    );
    expect(second.counts).toMatchObject({ update: 1, create: 1, teamsMade: 1 });
    expect(await undoImport(scope, second.id)).toEqual([]);
    expect(await snapshot(id)).toEqual(imported);
    expect((await viewImport(scope, second.id, page())).state).toBe("undone");
    // Pressed twice, it stays undone; then the first one can be taken back as well.
    expect(await undoImport(scope, second.id)).toEqual([]);
    expect(await undoImport(scope, first.id)).toEqual([]);
    expect(await snapshot(id)).toEqual(empty);
    // What was undone is no longer "imported before".
    expect((await uploadAndView(scope, "roster", roster(rows))).sameFile).toBe(null);
  });

  it("restores sessions and minutes that exposure had changed", async () => {
    const { scope, id, team, rows } = await open();
    await importFile(scope, "roster", roster(rows));
    await importFile(scope, "exposure", exposure(team, 75));
    const before = await snapshot(id);
    const changed = await importFile(scope, "exposure", exposure(team, 70));
    expect(changed.counts).toMatchObject({ update: 1, unchanged: 1 });
    expect(await snapshot(id)).not.toEqual(before);
    expect(await undoImport(scope, changed.id)).toEqual([]);
    expect(await snapshot(id)).toEqual(before);
  });

  it("is refused after an edit, naming the record, and changes nothing", async () => {
    const { scope, id, rows } = await open();
    const done = await importFile(scope, "roster", roster(rows));
    await maintenance()`update athletes set dominant_leg = 'left', version = version + 1 where organisation_id = ${id} and number = 'A2'`;
    const before = await snapshot(id);
    expect(await undoImport(scope, done.id)).toEqual([{ table: "athletes", name: "Una Vexley" }]);
    expect(await snapshot(id)).toEqual(before);
    expect((await viewImport(scope, done.id, page())).state).toBe("committed");
  });

  it("is refused while later exposure or an injury needs an athlete it made, naming them", async () => {
    const { club, scope, id, team, rows } = await open();
    const done = await importFile(scope, "roster", roster(rows));
    const later = await importFile(scope, "exposure", exposure(team, 75));
    expect(await undoImport(scope, done.id)).toEqual([
      { table: "participations", name: "Tam Longreach" },
      { table: "participations", name: "Una Vexley" },
    ]);
    expect(await undoImport(scope, later.id)).toEqual([]);
    const [athlete] =
      await maintenance()`select id from athletes where organisation_id = ${id} and number = 'A1'`;
    await makeInjury(club.staff, { athleteId: String(athlete?.id) });
    const blockers = await undoImport(scope, done.id);
    expect(new Set(blockers.map(({ name }) => name))).toEqual(new Set(["Tam Longreach"]));
    // Who may not see injuries learns that something is in the way, not what.
    const before = await snapshot(id);
    await expect(undoImport(club.scopes.admin, done.id)).rejects.toMatchObject({ code: "conflict" });
    expect(await snapshot(id)).toEqual(before);
  });
});

describe("importing as one transaction", () => {
  it("leaves nothing behind when it fails half-way, says so, and can be tried again", async () => {
    const { scope, id, rows } = await open();
    const view = await uploadAndView(scope, "roster", roster(rows));
    const before = await snapshot(id);
    await owner().unsafe(`
      create function fail_half_way() returns trigger language plpgsql as $$ begin raise exception 'planted'; end $$;
      create trigger fail_half_way before insert on guardianships for each row execute function fail_half_way();`);
    const failed = await commit(scope, view.id);
    expect(failed.state).toBe("previewed");
    expect(failed.failure).toBe("The import stopped half-way, and nothing of it was kept. Try again.");
    expect(await snapshot(id)).toEqual(before);
    expect(await countRows(id, "import_changes")).toBe(0);
    await owner().unsafe("drop trigger fail_half_way on guardianships; drop function fail_half_way()");
    const done = await commit(scope, view.id);
    expect(done.state).toBe("committed");
    expect(await countRows(id, "import_chunks")).toBe(0);
  });

  it("imports once when the button is pressed twice at the same moment", async () => {
    const { scope, id, rows } = await open();
    const view = await uploadAndView(scope, "roster", roster(rows));
    const athletes = await countRows(id, "athletes");
    await Promise.all([requestCommit(scope, view.id), requestCommit(scope, view.id)]);
    expect((await viewImport(scope, view.id, page())).state).toBe("committed");
    expect(await countRows(id, "athletes")).toBe(athletes + 2);
  });

  it("shows the preview anew where two imports of one file meet, and doubles nothing", async () => {
    const { club, scope, id, rows } = await open();
    const one = await uploadAndView(scope, "roster", roster(rows));
    const two = await uploadAndView(club.scopes.admin, "roster", roster(rows));
    const athletes = await countRows(id, "athletes");
    await Promise.all([requestCommit(scope, one.id), requestCommit(club.scopes.admin, two.id)]);
    const views = [await viewImport(scope, one.id, page()), await viewImport(scope, two.id, page())];
    expect(views.map(({ state }) => state).sort()).toEqual(["committed", "previewed"]);
    const waiting = views.find(({ state }) => state === "previewed");
    expect(waiting?.failure).toMatch(/^Somebody changed records after this preview was made/);
    expect(waiting?.counts).toMatchObject({ unchanged: 2, create: 0 });
    expect(await countRows(id, "athletes")).toBe(athletes + 2);
  });
});
