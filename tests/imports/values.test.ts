import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { parseMinutes, parsePlayers } from "~/features/imports/values/amounts";
import {
  parseDominantLeg,
  parseKind,
  parsePresence,
  parseRelation,
  parseSex,
  parseSurface,
} from "~/features/imports/values/coded";
import { parseEmail, parseLanguage, parsePhone } from "~/features/imports/values/contacts";
import { DayOrderDetector, detectDayOrder, parseDayCell } from "~/features/imports/values/days";
import { parseIdentifier } from "~/features/imports/values/identifiers";
import {
  needsNameOrder,
  normaliseName,
  parseNamePart,
  parsePersonName,
} from "~/features/imports/values/names";
import type { Parsed } from "~/features/imports/values/parsed";
import { parseTimeCell } from "~/features/imports/values/times";

/** The value, or the code of the refusal. */
const outcome = <T>(parsed: Parsed<T>) => (parsed.ok ? parsed.value : `refused: ${parsed.code}`);

describe("days", () => {
  it.each([
    ["2011-02-28", undefined, "2011-02-28"],
    ["2011/2/8", undefined, "2011-02-08"],
    ["7 Sep 2026", undefined, "2026-09-07"],
    ["September 7th, 2026", undefined, "2026-09-07"],
    ["7. Dezember 2026", undefined, "2026-12-07"],
    ["Mon 07/09/2026", "day-first", "2026-09-07"],
    ["03/04/2015", "day-first", "2015-04-03"],
    ["03/04/2015", "month-first", "2015-03-04"],
    ["03/03/2015", undefined, "2015-03-03"],
    ["03/04/2015", undefined, "refused: day.order"],
    ["13/04/2015", undefined, "refused: day.order"],
    ["03/04/2015", "iso", "refused: day.order"],
    ["02.08.2009", "day-first", "2009-08-02"],
    ["2026-09-07 00:00:00", undefined, "2026-09-07"],
    ["29/02/2012", "day-first", "2012-02-29"],
    ["29/02/2011", "day-first", "refused: day.not-in-calendar"],
    ["31/11/2026", "day-first", "refused: day.not-in-calendar"],
    ["02/30/2010", "month-first", "refused: day.not-in-calendar"],
    ["2011-00-10", undefined, "refused: day.month"],
    ["14/13/2011", "day-first", "refused: day.month"],
    ["02.08.09", "day-first", "refused: day.short-year"],
    ["0211-02-03", undefined, "refused: day.year"],
    ["40423", undefined, "refused: day.serial"],
    ["yesterday", undefined, "refused: day.unreadable"],
    ["1-2/2011", "day-first", "refused: day.unreadable"],
  ] as const)("%s read %s gives %s", (text, order, expected) => {
    expect(outcome(parseDayCell(text, order))).toBe(expected);
  });

  it("says what is wrong and what to do", () => {
    expect(parseDayCell("31/11/2026", "day-first")).toMatchObject({
      reason: "“31/11/2026” (read day first) is not a day: November 2026 has 30 days.",
      mend: "Correct the day or the month.",
    });
    expect(parseDayCell("2026-09-07 17:30", undefined)).toMatchObject({
      ok: true,
      value: "2026-09-07",
      warning: expect.stringContaining("time"),
    });
  });

  it.each([
    [["25/12/2015", "03/04/2015"], "day-first"],
    [["12/25/2015", "03/04/2015"], "month-first"],
    [["03/04/2015", "05/06/2015", ""], "ambiguous"],
    [["25/12/2015", "12/25/2015"], "mixed"],
    [["2015-04-03", "7 Sep 2026", ""], "iso"],
    [["03/03/2015"], "day-first"],
    [["2015-04-03", "03/04/2015"], "ambiguous"],
    [["31/11/2026", "nonsense"], "day-first"],
    [["25/12/15", "01/02/15"], "day-first"],
    [[], "iso"],
  ] as const)("the order of %j is %s", (values, order) => {
    expect(detectDayOrder(values)).toBe(order);
  });

  it("never settles an order from cells that both orders allow", () => {
    const low = fc.integer({ min: 1, max: 12 });
    fc.assert(
      fc.property(fc.array(fc.tuple(low, low), { minLength: 1 }), (pairs) => {
        fc.pre(pairs.some(([first, second]) => first !== second));
        expect(detectDayOrder(pairs.map(([first, second]) => `${first}/${second}/2015`))).toBe("ambiguous");
      }),
    );
  });

  it("reads back every day of the calendar in the order it was written", () => {
    fc.assert(
      fc.property(
        fc.date({ min: new Date("1900-01-01"), max: new Date("2100-12-31"), noInvalidDate: true }),
        (date) => {
          const iso = date.toISOString().slice(0, 10);
          const [year, month, day] = iso.split("-");
          expect(outcome(parseDayCell(`${day}/${month}/${year}`, "day-first"))).toBe(iso);
          expect(outcome(parseDayCell(`${month}/${day}/${year}`, "month-first"))).toBe(iso);
          expect(outcome(parseDayCell(iso, undefined))).toBe(iso);
        },
      ),
    );
  });

  it("keeps the evidence for the question", () => {
    const detector = new DayOrderDetector();
    for (const value of ["03/04/2015", "25/12/2015", "12/25/2015", "12/26/2015"]) detector.add(value);
    expect(detector.evidence).toEqual([
      { kind: "undecided", count: 1, example: "03/04/2015" },
      { kind: "day-first", count: 1, example: "25/12/2015" },
      { kind: "month-first", count: 2, example: "12/25/2015" },
    ]);
  });
});

describe("times", () => {
  it.each([
    ["17:30", "17:30"],
    ["17.30", "17:30"],
    ["17:30:00", "17:30"],
    ["1730", "17:30"],
    ["17h30", "17:30"],
    ["17h", "17:00"],
    ["17:30 Uhr", "17:30"],
    ["5:30 pm", "17:30"],
    ["5 p.m.", "17:00"],
    ["12:30 am", "00:30"],
    ["12 pm", "12:00"],
    ["9:00", "09:00"],
    ["24:00", "refused: time.unreadable"],
    ["17:60", "refused: time.unreadable"],
    ["13:00 pm", "refused: time.unreadable"],
    ["17", "refused: time.unreadable"],
    ["evening", "refused: time.unreadable"],
  ])("%s gives %s", (text, expected) => {
    expect(outcome(parseTimeCell(text))).toBe(expected);
  });
});

describe("minutes and players", () => {
  it.each([
    ["80", 80],
    [" 80 ", 80],
    ["80,0", 80],
    ["80.0", 80],
    ["1:20", 80],
    ["01:20:00", 80],
    ["80 min", 80],
    ["80min.", 80],
    ["80 Minuten", 80],
    ["80'", 80],
    ["1h20", 80],
    ["1 h 20 min", 80],
    ["1,5 h", 90],
    ["2 h", 120],
    ["0", 0],
    ["600", 600],
    ["601", "refused: minutes.too-many"],
    ["80:00", "refused: minutes.too-many"],
    ["-5", "refused: minutes.negative"],
    ["-1:20", "refused: minutes.negative"],
    ["1:60", "refused: minutes.not-a-number"],
    ["1.200", "refused: minutes.not-a-number"],
    ["1e2", "refused: minutes.not-a-number"],
    ["NaN", "refused: minutes.not-a-number"],
    ["Infinity", "refused: minutes.not-a-number"],
    ["0x50", "refused: minutes.not-a-number"],
  ])("%s gives %s", (text, expected) => {
    expect(outcome(parseMinutes(text))).toBe(expected);
  });

  it("warns of a part of a minute, which may have been hours", () => {
    expect(parseMinutes("1,5")).toMatchObject({
      ok: true,
      value: 1.5,
      warning: expect.stringContaining("hours"),
    });
  });

  it.each([
    ["14", 14],
    ["14,0", 14],
    ["0", 0],
    ["14,5", "refused: players.part"],
    ["-3", "refused: players.negative"],
    ["501", "refused: players.too-many"],
    ["fourteen", "refused: players.not-a-number"],
  ])("%s players gives %s", (text, expected) => {
    expect(outcome(parsePlayers(text))).toBe(expected);
  });

  it.each([
    ["fourteen", "Write 14."],
    ["Twenty-five", "Write 25."],
    ["vierzehn", "Write 14."],
    ["thirty", "Write 30."],
    ["lots", "Write the number of athletes in figures, for example 14."],
  ])("the mend of %s players is “%s”", (text, mend) => {
    expect(parsePlayers(text)).toMatchObject({ ok: false, reason: `“${text}” is not a number.`, mend });
  });
});

describe("coded cells", () => {
  it.each([
    ["F", "female"],
    ["weiblich", "female"],
    ["w", "female"],
    ["Girl", "female"],
    ["mężczyzna", "male"],
    ["m", "male"],
    ["boys", "male"],
    ["", "not_stated"],
    ["?", "not_stated"],
    ["n/a", "not_stated"],
    ["not stated", "not_stated"],
    ["-", "not_stated"],
    ["prefer not to say", "not_stated"],
    ["blue", "refused: sex.unknown"],
    ["1", "refused: sex.unknown"],
  ])("sex %s gives %s", (text, expected) => {
    expect(outcome(parseSex(text))).toBe(expected);
  });

  it("says that a question mark became not stated, and nothing for an empty cell", () => {
    expect(parseSex("?")).toHaveProperty("warning", "Sex “?” was recorded as not stated.");
    expect(parseSex("")).not.toHaveProperty("warning");
  });

  it.each([
    [parseDominantLeg, "R", "right"],
    [parseDominantLeg, "links", "left"],
    [parseDominantLeg, "?", "unknown"],
    [parseDominantLeg, "middle", "refused: leg.unknown"],
    [parseKind, "Practice", "training"],
    [parseKind, "Spiel", "match"],
    [parseKind, "GAME", "match"],
    [parseKind, "S&C", "strength"],
    [parseKind, "", "refused: kind of session.unknown"],
    [parseKind, "picnic", "refused: kind of session.unknown"],
    [parseSurface, "artificial turf", "artificial_turf"],
    [parseSurface, "Kunstrasen", "artificial_turf"],
    [parseSurface, "Césped natural", "natural_grass"],
    [parseSurface, "lava", "refused: surface.unknown"],
    [parsePresence, "took part", "took_part"],
    [parsePresence, "abwesend", "absent"],
    [parsePresence, "present", "refused: presence.unknown"],
    [parseRelation, "Mum", "mother"],
    [parseRelation, "neighbour", "refused: relation.unknown"],
  ] as const)("%o reads %s as %s", (parse, text, expected) => {
    expect(outcome<string>(parse(text))).toBe(expected);
  });

  it("offers the choices", () => {
    expect(parseKind("picnic")).toMatchObject({
      reason: "“picnic” is not a known kind of session.",
      mend: "Write one of: training, match, strength, other.",
    });
  });
});

describe("contacts", () => {
  it.each([
    ["home301@example.org", "home301@example.org"],
    [" Home <home301@Example.ORG> ", "home301@example.org"],
    ["mailto:a.b+c@example.org", "a.b+c@example.org"],
    ["o'brien@example.org", "o'brien@example.org"],
    ["jürgen@exämple.org", "jürgen@exämple.org"],
    ["not-an-email", "refused: email.invalid"],
    ["a@b", "refused: email.invalid"],
    ["a..b@example.org", "refused: email.invalid"],
    ["a b@example.org", "refused: email.invalid"],
    ["a@-example.org", "refused: email.invalid"],
    ["a@example.org, b@example.org", "refused: email.several"],
    [`${"a".repeat(65)}@example.org`, "refused: email.invalid"],
    ["a@example.org\r\nBcc: b@example.org", "refused: email.several"],
  ])("e-mail %j gives %s", (text, expected) => {
    expect(outcome(parseEmail(text))).toBe(expected);
  });

  it.each([
    [" +44 1632 960001 ", "+44 1632 960001"],
    ["(01632) 960-001 ext 4", "(01632) 960-001 ext 4"],
    ["'+44 1632 960001", "+44 1632 960001"],
    ["4.41632E+11", "refused: phone.shortened"],
    ["ask mum", "refused: phone.invalid"],
    ["123", "refused: phone.invalid"],
  ])("phone %j gives %s", (text, expected) => {
    expect(outcome(parsePhone(text))).toBe(expected);
  });

  it.each([
    ["pl", "pl"],
    ["en-GB", "en"],
    ["Polish", "pl"],
    ["Polnisch", "pl"],
    ["polski", "pl"],
    ["Español", "es"],
    ["Cymraeg", "cy"],
    ["العربية", "ar"],
    ["qq", "refused: language.unknown"],
    ["Elvish", "refused: language.unknown"],
  ])("language %s gives %s", (text, expected) => {
    expect(outcome(parseLanguage(text))).toBe(expected);
  });
});

describe("names", () => {
  it.each([
    ["Fennimore, Gethin", undefined, { givenName: "Gethin", familyName: "Fennimore" }],
    ["Gethin Fennimore", "given-first", { givenName: "Gethin", familyName: "Fennimore" }],
    ["Fennimore Gethin", "family-first", { givenName: "Gethin", familyName: "Fennimore" }],
    ["Anna van der Berg", "given-first", { givenName: "Anna", familyName: "van der Berg" }],
    ["van der Berg Anna", "family-first", { givenName: "Anna", familyName: "van der Berg" }],
    ["García Peña, María José", undefined, { givenName: "María José", familyName: "García Peña" }],
    ["Gethin Fennimore", undefined, "refused: name.order"],
    ["Gethin", "given-first", "refused: name.one-word"],
    ["Fennimore,", undefined, "refused: name.missing"],
    ["a, b, c", undefined, "refused: name.commas"],
  ] as const)("%s in the order %s gives %j", (text, order, expected) => {
    expect(outcome(parsePersonName(text, order))).toEqual(expected);
  });

  it("warns of a name that can be parted twice", () => {
    expect(parsePersonName("María José García Peña", "given-first")).toMatchObject({
      ok: true,
      warning: expect.stringContaining("parted rightly"),
    });
    expect(parsePersonName("Fennimore, Gethin")).not.toHaveProperty("warning");
  });

  it.each([
    ["?ukaszewska", "A letter may have been lost in “?ukaszewska” when the file was saved. Check the name."],
    ["Nguy?n", "A letter may have been lost in “Nguy?n” when the file was saved. Check the name."],
    ["NuÃ±ez", "“NuÃ±ez” looks wrongly decoded. Try another encoding, or check the name."],
    ["³ukaszewska", "“³ukaszewska” looks wrongly decoded. Try another encoding, or check the name."],
  ])("keeps %s and warns", (name, warning) => {
    expect(parseNamePart(name)).toEqual({ ok: true, value: name, warning });
  });

  it.each([
    "Nguyễn",
    "Žižka",
    "Þórsdóttir",
    "Åkesson",
    "D'Arcy-Wray",
    "’t Hooft",
    "李",
    "Ægir",
    "Łukaszewska",
    "=cmd",
  ])("keeps %s without a warning", (name) => {
    expect(parseNamePart(name)).toEqual({ ok: true, value: name });
  });

  it("refuses what no name is", () => {
    expect(outcome(parseNamePart("a\u0007b"))).toBe("refused: name.control");
    expect(outcome(parseNamePart("x".repeat(101)))).toBe("refused: name.too-long");
    expect(outcome(parseNamePart("---"))).toBe("refused: name.no-letter");
    expect(outcome(parseNamePart("\u00A0\u200B"))).toBe("refused: name.missing");
  });

  it.each([
    ["Łukaszewska", "lukaszewska"],
    ["D’Arcy-Wray", "darcy wray"],
    ["Þórsdóttir", "thorsdottir"],
    ["Øystein Strauß", "oystein strauss"],
    ["NGUYỄN", "nguyen"],
    ["İpek Işık", "ipek isik"],
    ["  Žižka\u00A0 ", "zizka"],
  ])("normalises %s to %s", (name, expected) => {
    expect(normaliseName(name)).toBe(expected);
    expect(normaliseName(expected)).toBe(expected);
  });

  it("asks for the order only where it matters", () => {
    expect(needsNameOrder(["Fennimore, Gethin", ""])).toBe(false);
    expect(needsNameOrder(["Fennimore, Gethin", "Gethin Fennimore"])).toBe(true);
  });
});

describe("numbers of athletes", () => {
  it.each([
    ["007", "007"],
    [" MB-1001 ", "MB-1001"],
    ['="00123"', "00123"],
    ["12345678901234567890", "12345678901234567890"],
    ["", "refused: number.missing"],
    ["x".repeat(41), "refused: number.invalid"],
    ["1\u00002", "refused: number.invalid"],
  ])("%j gives %s", (text, expected) => {
    expect(outcome(parseIdentifier(text))).toBe(expected);
  });

  it("warns of a number that a spreadsheet shortened", () => {
    expect(parseIdentifier("1E+05")).toMatchObject({ ok: true, value: "1E+05", warning: expect.any(String) });
    expect(parseIdentifier("E105")).not.toHaveProperty("warning");
  });
});

describe("anything typed at all", () => {
  const parsers: ((text: string) => Parsed<unknown>)[] = [
    (text) => parseDayCell(text, "day-first"),
    parseTimeCell,
    parseMinutes,
    parsePlayers,
    parseSex,
    parseDominantLeg,
    parseKind,
    parseSurface,
    parsePresence,
    parseRelation,
    parseEmail,
    parsePhone,
    parseLanguage,
    parseNamePart,
    (text) => parsePersonName(text, "given-first"),
    parseIdentifier,
  ];

  it("gives a value or a whole sentence with a mend, and never throws", () => {
    fc.assert(
      fc.property(
        fc.string({ unit: "binary", maxLength: 60 }),
        fc.constantFrom(...parsers),
        (text, parse) => {
          const parsed = parse(text);
          if (parsed.ok) return;
          expect(parsed.reason).toMatch(/\.$/);
          expect(parsed.mend).toMatch(/^[A-Z].*\.$/);
        },
      ),
      { numRuns: 3000 },
    );
  });

  it("does not hang on long cells", () => {
    const long = [
      "1".repeat(32_000),
      "a ".repeat(16_000),
      "1:".repeat(16_000),
      "a@".repeat(16_000),
      " ".repeat(32_000),
      "a.".repeat(16_000),
    ];
    const start = performance.now();
    for (const text of long) for (const parse of parsers) parse(text);
    expect(performance.now() - start).toBeLessThan(5000);
  });
});
