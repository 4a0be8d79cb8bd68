import fc from "fast-check";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { escapeCsvCell, unescapeCsvCell, writeCsv } from "~/platform/csv";

describe("cells of an export", () => {
  it.each([
    ["=1+1", "'=1+1"],
    ["+44 1632 960001", "'+44 1632 960001"],
    ["-2+3", "'-2+3"],
    ["@SUM(A1)", "'@SUM(A1)"],
    ["\t=1", "'\t=1"],
    ["\r=1", "'\r=1"],
    ["'=1", "''=1"],
    ["-5", "-5"],
    ["-5,25", "-5,25"],
    ["'t Hooft", "'t Hooft"],
    ["Ashgrove", "Ashgrove"],
    [-5, "-5"],
    [0, "0"],
    [null, ""],
    [undefined, ""],
    [false, "false"],
  ])("%j is written as %j", (value, written) => {
    expect(escapeCsvCell(value)).toBe(written);
  });

  it("come back as they were", () => {
    const part = fc.constantFrom("'", "=", "+", "-", "@", "\t", "\r", "\n", "1", "a", " ");
    fc.assert(
      fc.property(
        fc.oneof(
          fc.string(),
          fc.array(part).map((parts) => parts.join("")),
        ),
        (text) => {
          const written = escapeCsvCell(text);
          expect(unescapeCsvCell(written)).toBe(text);
          if (!/^-\d+(?:[.,]\d+)?$/u.test(text)) expect(written).not.toMatch(/^[=+\-@\t\r\n]/u);
        },
      ),
      { numRuns: 2000 },
    );
  });
});

describe("files of an export", () => {
  it("are RFC 4180 with CR LF, and a byte order mark where asked", () => {
    expect(
      writeCsv([
        ["a", "b"],
        ['ha "ha"', "x, y"],
        [1.5, null],
      ]),
    ).toBe('a,b\r\n"ha ""ha""","x, y"\r\n1.5,\r\n');
    expect(writeCsv([["a"]], { bom: true })).toBe("\uFEFFa\r\n");
    expect(writeCsv([])).toBe("");
  });

  it("quote what another dialect would split", () => {
    expect(writeCsv([["x;=1+1", "a\tb", "c|d"]])).toBe('"x;=1+1","a\tb","c|d"\r\n');
  });

  it("keep a row whose only cell is empty", () => {
    expect(writeCsv([[""]])).toBe('""\r\n');
    expect(writeCsv([["a"], [null]])).toBe('a\r\n""\r\n');
  });

  it("are read back identical", () => {
    const table = fc.integer({ min: 1, max: 5 }).chain((width) =>
      fc.array(fc.array(fc.string({ unit: "grapheme" }), { minLength: width, maxLength: width }), {
        minLength: 1,
        maxLength: 8,
      }),
    );
    fc.assert(
      fc.property(
        table,
        fc.constantFrom(",", ";", "\t", "|"),
        fc.constantFrom("\r\n", "\n"),
        (rows, delimiter, newline) => {
          const text = writeCsv(rows, { delimiter, newline });
          const read = Papa.parse<string[]>(text.slice(0, -newline.length), { delimiter, newline }).data;
          expect(read.map((row) => row.map(unescapeCsvCell))).toEqual(rows);
        },
      ),
    );
  });
});
