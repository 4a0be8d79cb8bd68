import { describe, expect, it } from "vitest";
import {
  checkUploadLength,
  importProgress,
  listHistory,
  requestCommit,
  runImportJob,
  upload,
  viewImport,
} from "~/features/imports/imports.server";
import { readingLimits } from "~/features/imports/reading/limits";
import { openReport } from "~/features/imports/report.server";
import { maintenance, makeClub } from "../../harness";
import { answer, countRows, csvFile, importFile, page, uploadAndView } from "./helpers";

const header = "Number,Given name,Family name,Date of birth,Team";

describe("files that are no table", () => {
  const bytes = (...values: number[]) => new Uint8Array([...values, 0, 0, 0, 0, 1, 2, 3]);
  const cases: [string, BlobPart, RegExp][] = [
    ["empty", "", /^The file is empty\. Upload a file with a header row/],
    [
      "a workbook",
      bytes(0x50, 0x4b, 3, 4),
      /^The file is a spreadsheet workbook or a ZIP archive, not a CSV file\. Open it/,
    ],
    ["a picture", bytes(0x89, 0x50, 0x4e, 0x47), /^The file holds a picture, not a table as text\./],
    [
      "zero bytes",
      `${header}\n1,Ta\u0000m,Longreach,2011-01-01,X\n`,
      /^The file holds something that is not text/,
    ],
    ["header only", `${header}\n`, /^The file holds a header row and nothing below it\. Add the rows/],
    [
      "an open quotation mark",
      `${header}\n1,"Tam,Longreach,2011-01-01,X\n2,Una,Vexley,2011-01-01,X\n`,
      /^The quotation mark opened on line 2 is never closed\. Close or delete/,
    ],
    [
      "a row without end",
      `${header}\n${"x".repeat(40_000)},a\n`,
      /^A cell of line 2 is longer than 32,767 characters\./,
    ],
    ["too many columns", `${header}\n${",".repeat(400)}\n`, /^Line 2 has more than 300 columns\./],
  ];

  it.each(cases)("ends in a clear refusal: %s", async (_, content, message) => {
    const { scopes, organisation } = await makeClub();
    const view = await uploadAndView(scopes.lead, "roster", new File([content], "file.csv"));
    expect(view.state).toBe("failed");
    expect(view.failure).toMatch(message);
    expect(await countRows(organisation.id, "import_chunks")).toBe(0);
    expect(await countRows(organisation.id, "import_rows")).toBe(0);
  });

  it("refuses a body that is too large, or of no declared length, before reading it", () => {
    const request = (headers: Record<string, string>) =>
      new Request("http://localhost/", { method: "POST", headers });
    const length = String(readingLimits.bytes * 2);
    expect(() => checkUploadLength(request({ "content-length": length }))).toThrow(/larger than 40 MB/);
    expect(() => checkUploadLength(request({}))).toThrow(/length of the upload is not declared/);
    expect(() => checkUploadLength(request({ "content-length": "1000" }))).not.toThrow();
  });

  it("refuses no file at all beside the field", async () => {
    const { scopes } = await makeClub();
    await expect(upload(scopes.lead, "roster", new File([], ""))).rejects.toMatchObject({
      fields: { file: ["Choose the CSV file to import."] },
    });
  });

  it("lets a wrong reading that a person chose be put right", async () => {
    const { scopes, team } = await makeClub();
    const file = csvFile([header, `1,Tam,Löngreach,2011-04-03,${team.name}`]);
    const view = await uploadAndView(scopes.lead, "roster", file);
    const wrong = await answer(scopes.lead, view.id, { encoding: "utf-16le" });
    expect(wrong.state).toBe("needs_answers");
    const right = await answer(scopes.lead, view.id, { encoding: "utf-8" });
    expect(right.state).toBe("previewed");
    expect(right.counts).toMatchObject({ create: 1 });
  });
});

describe("formula characters", () => {
  it("are stored as they are and escaped in the report", async () => {
    const { scopes, team, organisation } = await makeClub();
    const file = csvFile([
      header,
      `=1+1,Tam,Longreach,2011-04-03,${team.name}`,
      `2,@Una,Vexley,2011-02-30,${team.name}`,
    ]);
    const done = await importFile(scopes.lead, "roster", file);
    const [row] =
      await maintenance()`select number from athletes where organisation_id = ${organisation.id} and family_name = 'Longreach'`;
    expect(row?.number).toBe("=1+1");
    const { stream } = await openReport(scopes.lead, done.id);
    const text = await new Response(stream).text();
    const lines = text.split("\r\n");
    expect(lines[1]).toBe(`2,new,,,,,,,'=1+1,Tam,Longreach,2011-04-03,${team.name}`);
    expect(lines[2]).toMatch(/^3,rejected,Date of birth,2011-02-30,/);
    expect(lines[2]).toContain("'@Una");
    await expect(openReport(scopes.trainer, done.id)).rejects.toMatchObject({ code: "not_found" });
  });
});

describe("a large file", () => {
  const rows = Array.from(
    { length: 9000 },
    (_, index) => `N${index},Given${index},Family${index},2010-01-01,`,
  );

  it("is read and imported by the job, with its progress, and stands in the history", async () => {
    const { scopes, team, organisation, people } = await makeClub();
    const scope = scopes.lead;
    const file = csvFile([header, ...rows.map((row) => row + team.name)], "large.csv");
    const { id } = await upload(scope, "roster", file);
    expect(await importProgress(scope, id)).toMatchObject({ state: "uploaded" });
    const job = { organisationId: organisation.id, importId: id, personId: scope.personId };
    await runImportJob(job);
    expect(await importProgress(scope, id)).toEqual({ state: "previewed", done: 9000, total: 9000 });
    await requestCommit(scope, id);
    expect(await importProgress(scope, id)).toMatchObject({ state: "committing" });
    await runImportJob(job);
    // Given to two workers, it is done once.
    await runImportJob(job);
    expect(await importProgress(scope, id)).toEqual({ state: "committed", done: 9000, total: 9000 });
    expect(await countRows(organisation.id, "athletes")).toBe(9002);
    const history = await listHistory(scope, 1);
    expect(history.rows[0]).toMatchObject({
      fileName: "large.csv",
      state: "committed",
      counts: { create: 9000 },
    });
    expect(history.rows[0]?.by).toBe(people.lead.name);
  }, 120_000);

  it("stops when whoever uploaded it may no longer import", async () => {
    const { scopes, team, organisation } = await makeClub();
    const scope = scopes.trainer;
    const file = csvFile([header, ...rows.map((row) => row + team.name)], "large.csv");
    const { id } = await upload(scope, "roster", file);
    await maintenance()`update memberships set ended_at = now() where organisation_id = ${organisation.id} and person_id = ${scope.personId}`;
    await runImportJob({ organisationId: organisation.id, importId: id, personId: scope.personId });
    const view = await viewImport(scopes.lead, id, page());
    expect(view.state).toBe("failed");
    expect(view.failure).toMatch(/may no longer import/);
  }, 60_000);
});
