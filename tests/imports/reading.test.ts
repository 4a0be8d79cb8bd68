import fc from "fast-check";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { detectDialect } from "~/features/imports/reading/detect-dialect";
import { detectText, detectTextOfStream } from "~/features/imports/reading/detect-text";
import { readingLimits } from "~/features/imports/reading/limits";
import { readRows } from "~/features/imports/reading/read-rows";
import { FileRefusal } from "~/features/imports/refusal";
import { chunked, collect, dataRows, encode, isWindows1252, readBytes, readSample } from "./reading.helpers";

const text = (content: string) => new TextEncoder().encode(content);
const refusalOf = async (work: Promise<unknown>) => {
  const error = await work.then(
    () => undefined,
    (thrown: unknown) => thrown,
  );
  if (!(error instanceof FileRefusal)) throw new Error(`Expected a refusal, got ${String(error)}`);
  return error;
};
const readCells = async (content: string, size?: number) =>
  dataRows((await readBytes(text(content), { chunkSize: size })).rows).map((row) => row.cells);

describe("the sample files", () => {
  it("reads the plain roster", async () => {
    const { detected, dialect, rows } = await readSample("roster/samples/roster-plain.csv");
    expect(detected).toMatchObject({ encoding: "utf-8", bom: false, confidence: "certain" });
    expect(dialect).toMatchObject({
      delimiter: ",",
      newline: "\r\n",
      separatorLine: false,
      titleLines: [],
      headerLine: 1,
      confidence: "certain",
    });
    expect(rows).toHaveLength(23);
    expect(dataRows(rows)).toHaveLength(22);
    expect(dataRows(rows)[12]).toMatchObject({ lineNumber: 14, cells: expect.arrayContaining(["Žižka"]) });
  });

  it("reads the spreadsheet's roster: sep= line, semicolons, Windows-1252", async () => {
    const { detected, dialect, rows } = await readSample("roster/samples/roster-excel-semicolon-cp1252.csv");
    expect(detected).toMatchObject({ encoding: "windows-1252", bom: false, confidence: "unsure" });
    expect(dialect).toMatchObject({ delimiter: ";", separatorLine: true, headerLine: 2, titleLines: [] });
    expect(dataRows(rows)).toHaveLength(18);
    expect(dataRows(rows)[13]?.cells).toEqual([
      "2014",
      "Nuñez, Zeb",
      "19.04.2010",
      "m",
      "Boys U17 Handball",
      "eltern2014@example.org",
    ]);
  });

  it("reads the roster with errors: byte order mark, every row kept for judging", async () => {
    const { detected, dialect, rows } = await readSample("roster/samples/roster-with-errors.csv");
    expect(detected).toMatchObject({ encoding: "utf-8", bom: true, confidence: "certain" });
    expect(dialect.header[0]).toBe("Student ID");
    expect(dataRows(rows).map((row) => row.lineNumber)).toEqual([...Array(16).keys()].map((n) => n + 2));
    expect(dataRows(rows)[5]?.cells[2]).toBe("Þórsdóttir");
  });

  it("reads both exposure files", async () => {
    const byAthlete = await readSample("exposure/samples/exposure-by-athlete.csv");
    expect(dataRows(byAthlete.rows)).toHaveLength(454);
    expect(byAthlete.dialect.delimiter).toBe(",");
    const byHeadcount = await readSample("exposure/samples/exposure-by-headcount.csv");
    expect(dataRows(byHeadcount.rows)).toHaveLength(30);
    expect(byHeadcount.dialect.delimiter).toBe(";");
    expect(dataRows(byHeadcount.rows)[8]?.cells).toEqual([
      "27/09/2026",
      "Boys U17 Handball",
      "Match",
      "14",
      "80,0",
    ]);
  });
});

describe("a table written in any dialect comes back identical", () => {
  const nasty = fc.constantFrom(
    '"',
    '""',
    ",",
    ";",
    "\t",
    "|",
    "\n",
    "\r\n",
    "\r",
    " ",
    "'",
    "=1+1",
    "é",
    "ñ",
    "€",
  );
  const cell = fc.array(
    fc.oneof({ weight: 2, arbitrary: nasty }, fc.string({ unit: "grapheme", maxLength: 6 })),
    {
      maxLength: 4,
    },
  );
  const table = fc.integer({ min: 2, max: 6 }).chain((width) =>
    fc.array(
      fc.array(
        cell.map((parts) => parts.join("").replaceAll("\0", "")),
        { minLength: width, maxLength: width },
      ),
      { minLength: 1, maxLength: 12 },
    ),
  );

  it("over content, encoding, delimiter, line break, quoting and chunk size", async () => {
    await fc.assert(
      fc.asyncProperty(
        table,
        fc.constantFrom("utf-8", "utf-16le", "utf-16be", "windows-1252"),
        fc.boolean(),
        fc.constantFrom(",", ";", "\t", "|"),
        fc.constantFrom("\r\n", "\n", "\r"),
        fc.boolean(),
        fc.integer({ min: 1, max: 50 }),
        async (content, encoding, bom, delimiter, newline, quotes, chunkSize) => {
          const rows = content.map((row) => [`x${row[0]}`, ...row.slice(1)]);
          const header = rows[0]?.map((_, index) => `Heading ${"abcdef"[index]}`) ?? [];
          const written = Papa.unparse([header, ...rows], { delimiter, newline, quotes });
          fc.pre(encoding !== "windows-1252" || isWindows1252(written));
          // A lone surrogate cannot be written in any encoding.
          fc.pre(!/\p{Surrogate}/u.test(written));
          const marked = bom || encoding.startsWith("utf-16");
          const bytes = encode(written, encoding, marked);
          const read = await readBytes(bytes, {
            encoding,
            delimiter,
            chunkSize,
            isHeaderWord: (c) => header.includes(c),
          });
          expect(read.dialect.header).toEqual(header);
          expect(dataRows(read.rows).map((row) => row.cells)).toEqual(rows);
          if (marked && encoding !== "windows-1252") expect(read.detected.encoding).toBe(encoding);
        },
      ),
      { numRuns: 400 },
    );
  });

  it("finds the delimiter by itself for ordinary tables", async () => {
    const word = fc.stringMatching(/^[A-Za-zéñ][A-Za-zéñ .']{0,10}$/);
    await fc.assert(
      fc.asyncProperty(
        fc
          .integer({ min: 2, max: 6 })
          .chain((width) =>
            fc.array(fc.array(word, { minLength: width, maxLength: width }), { minLength: 2, maxLength: 20 }),
          ),
        fc.constantFrom(",", ";", "\t", "|"),
        fc.constantFrom("\r\n", "\n", "\r"),
        async (rows, delimiter, newline) => {
          const written = Papa.unparse(rows, { delimiter, newline });
          const dialect = detectDialect(written);
          expect(dialect.delimiter).toBe(delimiter);
          expect(dialect.newline).toBe(newline);
        },
      ),
    );
  });

  it("numbers lines as an editor does, with line breaks inside cells", async () => {
    const { rows } = await readBytes(text('a,b\r\n1,"x\r\ny\nz"\r\n\r\n2,w\r\n'));
    expect(rows.map((row) => row.lineNumber)).toEqual([1, 2, 6]);
    expect(dataRows(rows)[0]?.cells).toEqual(["1", "x\r\ny\nz"]);
  });
});

describe("the awkward corners of the format", () => {
  it.each([
    ["comma in quotes", 'a,b\n1,"x, y"\n', [["1", "x, y"]]],
    ["doubled quotes", 'a,b\n1,"ha ""ha"" ha"\n', [["1", 'ha "ha" ha']]],
    [
      "quotes and line breaks",
      'a,b\n1,"ha \n""ha"" \nha"\n3,4\n',
      [
        ["1", 'ha \n"ha" \nha'],
        ["3", "4"],
      ],
    ],
    [
      "an empty quoted cell",
      'a,b\n1,""\n"",2\n',
      [
        ["1", ""],
        ["", "2"],
      ],
    ],
    [
      "an object in a cell",
      'key,val\n1,"{""type"": ""Point"", ""at"": [102.0, 0.5]}"\n',
      [["1", '{"type": "Point", "at": [102.0, 0.5]}']],
    ],
    ["no line break at the end", "a,b\n1,2", [["1", "2"]]],
    [
      "only carriage returns",
      "a,b\r1,2\r3,4\r",
      [
        ["1", "2"],
        ["3", "4"],
      ],
    ],
    [
      "mixed line breaks",
      "a,b\r\n1,2\n3,4\r5,6",
      [
        ["1", "2"],
        ["3", "4"],
        ["5", "6"],
      ],
    ],
    ["blank rows and rows of delimiters", "a,b\n\n,\n1,2\n  ,\n", [["1", "2"]]],
    ["an inch mark in a plain cell", 'a,b\n5" tape,2\n', [['5" tape', "2"]]],
    ["a space after the closing quote", 'a,b\n"x" ,2\n', [["x", "2"]]],
    ["leading zeros and long numbers", "a,b\n007,12345678901234567890\n", [["007", "12345678901234567890"]]],
    ["formula characters as they are", "a,b\n=1+1,@x\n", [["=1+1", "@x"]]],
  ])("%s, whatever the chunk size", async (_, content, rows) => {
    for (const size of [1, 2, 3, 1000]) expect(await readCells(content, size)).toEqual(rows);
  });

  it("passes over title lines and keeps them", async () => {
    const dialect = detectDialect(
      "Otterwick Secondary School\nRoster, autumn 2026\n\nNumber,Name,Born\n1,Lowri Ashgrove,2011-01-20\n2,Tam Vexley,2011-02-20\n",
    );
    expect(dialect).toMatchObject({
      delimiter: ",",
      headerLine: 4,
      titleLines: ["Otterwick Secondary School", "Roster, autumn 2026"],
      header: ["Number", "Name", "Born"],
    });
  });

  it("leaves totals out with a note, but no person called Sum", async () => {
    const { rows } = await readBytes(
      text("Name,Given,Minutes\nSum,Li,2011-02-01\nAshgrove,Lowri,80\nTotal,,160\nSumme:,,\n"),
    );
    expect(rows.map((row) => [row.lineNumber, row.kind])).toEqual([
      [1, "header"],
      [2, "row"],
      [3, "row"],
      [4, "skipped"],
      [5, "skipped"],
    ]);
  });

  it("pads short rows, names long ones, ignores empty cells at the end", async () => {
    const { rows } = await readBytes(text("a,b,c\n1,2\n1,2,3,4\n1,2,3,,\n"));
    expect(rows.slice(1)).toMatchObject([
      { kind: "row", cells: ["1", "2", ""], padded: 1 },
      {
        kind: "problem",
        code: "too-many-cells",
        lineNumber: 3,
        reason: "Line 3 has 4 cells, the header has 3.",
      },
      { kind: "row", cells: ["1", "2", "3"], padded: 0 },
    ]);
  });

  it("keeps a column without a heading out of the way", async () => {
    const { rows } = await readBytes(text("a,b,\n1,2,note\n3,4,\n"));
    expect(dataRows(rows).map((row) => row.cells)).toEqual([
      ["1", "2", "note"],
      ["3", "4", ""],
    ]);
  });

  it("names a quotation mark inside a quoted cell and reads on", async () => {
    const { rows } = await readBytes(text('a,b\n"Lowri "Lo" Ashgrove",2\n3,4\n'));
    expect(rows.slice(1)).toMatchObject([
      { kind: "problem", code: "stray-quote", lineNumber: 2 },
      { kind: "row", cells: ["3", "4"] },
    ]);
  });

  it("takes the sep= line over what the rows look like, and a person's choice over both", () => {
    const content = "sep=;\nNr;Name\n1;Ashgrove, Lowri\n2;Vexley, Tam\n";
    expect(detectDialect(content)).toMatchObject({
      delimiter: ";",
      separatorLine: true,
      confidence: "certain",
    });
    expect(detectDialect(content, { delimiter: "," }).delimiter).toBe(",");
    expect(detectDialect("a,b\n1,2\n3,4\n", { headerLine: 2 }).header).toEqual(["1", "2"]);
  });
});

describe("encodings", () => {
  it("finds UTF-16 with and without a mark, both ways", () => {
    const content = "number,name\r\n1,Lowri Ashgrove\r\n";
    for (const encoding of ["utf-16le", "utf-16be"] as const) {
      expect(detectText(encode(content, encoding, true))).toMatchObject({ encoding, bom: true });
      expect(detectText(encode(content, encoding))).toMatchObject({
        encoding,
        bom: false,
        confidence: "unsure",
      });
    }
  });

  it("sees the one accented byte far below the head", async () => {
    const bytes = encode(`number,name\n${"1,Ashgrove\n".repeat(20_000)}2,Nuñez\n`, "windows-1252");
    expect(detectText(bytes.slice(0, 65_536)).encoding).toBe("utf-8");
    expect((await detectTextOfStream(chunked(bytes, 65_536))).encoding).toBe("windows-1252");
  });

  it("refuses bytes that the chosen encoding does not know, and says where", async () => {
    const bytes = encode("number,name\n1,Ashgrove\n2,Nuñez\n3,Vexley\n", "windows-1252");
    const refusal = await refusalOf(readBytes(bytes, { encoding: "utf-8", chunkSize: 12 }));
    expect(refusal).toMatchObject({ code: "wrong-encoding" });
    expect(refusal.mend).toContain("another encoding");
  });

  it("reads the typographic range of Windows-1252, whatever the chunk size", async () => {
    for (const chunkSize of [1, 7, 1000]) {
      const { rows } = await readBytes(encode("a,b\nŽižka – “Š” €,D’Arcy\n", "windows-1252"), { chunkSize });
      expect(dataRows(rows)[0]?.cells).toEqual(["Žižka – “Š” €", "D’Arcy"]);
    }
  });
});

describe("what is refused as a whole, each with a sentence and a mend", () => {
  it.each<[string, Uint8Array, string, RegExp]>([
    ["nothing at all", new Uint8Array(), "empty", /empty/],
    ["only blanks", text(" \r\n\r\n"), "empty", /empty/],
    ["only a byte order mark", new Uint8Array([0xef, 0xbb, 0xbf]), "empty", /empty/],
    ["a header alone", text("number,name\r\n"), "header-only", /nothing below/],
    ["a header and totals", text("number,name\r\nTotal,0\r\n"), "header-only", /nothing below/],
    ["a workbook", new Uint8Array([0x50, 0x4b, 3, 4, 20, 0, 6, 0]), "workbook", /not a CSV/],
    ["a PDF", text("%PDF-1.7\n"), "binary", /PDF/],
    ["zero bytes", new Uint8Array([97, 44, 98, 10, 0, 1, 2, 3, 0, 255]), "binary", /not text/],
    ["an open quotation mark", text('a,b\n1,2\n3,"x\n4,5\n'), "unterminated-quote", /line 3/],
    ["a cell too long", text(`a,b\n1,${"x".repeat(32_768)}\n`), "cell-too-long", /line 2.*32,767/],
    ["a long quoted cell", text(`a,b\n1,"${"x".repeat(33_000)}"\n`), "cell-too-long", /line 2/],
    ["a row too long", text(`a,b\n${`${"x".repeat(30_000)},`.repeat(9)}\n`), "row-too-long", /line 2/i],
    ["too many columns", text(`${"a,".repeat(301)}\n1\n`), "too-many-columns", /300/],
  ])("%s", async (_, bytes, code, reason) => {
    const refusal = await refusalOf(readBytes(bytes));
    expect(refusal.code).toBe(code);
    expect(refusal.reason).toMatch(reason);
    expect(refusal.mend).toMatch(/^[A-Z].*\.$/);
  });

  it("more rows than the limit", async () => {
    const refusal = await refusalOf(
      readBytes(text("a,b\n1,2\n3,4\n5,6\n"), { limits: { ...readingLimits, rows: 2 } }),
    );
    expect(refusal).toMatchObject({ code: "too-many-rows", lineNumber: 4 });
  });

  it("50 MB behind one open quotation mark, early and without keeping it", async () => {
    let given = 0;
    async function* hostile() {
      yield 'a,b\n1,"';
      for (; given < 50; given += 1) yield "x\n".repeat(512 * 1024);
    }
    const refusal = await refusalOf(collect(readRows(hostile(), { delimiter: ",", headerLine: 1 })));
    expect(refusal).toMatchObject({ code: "unterminated-quote", lineNumber: 2 });
    expect(given).toBeLessThan(2);
  });

  it("50 MB of bytes, before the end", async () => {
    const block = text("1,2\n".repeat(256 * 1024));
    let given = 0;
    async function* large() {
      yield text("a,b\n");
      for (; given < 60; given += 1) yield block;
    }
    const { decodeStream } = await import("~/features/imports/reading/decode-stream");
    const refusal = await refusalOf(
      (async () => {
        for await (const _ of decodeStream(large(), "utf-8")) void _;
      })(),
    );
    expect(refusal.code).toBe("too-many-bytes");
    expect(given).toBeLessThan(42);
  });
});

describe("a file larger than its head", () => {
  it.each(["utf-8", "utf-16le", "utf-16be", "windows-1252"] as const)(
    "is read whole in %s",
    async (encoding) => {
      const row = (index: number) => `${index},"Nuñez, ""Zeb"" é\r\nsecond line",Žižka\r\n`;
      const content = `Marram Bay Athletic\r\nnumber,name,other\r\n${Array.from({ length: 5000 }, (_, index) => row(index)).join("")}`;
      const { dialect, rows } = await readBytes(encode(content, encoding, encoding.startsWith("utf-16")), {
        chunkSize: 4097,
      });
      expect(dialect).toMatchObject({ delimiter: ",", headerLine: 2, newline: "\r\n" });
      const read = dataRows(rows);
      expect(read).toHaveLength(5000);
      expect(read[4999]).toMatchObject({
        lineNumber: 10_001,
        cells: ["4999", 'Nuñez, "Zeb" é\r\nsecond line', "Žižka"],
      });
    },
  );
});

describe("memory", () => {
  it("stays flat over 150,000 rows", async () => {
    const block = "2026-09-07,17:30,Girls U15 Soccer,training,MB-1001,75,artificial turf\r\n".repeat(1000);
    async function* large() {
      yield "date,start,team,kind,number,minutes,surface\r\n";
      for (let i = 0; i < 150; i += 1) yield block;
    }
    let count = 0;
    let most = 0;
    const before = process.memoryUsage().heapUsed;
    for await (const _ of readRows(large(), { delimiter: ",", headerLine: 1 })) {
      count += 1;
      if (count % 10_000 === 0) most = Math.max(most, process.memoryUsage().heapUsed - before);
    }
    expect(count).toBe(150_001);
    expect(most).toBeLessThan(120 * 1024 * 1024);
  });
});
