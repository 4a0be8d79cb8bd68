import { readFile } from "node:fs/promises";
import { describe, expect, it } from "vitest";
import { detectDayOrder, type KnownDayOrder } from "~/features/imports/values/days";
import { exposureColumns } from "~imports/exposure/columns";
import {
  type AthleteExposure,
  detectExposureShape,
  type ExposureOptions,
  exposureRowSchema,
  findMissingExposureColumns,
  isExposureHeading,
  mapExposureHeaders,
  parseExposureRow,
} from "~imports/exposure/definition";
import { findDuplicatesInFile } from "~imports/exposure/duplicates";
import { dataRows, readBytes, readSample } from "./reading.helpers";

type Read = Awaited<ReturnType<typeof readSample>>;

function judge(read: Read) {
  const headers = mapExposureHeaders(read.rows[0]?.cells ?? []);
  const rows = dataRows(read.rows);
  const order = detectDayOrder(rows.map(({ cells }) => cells[headers.mapping.day ?? -1] ?? ""));
  const dayOrder: KnownDayOrder | undefined = order === "ambiguous" || order === "mixed" ? undefined : order;
  const results = rows.map(({ lineNumber, cells }) => ({
    lineNumber,
    result: parseExposureRow(cells, headers.mapping, { dayOrder }),
  }));
  return {
    headers,
    order,
    accepted: results.flatMap(({ lineNumber, result }) =>
      result.ok ? [{ lineNumber, value: result.value }] : [],
    ),
    rejected: results.flatMap(({ lineNumber, result }) =>
      result.ok ? [] : result.rejected.map((rejection) => ({ lineNumber, ...rejection })),
    ),
    warnings: results.flatMap(({ result }) => result.warnings),
  };
}

const parse = (headers: string[], cells: string[], options?: ExposureOptions) =>
  parseExposureRow(cells, mapExposureHeaders(headers).mapping, options);

describe("exposure by athlete", () => {
  it("is importable whole: 454 participations of 22 athletes in 24 sessions", async () => {
    const judged = judge(
      await readSample("exposure/samples/exposure-by-athlete.csv", { isHeaderWord: isExposureHeading }),
    );
    expect(judged.headers.unmapped).toEqual([]);
    expect(detectExposureShape(judged.headers.mapping)).toBe("by-athlete");
    expect(judged.order).toBe("iso");
    expect(judged.rejected).toEqual([]);
    expect(judged.warnings).toEqual([]);
    expect(judged.accepted).toHaveLength(454);
    expect(findDuplicatesInFile(judged.accepted)).toEqual([]);
    const values = judged.accepted
      .map(({ value }) => value)
      .filter((value): value is AthleteExposure => value.shape === "by-athlete");
    expect(new Set(values.map(({ athlete }) => athlete.number)).size).toBe(22);
    expect(new Set(values.map(({ day, start }) => `${day} ${start}`)).size).toBe(24);
    // Counted apart from this program: 153 x 75 + 149 x 90 + 82 x 70 + 11 x 62 + 18 x 50 + 18 x 35 + 23 x 20.
    expect(values.reduce((sum, { minutes }) => sum + minutes, 0)).toBe(33_297);
    expect(values[0]).toEqual({
      shape: "by-athlete",
      day: "2026-09-07",
      start: "17:30",
      teamName: "Girls U15 Soccer",
      kind: "training",
      athlete: { number: "MB-1001" },
      minutes: 75,
      presence: "took_part",
      surface: "artificial_turf",
    });
  });
});

describe("exposure by headcount", () => {
  it("names two rows and keeps 28", async () => {
    const judged = judge(
      await readSample("exposure/samples/exposure-by-headcount.csv", { isHeaderWord: isExposureHeading }),
    );
    expect(judged.headers.mapping).toEqual({ day: 0, teamName: 1, kind: 2, players: 3, minutes: 4 });
    expect(detectExposureShape(judged.headers.mapping)).toBe("by-headcount");
    expect(judged.order).toBe("day-first");
    expect(judged.rejected).toEqual([
      {
        lineNumber: 13,
        column: "Players",
        cell: "fourteen",
        code: "players.not-a-number",
        reason: "“fourteen” is not a number.",
        mend: "Write 14.",
      },
      {
        lineNumber: 16,
        column: "Date",
        cell: "31/11/2026",
        code: "day.not-in-calendar",
        reason: "“31/11/2026” (read day first) is not a day: November 2026 has 30 days.",
        mend: "Correct the day or the month.",
      },
    ]);
    expect(judged.accepted).toHaveLength(28);
    expect(judged.warnings).toEqual([]);
    expect(findDuplicatesInFile(judged.accepted)).toEqual([]);
    const at = (line: number) => judged.accepted.find(({ lineNumber }) => lineNumber === line)?.value;
    expect(at(6)).toEqual({
      shape: "by-headcount",
      day: "2026-09-17",
      teamName: "Boys U17 Handball",
      kind: "training",
      players: 15,
      minutes: 80,
    });
    expect(at(10)).toMatchObject({ day: "2026-09-27", kind: "match", players: 14, minutes: 80 });
  });
});

describe("shapes", () => {
  it("are told by the columns, and doubt is said", () => {
    const shape = (...headers: string[]) => detectExposureShape(mapExposureHeaders(headers).mapping);
    expect(shape("Datum", "Mannschaft", "Art", "Vorname", "Nachname", "Dauer")).toBe("by-athlete");
    expect(shape("Datum", "Mannschaft", "Art", "Anzahl", "Dauer")).toBe("by-headcount");
    expect(shape("Date", "Team", "Kind", "Number", "Players", "Minutes")).toBeUndefined();
    expect(shape("Date", "Team", "Kind", "Minutes")).toBeUndefined();
    const missing = (headers: string[], options?: ExposureOptions) =>
      findMissingExposureColumns(mapExposureHeaders(headers).mapping, options);
    expect(missing(["Date", "Team", "Kind", "Number", "Players", "Minutes"])).toEqual([
      "Map either the athletes or the number of players, not both: leave one of them out.",
    ]);
    expect(missing([])).toHaveLength(5);
    expect(missing(["Date", "Kind", "Players", "Minutes"], { teamName: "A" })).toEqual([]);
  });

  it("no alias belongs to two columns", () => {
    const headings = exposureColumns.flatMap(({ key, label, aliases }) =>
      [label, ...aliases].map((name) => ({ key, name })),
    );
    for (const { key, name } of headings) {
      expect([name, mapExposureHeaders([name]).mapped.map((mapped) => mapped.key)]).toEqual([name, [key]]);
    }
  });
});

describe("rows", () => {
  const headers = ["Date", "Team", "Kind", "Number", "Minutes", "Presence"];
  const day = ["2026-09-07", "A", "training", "1"];

  it.each([
    ["75", "", 75, "took_part"],
    ["75", "took part", 75, "took_part"],
    ["0", "", 0, "present_only"],
    ["", "absent", 0, "absent"],
    ["0", "present only", 0, "present_only"],
  ])("minutes “%s” and presence “%s” are %i minutes, %s", (minutes, presence, expected, state) => {
    expect(parse(headers, [...day, minutes, presence])).toMatchObject({
      ok: true,
      value: { minutes: expected, presence: state },
    });
  });

  it.each([
    ["75", "absent", "presence.contradiction"],
    ["0", "took part", "presence.contradiction"],
    ["", "", "minutes.missing"],
    ["", "took part", "minutes.missing"],
    ["75", "present", "presence.unknown"],
    ["-5", "", "minutes.negative"],
  ])("minutes “%s” and presence “%s” are rejected: %s", (minutes, presence, code) => {
    expect(parse(headers, [...day, minutes, presence])).toMatchObject({ ok: false, rejected: [{ code }] });
  });

  it("says that 0 minutes are no exposure", () => {
    expect(parse(headers, [...day, "0", ""]).warnings).toHaveLength(1);
  });

  it("takes the start from behind the day where there is no column for it", () => {
    const columns = ["Date", "Team", "Kind", "Players", "Minutes"];
    expect(parse(columns, ["2026-09-07 17:30", "A", "training", "14", "80"])).toMatchObject({
      value: { day: "2026-09-07", start: "17:30" },
      warnings: [],
    });
    expect(parse(columns, ["2026-09-07", "A", "training", "14", "80"])).not.toHaveProperty("value.start");
    expect(parse([...columns, "Start"], ["2026-09-07", "A", "training", "14", "80", ""])).toMatchObject({
      value: { start: null },
    });
  });

  it("finds the athlete by name where there is no number", () => {
    const columns = ["Date", "Team", "Kind", "Name", "DOB", "Minutes"];
    expect(
      parse(columns, ["2026-09-07", "A", "training", "Longreach, Tam", "2011-06-25", "80"]),
    ).toMatchObject({
      value: { athlete: { givenName: "Tam", familyName: "Longreach", dateOfBirth: "2011-06-25" } },
    });
    expect(parse(columns, ["2026-09-07", "A", "training", "", "", "80"])).toMatchObject({
      rejected: [{ code: "athlete.missing" }],
    });
    expect(parse(columns, ["2026-09-07", "A", "training", "Tam Longreach", "", "80"])).toMatchObject({
      rejected: [{ code: "name.order" }],
    });
  });

  it("takes the chosen team where the file names none", () => {
    const columns = ["Date", "Kind", "Players", "Minutes"];
    const cells = ["2026-09-07", "match", "14", "60"];
    expect(parse(columns, cells, { teamName: "Boys U17 Handball" })).toMatchObject({
      value: { teamName: "Boys U17 Handball" },
    });
    expect(parse(columns, cells)).toMatchObject({
      rejected: [{ code: "teamName.missing", reason: "The team is missing." }],
    });
  });

  it("survive the way through JSON", () => {
    const result = parse(headers, [...day, "75", ""]);
    expect(result.ok && exposureRowSchema.parse(JSON.parse(JSON.stringify(result.value)))).toEqual(
      result.ok && result.value,
    );
  });
});

describe("duplicates in a file", () => {
  const row = (lineNumber: number, change: Partial<AthleteExposure> = {}) => ({
    lineNumber,
    value: {
      shape: "by-athlete" as const,
      day: "2026-09-07",
      teamName: "A",
      kind: "training" as const,
      athlete: { number: "1" },
      minutes: 75,
      presence: "took_part" as const,
      ...change,
    },
  });
  const codes = (
    ...rows: Parameters<typeof findDuplicatesInFile>[0] extends Iterable<infer Row> ? Row[] : never
  ) =>
    findDuplicatesInFile(rows).map((finding) => [
      finding.lineNumber,
      finding.ofLine,
      finding.outcome === "rejected" ? finding.rejection.code : finding.outcome,
    ]);

  it("names a repeated row and a contradicting one", () => {
    expect(codes(row(2), row(3), row(4, { minutes: 60 }))).toEqual([
      [3, 2, "duplicate.same-row"],
      [4, 2, "duplicate.contradiction"],
    ]);
  });

  it("lets another start, kind, team, day or athlete be another row", () => {
    expect(
      codes(
        row(2),
        row(3, { start: "18:00" }),
        row(4, { kind: "match" }),
        row(5, { teamName: "B" }),
        row(6, { day: "2026-09-08" }),
        row(7, { athlete: { number: "01" } }),
        row(8, { athlete: { givenName: "Tam", familyName: "Longreach" } }),
        row(9, { athlete: { givenName: "Tam", familyName: "Longreach", dateOfBirth: "2011-06-25" } }),
      ),
    ).toEqual([]);
  });

  it("names a session that was counted twice", () => {
    const counted = (lineNumber: number, players: number) => ({
      lineNumber,
      value: {
        shape: "by-headcount" as const,
        day: "2026-09-07",
        teamName: "A",
        kind: "match" as const,
        players,
        minutes: 60,
      },
    });
    expect(codes(counted(2, 14), counted(3, 13))).toEqual([[3, 2, "duplicate.contradiction"]]);
  });
});

describe("the templates", () => {
  it.each([
    ["template.csv", "by-athlete"],
    ["template-by-headcount.csv", "by-headcount"],
  ])("%s is read back whole as %s", async (name, shape) => {
    const bytes = await readFile(new URL(`../../imports/exposure/${name}`, import.meta.url));
    const judged = judge(await readBytes(new Uint8Array(bytes)));
    expect(judged.headers.unmapped).toEqual([]);
    expect(judged.rejected).toEqual([]);
    expect(judged.accepted.map(({ value }) => value.shape)).toEqual([shape]);
  });
});
