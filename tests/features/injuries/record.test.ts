import { describe, expect, it } from "vitest";
import { type GapFacts, gapsOf, hasSides } from "~/features/injuries/gaps";
import { changedKeys, diffRevisions } from "~/features/injuries/history";
import { editSchema, logSchema, optionalTime } from "~/features/injuries/injuries.schema";
import { answersOfValues } from "~/features/injuries/seen";
import { siteWords, summariseInjury } from "~/features/injuries/summary";

const id = "6f1c8a52-6c2b-4b8e-9a55-0d5a2f6b7c11";
const log = {
  operation: id,
  athlete: id,
  when: "today",
  bodyArea: "knee",
  side: "left",
  couldContinue: "no",
};
const fieldsOf = (input: object) =>
  logSchema.safeParse(input).error?.issues.map(({ path }) => path.join(".")) ?? [];

describe("the first group", () => {
  it("saves alone", () => {
    expect(logSchema.parse(log)).toMatchObject({
      bodyArea: "knee",
      side: "left",
      couldContinue: false,
      suspectedConcussion: false,
      movement: null,
      signs: [],
      reportId: null,
    });
  });

  it("joins the chips with the lists behind them, and the groups of signs", () => {
    const input = logSchema.parse({
      ...log,
      bodyArea: "another",
      otherArea: "foot",
      movement: "another",
      otherMovement: "kicking",
      signs: "pop",
      emergencySigns: ["numb", "cold_pale_foot"],
      headSigns: [],
    });
    expect(input).toMatchObject({
      bodyArea: "foot",
      movement: "kicking",
      signs: ["pop", "numb", "cold_pale_foot"],
    });
  });

  it("asks for a side only where there are two", () => {
    expect(fieldsOf({ ...log, side: "" })).toEqual(["side"]);
    const head = logSchema.parse({ ...log, bodyArea: "head", side: undefined, suspectedConcussion: "yes" });
    expect(head).toMatchObject({ side: "none", suspectedConcussion: true });
    expect(hasSides("knee")).toBe(true);
    expect(hasSides("lumbosacral")).toBe(false);
  });

  it.each([
    [{ ...log, athlete: "" }, "athlete"],
    [{ ...log, when: undefined }, "when"],
    [{ ...log, when: "session:x" }, "when"],
    [{ ...log, when: "earlier", day: "" }, "day"],
    [{ ...log, when: "earlier", day: "31 2 2026" }, "day"],
    [{ ...log, when: "earlier", day: "1 3 2026", time: "26:00" }, "time"],
    [{ ...log, bodyArea: "" }, "bodyArea"],
    [{ ...log, bodyArea: "another" }, "otherArea"],
    [{ ...log, couldContinue: "" }, "couldContinue"],
    [{ ...log, bodyArea: "head", side: "" }, "suspectedConcussion"],
    [{ ...log, signs: ["tired"] }, "signs.0"],
    [{ ...log, operation: "1" }, "operation"],
  ])("names the field to put right (%#)", (input, field) => {
    expect(fieldsOf(input)).toContain(field);
  });

  it("does not ask outside organised sport whether they could continue", () => {
    expect(fieldsOf({ ...log, when: "outside", couldContinue: "" })).toEqual([]);
  });

  it.each([
    ["17:30", "17:30"],
    ["17.30", "17:30"],
    ["1730", "17:30"],
    ["9:05", "09:05"],
    ["", null],
  ])("reads the time %s", (text, time) => {
    expect(optionalTime.parse(text)).toBe(time);
  });

  it("is read leniently while it is typed, for the cautions", () => {
    expect(
      answersOfValues({ bodyArea: "another", otherArea: "knee", signs: "pop", couldContinue: "no" }),
    ).toMatchObject({
      bodyArea: "knee",
      signs: ["pop"],
      couldContinue: false,
      suspectedConcussion: false,
    });
    expect(answersOfValues({ bodyArea: "nonsense", signs: ["nonsense"] })).toMatchObject({
      bodyArea: null,
      signs: [],
    });
  });
});

describe("the whole record", () => {
  const edit = { operation: id, version: "1", day: "1 3 2026", session: "", bodyArea: "knee", side: "left" };
  const refused = (input: object) =>
    editSchema.safeParse(input).error?.issues.map(({ path }) => path.join(".")) ?? [];

  it("needs no more than the first group", () => {
    expect(editSchema.parse(edit)).toMatchObject({
      day: "2026-03-01",
      onset: null,
      warmedUp: null,
      diagnosisPair: null,
    });
  });

  it("takes tissue and pathology as a pair that belongs together", () => {
    expect(editSchema.parse({ ...edit, diagnosisPair: "bone:fracture" }).diagnosisPair).toEqual({
      tissue: "bone",
      pathology: "fracture",
    });
    expect(refused({ ...edit, diagnosisPair: "bone:sprain" })).toContain("diagnosisPair");
  });

  it.each([
    [{ ...edit, closedOn: "28 2 2026" }, "closedOn"],
    [{ ...edit, surgeryDay: "5 3 2026" }, "surgery"],
    [{ ...edit, certainty: "clinical" }, "diagnosisPair"],
    [{ ...edit, further1: "bone:fracture" }, "further1Certainty"],
    [{ ...edit, further2Words: "torn meniscus" }, "further2"],
    [{ ...edit, minuteOfPlay: "late" }, "minuteOfPlay"],
  ])("names what does not fit together (%#)", (input, field) => {
    expect(refused(input)).toContain(field);
  });
});

describe("gaps", () => {
  const complete: GapFacts = {
    sessionId: id,
    outsideSport: false,
    bodyArea: "knee",
    side: "left",
    couldContinue: true,
    onset: "sudden",
    contact: "non_contact",
    movement: "cutting",
    warmedUp: true,
    pathology: "sprain",
    certainty: "clinical",
    subsequence: "index",
    hasAvailability: true,
    hasEarlier: true,
  };
  const missing = (given: Partial<GapFacts>) => gapsOf({ ...complete, ...given }).map(({ field }) => field);

  it("has none when all is answered, and takes not known for an answer", () => {
    expect(missing({})).toEqual([]);
    expect(missing({ movement: "unknown", contact: "unknown" })).toEqual([]);
  });

  it.each([
    [{ sessionId: null }, ["session"]],
    [{ sessionId: null, outsideSport: true }, []],
    [{ side: "unknown" }, ["side"]],
    [{ side: "unknown", bodyArea: "chest" }, []],
    [{ couldContinue: null }, ["couldContinue"]],
    [{ couldContinue: null, hasAvailability: false }, ["couldContinue", "availability"]],
    [{ onset: null }, ["onset"]],
    [{ contact: null }, ["contact"]],
    [{ contact: null, onset: "gradual" }, []],
    [{ movement: null }, ["movement"]],
    [{ warmedUp: null }, ["warmedUp"]],
    [{ warmedUp: null, sessionId: null, outsideSport: true }, []],
    [{ pathology: null, certainty: null }, ["pathology", "certainty"]],
    [{ subsequence: null }, ["subsequence"]],
    [{ subsequence: null, hasEarlier: false }, []],
    [{ hasAvailability: false, couldContinue: false }, ["availability"]],
    [{ hasAvailability: false, couldContinue: true }, []],
  ] as [Partial<GapFacts>, string[]][])("says what is missing (%#)", (given, fields) => {
    expect(missing(given)).toEqual(fields);
  });
});

describe("history", () => {
  it("says in words what an edit changed, before and after, and nothing else", () => {
    const before = { side: "left", signs: ["pop"], diagnosis: null, warmedUp: null, onsetDay: "2026-03-01" };
    const after = {
      side: "right",
      signs: ["swelling", "pop"],
      diagnosis: "ACL tear",
      warmedUp: false,
      onsetDay: "2026-03-01",
    };
    expect(diffRevisions(before, after)).toEqual([
      { field: "side", from: "left", to: "right" },
      { field: "warmed up", from: "nothing", to: "no" },
      { field: "signs", from: "pop heard or felt", to: "swelling, pop heard or felt" },
      { field: "diagnosis", from: "nothing", to: "ACL tear" },
    ]);
    expect(changedKeys(before, after)).toEqual(["side", "warmedUp", "signs", "diagnosis"]);
    expect(diffRevisions(after, { ...after, signs: ["pop", "swelling"] })).toEqual([]);
  });
});

describe("the sentence", () => {
  const facts = {
    bodyArea: "knee",
    side: "left",
    onsetDay: "2026-03-03",
    onsetTime: "17:40",
    outsideSport: false,
    session: { kind: "training", teamName: "U16 Girls" },
    movement: "cutting",
    contact: "non_contact",
    pathology: "sprain",
    timeLoss: { days: 14, ongoing: true },
    state: "unavailable",
  } as const;

  it("says what, when, where, how, and what it has cost", () => {
    expect(summariseInjury("Ines Test", facts)).toBe(
      "Ines Test: left knee, sprain or ligament tear, on 3 March 2026 at 17:40 in a training of U16 Girls, while cutting or change of direction, non-contact. 14 days lost so far, unavailable today.",
    );
    expect(
      summariseInjury("Ines Test", { ...facts, timeLoss: { days: 0, ongoing: false }, state: "full" }),
    ).toMatch(/No time loss so far\.$/);
  });

  it("names the site in plain words", () => {
    expect(siteWords("knee", "both")).toBe("knee, both sides");
    expect(siteWords("head", "none")).toBe("head");
    expect(siteWords("ankle", "unknown")).toBe("ankle, side not known");
  });
});
