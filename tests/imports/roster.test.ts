import { readFile } from "node:fs/promises";
import { describe, expect, it } from "vitest";
import { DayOrderDetector, type KnownDayOrder } from "~/features/imports/values/days";
import type { NameOrder } from "~/features/imports/values/names";
import { needsNameOrder } from "~/features/imports/values/names";
import { rosterColumns } from "~imports/roster/columns";
import {
  findMissingRosterColumns,
  isRosterHeading,
  mapRosterHeaders,
  parseRosterRow,
  type RosterRow,
  rosterDayColumns,
  rosterRowSchema,
} from "~imports/roster/definition";
import { findDuplicatesInFile } from "~imports/roster/duplicates";
import { dataRows, readBytes, readSample } from "./reading.helpers";

type Read = Awaited<ReturnType<typeof readSample>>;

/** Everything an import does before it looks at the database. */
function judge(read: Read, answers: { dayOrder?: KnownDayOrder; nameOrder?: NameOrder } = {}) {
  const header = read.rows.find((row) => row.kind === "header")?.cells ?? [];
  const headers = mapRosterHeaders(header);
  const detector = new DayOrderDetector();
  for (const { cells } of dataRows(read.rows)) {
    for (const key of rosterDayColumns) detector.add(cells[headers.mapping[key] ?? -1] ?? "");
  }
  const { order } = detector;
  const dayOrder = answers.dayOrder ?? (order === "ambiguous" || order === "mixed" ? undefined : order);
  const results = dataRows(read.rows).map(({ lineNumber, cells }) => ({
    lineNumber,
    result: parseRosterRow(cells, headers.mapping, { dayOrder, nameOrder: answers.nameOrder }),
  }));
  const accepted = results.flatMap(({ lineNumber, result }) =>
    result.ok ? [{ lineNumber, value: result.value }] : [],
  );
  const duplicates = findDuplicatesInFile(accepted);
  const rejected = [
    ...results.flatMap(({ lineNumber, result }) =>
      result.ok
        ? []
        : result.rejected.map(({ column, code, reason, mend }) => ({
            lineNumber,
            column,
            code,
            reason,
            mend,
          })),
    ),
    ...duplicates.flatMap((finding) => {
      if (finding.outcome !== "rejected") return [];
      const { column, code, reason, mend } = finding.rejection;
      return [{ lineNumber: finding.lineNumber, column, code, reason, mend }];
    }),
  ].sort((a, b) => a.lineNumber - b.lineNumber);
  const out = new Set(rejected.map(({ lineNumber }) => lineNumber));
  return {
    headers,
    order,
    rejected,
    duplicates,
    importable: accepted.filter(({ lineNumber }) => !out.has(lineNumber)),
    warnings: results.flatMap(({ lineNumber, result }) =>
      result.warnings.map(({ warning }) => ({ lineNumber, warning })),
    ),
  };
}

const judgeText = async (text: string, answers?: Parameters<typeof judge>[1]) =>
  judge(await readBytes(new TextEncoder().encode(text), { isHeaderWord: isRosterHeading }), answers);

describe("the plain roster", () => {
  it("is importable whole", async () => {
    const judged = judge(
      await readSample("roster/samples/roster-plain.csv", { isHeaderWord: isRosterHeading }),
    );
    expect(judged.headers.unmapped).toEqual([]);
    expect(judged.headers.problems).toEqual([]);
    expect(judged.headers.mapped).toHaveLength(11);
    expect(judged.order).toBe("iso");
    expect(judged.rejected).toEqual([]);
    expect(judged.warnings).toEqual([]);
    expect(judged.duplicates).toEqual([]);
    expect(judged.importable).toHaveLength(22);
    expect(judged.importable[12]?.value).toEqual({
      number: "MB-1013",
      givenName: "Signe",
      familyName: "Žižka",
      dateOfBirth: "2013-12-08",
      sex: "female",
      teamName: "Girls U15 Soccer",
      dominantLeg: "right",
      guardian: {
        name: "Oona Žižka",
        email: "guardian1013@example.org",
        phone: "+44 1632 960013",
        language: "en",
      },
    });
  });
});

describe("the spreadsheet’s roster", () => {
  it("is importable whole, with lost letters pointed out", async () => {
    const read = await readSample("roster/samples/roster-excel-semicolon-cp1252.csv", {
      isHeaderWord: isRosterHeading,
    });
    const judged = judge(read);
    expect(judged.headers.mapping).toEqual({
      number: 0,
      fullName: 1,
      dateOfBirth: 2,
      sex: 3,
      teamName: 4,
      guardianEmail: 5,
    });
    expect(judged.order).toBe("day-first");
    expect(judged.rejected).toEqual([]);
    expect(judged.importable).toHaveLength(18);
    expect(judged.warnings.map(({ lineNumber }) => lineNumber)).toEqual([4, 7, 19]);
    expect(judged.warnings[0]?.warning).toContain("“?ukaszewska”");
    expect(judged.importable[0]?.value).toEqual({
      number: "2001",
      givenName: "Gethin",
      familyName: "Fennimore",
      dateOfBirth: "2009-08-02",
      sex: "male",
      teamName: "Boys U17 Handball",
      guardian: { email: "eltern2001@example.org" },
    });
  });

  it("needs no question about the order of names, for the commas say it", async () => {
    const { rows } = await readSample("roster/samples/roster-excel-semicolon-cp1252.csv");
    expect(needsNameOrder(dataRows(rows).map((row) => row.cells[1] ?? ""))).toBe(false);
  });
});

describe("the roster with errors", () => {
  it("names five rows and keeps eleven", async () => {
    const judged = judge(
      await readSample("roster/samples/roster-with-errors.csv", { isHeaderWord: isRosterHeading }),
    );
    expect(judged.headers.mapping).toEqual({
      number: 0,
      givenName: 1,
      familyName: 2,
      dateOfBirth: 3,
      sex: 4,
      teamName: 5,
      guardianEmail: 6,
    });
    expect(judged.order).toBe("month-first");
    expect(judged.rejected).toEqual([
      {
        lineNumber: 5,
        column: "Date of birth",
        code: "day.not-in-calendar",
        reason: "“02/30/2010” (read month first) is not a day: February 2010 has 28 days.",
        mend: "Correct the day or the month.",
      },
      {
        lineNumber: 9,
        column: "Guardian’s e-mail",
        code: "email.invalid",
        reason: "“not-an-email” is not an e-mail address.",
        mend: "Correct the address, for example name@example.org, or leave the cell empty.",
      },
      {
        lineNumber: 10,
        column: "Number",
        code: "duplicate.same-row",
        reason: "The row repeats line 6.",
        mend: "Nothing is lost: the first one is imported. Delete this row.",
      },
      {
        lineNumber: 12,
        column: "Given name",
        code: "givenName.missing",
        reason: "The given name is missing.",
        mend: "Fill in the given name.",
      },
      {
        lineNumber: 14,
        column: "Number",
        code: "duplicate.number-taken",
        reason: "Number “OT313” already stands on line 13 for another athlete, Pia D'Arcy-Wray.",
        mend: "Give each athlete an own number. Check line 13 too.",
      },
    ]);
    expect(judged.importable.map(({ lineNumber }) => lineNumber)).toEqual([
      2, 3, 4, 6, 7, 8, 11, 13, 15, 16, 17,
    ]);
    expect(judged.warnings).toEqual([{ lineNumber: 7, warning: "Sex “?” was recorded as not stated." }]);
    expect(judged.importable.find(({ lineNumber }) => lineNumber === 7)?.value.sex).toBe("not_stated");
    expect(judged.duplicates.filter(({ outcome }) => outcome === "doubtful")).toEqual([
      expect.objectContaining({ lineNumber: 13, ofLine: 14 }),
    ]);
  });

  it("keeps both athletes of one name once the day is corrected", async () => {
    const read = await readSample("roster/samples/roster-with-errors.csv");
    const mended = read.rows.map((row) => ({
      ...row,
      cells: row.cells.map((cell) => (cell === "02/30/2010" ? "02/28/2010" : cell)),
    }));
    const longreach = judge({ ...read, rows: mended }).importable.filter(
      ({ value }) => value.familyName === "Longreach",
    );
    expect(longreach.map(({ value }) => [value.givenName, value.number, value.dateOfBirth])).toEqual([
      ["Tam", "OT302", "2011-06-25"],
      ["Tam", "OT304", "2010-02-28"],
    ]);
  });
});

describe("headings", () => {
  it("are found whatever their case, accents and punctuation", () => {
    const { mapping, unmapped } = mapRosterHeaders([
      "APELLIDOS",
      "nombre",
      "Fecha de Nacimiento:",
      "genero",
      "Equipo",
      "Shoe size",
    ]);
    expect(mapping).toEqual({ familyName: 0, givenName: 1, dateOfBirth: 2, sex: 3, teamName: 4 });
    expect(unmapped).toEqual([{ index: 5, header: "Shoe size", ignored: false }]);
  });

  it("take a bare Name beside a given name as the family name", () => {
    expect(mapRosterHeaders(["Name", "Vorname", "Geb."]).mapping).toEqual({
      familyName: 0,
      givenName: 1,
      dateOfBirth: 2,
    });
    expect(mapRosterHeaders(["Name", "Geb."]).mapping).toEqual({ fullName: 0, dateOfBirth: 1 });
  });

  it("one letter off are proposed, not certain", () => {
    const { mapped } = mapRosterHeaders(["Frist name", "Surname", "Date of brith"]);
    expect(mapped.map(({ key, confidence }) => [key, confidence])).toEqual([
      ["givenName", "close"],
      ["familyName", "alias"],
      ["dateOfBirth", "close"],
    ]);
  });

  it("standing twice are named and left to a person", () => {
    const { mapping, problems } = mapRosterHeaders([
      "Number",
      "First",
      "Last",
      "DOB",
      "Parent email",
      "Notes",
      "parent e-mail",
      "Notes",
    ]);
    expect(mapping.guardianEmail).toBeUndefined();
    expect(problems).toEqual([
      {
        code: "two-columns",
        indexes: [4, 6],
        reason: "“Parent email” and “parent e-mail” (columns 5 and 7) could both be “Guardian’s e-mail”.",
        mend: "Choose which of them is “Guardian’s e-mail”.",
      },
      {
        code: "duplicate-header",
        indexes: [5, 7],
        reason: "The heading “Notes” stands over columns 6 and 8.",
        mend: "Map the one that is needed by hand, or give the columns different headings.",
      },
    ]);
  });

  it("remember what was confirmed, also what to leave out", () => {
    const headers = ["Ref", "First", "Last", "Team"];
    const { mapped, unmapped, mapping } = mapRosterHeaders(headers, { ref: "number", team: null });
    expect(mapped[0]).toEqual({ key: "number", index: 0, header: "Ref", confidence: "remembered" });
    expect(mapping.teamName).toBeUndefined();
    expect(unmapped).toEqual([{ index: 3, header: "Team", ignored: true }]);
  });

  it("say what is missing", () => {
    expect(findMissingRosterColumns(mapRosterHeaders(["Team"]).mapping)).toHaveLength(2);
    expect(findMissingRosterColumns(mapRosterHeaders(["First", "Last"]).mapping)).toHaveLength(1);
    expect(findMissingRosterColumns(mapRosterHeaders(["Name", "Nr"]).mapping)).toEqual([]);
  });

  it("no alias belongs to two columns", () => {
    const headings = rosterColumns.flatMap(({ key, label, aliases }) =>
      [label, ...aliases].map((name) => ({ key, name })),
    );
    for (const { key, name } of headings) {
      expect([name, mapRosterHeaders([name]).mapped.map((mapped) => mapped.key)]).toEqual([name, [key]]);
    }
  });
});

describe("rows", () => {
  it("leave out what has no column and give null for an empty cell", () => {
    const { mapping } = mapRosterHeaders(["Number", "First", "Last", "Sex", "Parent phone"]);
    const result = parseRosterRow(["007", "Lowri", "Ashgrove", "", ""], mapping);
    expect(result).toEqual({
      ok: true,
      value: {
        number: "007",
        givenName: "Lowri",
        familyName: "Ashgrove",
        sex: null,
        guardian: { phone: null },
      },
      warnings: [],
    });
    expect(result.ok && rosterRowSchema.parse(JSON.parse(JSON.stringify(result.value)))).toEqual(
      result.ok && result.value,
    );
  });

  it("name everything that is wrong at once", () => {
    const { mapping } = mapRosterHeaders(["First", "Last", "DOB", "Sex", "Parent email"]);
    const result = parseRosterRow(["", "Ashgrove", "2011-13-01", "blue", "x"], mapping);
    expect(result.ok ? [] : result.rejected.map(({ column, cell }) => [column, cell])).toEqual([
      ["Given name", ""],
      ["Date of birth", "2011-13-01"],
      ["Sex", "blue"],
      ["Guardian’s e-mail", "x"],
    ]);
  });

  it("need a number or a date of birth, and no birthday to come", () => {
    const { mapping } = mapRosterHeaders(["Number", "First", "Last", "DOB"]);
    expect(parseRosterRow(["", "Lowri", "Ashgrove", ""], mapping)).toMatchObject({
      rejected: [{ code: "identity.missing" }],
    });
    expect(parseRosterRow(["", "Lowri", "Ashgrove", "2011-01-20"], mapping).ok).toBe(true);
    expect(
      parseRosterRow(["", "Lowri", "Ashgrove", "2027-01-20"], mapping, { latestBirthday: "2026-12-01" }),
    ).toMatchObject({
      rejected: [{ code: "day.future" }],
    });
  });

  it("stop and ask about days that both orders allow, and about names without a comma", async () => {
    const text = "Name;Geboren\nLowri Ashgrove;03.04.2010\nTam Vexley;05.06.2011\n";
    const asked = await judgeText(text);
    expect(asked.order).toBe("ambiguous");
    expect(asked.importable).toEqual([]);
    expect(asked.rejected.map(({ code }) => code)).toEqual([
      "name.order",
      "day.order",
      "name.order",
      "day.order",
    ]);
    const answered = await judgeText(text, { dayOrder: "day-first", nameOrder: "given-first" });
    expect(answered.importable.map(({ value }) => value)).toEqual([
      { givenName: "Lowri", familyName: "Ashgrove", dateOfBirth: "2010-04-03" },
      { givenName: "Tam", familyName: "Vexley", dateOfBirth: "2011-06-05" },
    ]);
  });

  it("keep a language in which no notice is written out of the record, with a warning", () => {
    const { mapping } = mapRosterHeaders(["Number", "First", "Last", "Parent language"]);
    expect(parseRosterRow(["1", "Lowri", "Ashgrove", "German"], mapping)).toEqual({
      ok: true,
      value: { number: "1", givenName: "Lowri", familyName: "Ashgrove" },
      warnings: [
        {
          column: "Guardian’s language",
          cell: "German",
          warning: "Notices are not written in German yet: the guardian’s language is left as it is.",
        },
      ],
    });
  });

  it("store formula characters as they are", () => {
    const { mapping } = mapRosterHeaders(["Number", "First", "Last"]);
    expect(parseRosterRow(["1", '=HYPERLINK("x")', "@Ashgrove"], mapping)).toMatchObject({
      value: { givenName: '=HYPERLINK("x")', familyName: "@Ashgrove" },
    });
  });
});

describe("duplicates in a file", () => {
  const row = (lineNumber: number, value: Partial<RosterRow>) => ({
    lineNumber,
    value: { givenName: "Tam", familyName: "Longreach", ...value },
  });
  const outcomes = (...rows: ReturnType<typeof row>[]) =>
    findDuplicatesInFile(rows).map((finding) => [
      finding.lineNumber,
      finding.ofLine,
      finding.outcome === "rejected"
        ? finding.rejection.code
        : finding.outcome === "same-athlete"
          ? finding.adds
          : finding.outcome,
    ]);

  it("lets two athletes of one name stay two", () => {
    expect(
      outcomes(
        row(2, { number: "1", dateOfBirth: "2011-01-01" }),
        row(3, { number: "2", dateOfBirth: "2010-01-01" }),
      ),
    ).toEqual([]);
    expect(outcomes(row(2, { dateOfBirth: "2011-01-01" }), row(3, { dateOfBirth: "2010-01-01" }))).toEqual(
      [],
    );
  });

  it("points out one name and one birthday under two numbers", () => {
    const dateOfBirth = "2011-01-01";
    expect(outcomes(row(2, { number: "1", dateOfBirth }), row(3, { number: "2", dateOfBirth }))).toEqual([
      [3, 2, "doubtful"],
    ]);
  });

  it("names a repeated row without numbers, and a row that lost its number", () => {
    const dateOfBirth = "2011-01-01";
    expect(outcomes(row(2, { dateOfBirth }), row(3, { dateOfBirth, familyName: "LONGREACH" }))).toEqual([
      [3, 2, "duplicate.same-row"],
    ]);
    expect(outcomes(row(2, { number: "1", dateOfBirth }), row(3, { number: null, dateOfBirth }))).toEqual([
      [3, 2, "duplicate.one-without-number"],
    ]);
    expect(outcomes(row(2, { dateOfBirth }), row(3, { number: "1", dateOfBirth }))).toEqual([
      [3, 2, "duplicate.one-without-number"],
    ]);
  });

  it("takes a second team and a second guardian, but no second birthday or leg", () => {
    const first = row(2, { number: "1", teamName: "A", guardian: { name: "Ylva", email: "a@example.org" } });
    expect(outcomes(first, row(3, { ...first.value, teamName: "B" }))).toEqual([[3, 2, "team"]]);
    expect(
      outcomes(first, row(3, { ...first.value, guardian: { name: "Leif", email: "b@example.org" } })),
    ).toEqual([[3, 2, "guardian"]]);
    expect(
      outcomes(first, row(3, { ...first.value, guardian: { name: "Ylva", email: "b@example.org" } })),
    ).toEqual([[3, 2, "duplicate.contradiction"]]);
    expect(outcomes(first, row(3, { ...first.value, dominantLeg: "left" }))).toEqual([
      [3, 2, "duplicate.contradiction"],
    ]);
    expect(
      outcomes(
        row(2, { number: "1", dateOfBirth: "2011-01-01" }),
        row(3, { number: "1", dateOfBirth: "2010-01-01" }),
      ),
    ).toEqual([
      [3, 2, "duplicate.number-taken"],
      [2, 3, "doubtful"],
    ]);
  });
});

describe("the template", () => {
  it("is read back whole by its own definition", async () => {
    const bytes = await readFile(new URL("../../imports/roster/template.csv", import.meta.url));
    const judged = judge(await readBytes(new Uint8Array(bytes)));
    expect(judged.headers.mapped).toHaveLength(rosterColumns.length - 1);
    expect(judged.rejected).toEqual([]);
    expect(judged.importable).toHaveLength(1);
  });
});
