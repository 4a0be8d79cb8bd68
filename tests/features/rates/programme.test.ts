import { describe, expect, it } from "vitest";
import {
  byGroup,
  classOf,
  contrast,
  type InjuryPlace,
  type PlacedInjury,
  splitPlaced,
  type Tally,
  tally,
  thirdOf,
} from "~/features/rates/programme/programme";
import { contrastPicture } from "~/features/rates/programme/programme-picture";
import {
  outcomeInWords,
  type Plan,
  plansOfSeason,
  timingOf,
} from "~/features/rates/programme/programme-plan";
import {
  clusterNote,
  contrastSentence,
  leftOutLines,
  recordSentence,
  smallestSentence,
  warmUpWords,
} from "~/features/rates/programme/programme-sentence";
import { onPage, rateTable, ratioTable } from "~/features/rates/programme/programme-tables";
import { textOf } from "~/features/rates/sentence";
import { mantelHaenszel, smallestDetectableRatio } from "~/statistics";

const place = (given: Partial<InjuryPlace> = {}): InjuryPlace => ({
  injuryId: "i",
  hasSession: true,
  isRecorded: true,
  outside: null,
  byRecord: "warmed_up",
  known: 10,
  done: 8,
  ...given,
});

const placed = (
  given: Partial<InjuryPlace> = {},
  own: Partial<PlacedInjury["injury"]> = {},
): PlacedInjury => ({
  injury: { id: "i", teamId: "t", sessionKind: "training", warmedUp: null, ...own },
  place: place(given),
});

describe("whether an injured athlete had warmed up", () => {
  it.each([
    ["warmed_up", null, "warmed_up"],
    ["warmed_up", false, "not_warmed_up"],
    ["not_warmed_up", true, "warmed_up"],
    ["not_warmed_up", null, "not_warmed_up"],
    // Without a record the injury stays with its exposure, whatever it says itself.
    ["not_recorded", true, "not_recorded"],
    ["not_recorded", false, "not_recorded"],
  ] as const)("by the record %s and the injury's own answer %s is %s", (byRecord, own, expected) => {
    expect(classOf({ byRecord }, own)).toBe(expected);
  });
});

describe("the third of a history", () => {
  it("includes both cuts, and asks for enough known participations", () => {
    const third = (known: number, done: number) => thirdOf({ known, done }, [0.5, 0.8], 5);
    expect(third(4, 4)).toBe("early");
    expect(third(10, 5)).toBe("lowest");
    expect(third(10, 6)).toBe("middle");
    expect(third(10, 8)).toBe("highest");
    expect(third(5, 0)).toBe("lowest");
  });
});

describe("what can be compared", () => {
  it("needs a session of a counted kind, its participations and the programme; the first that is missing is named", () => {
    const all = [
      placed(),
      placed({ hasSession: false, isRecorded: false }, { sessionKind: null }),
      placed({}, { teamId: null }),
      placed({ isRecorded: false, outside: "before_start" }),
      placed({ outside: "before_start" }),
      placed({ outside: "no_programme" }),
    ];
    const { placed: kept, unplaced } = splitPlaced(all);
    expect(kept).toEqual([all[0]]);
    expect(unplaced).toEqual({ noSession: 2, noParticipations: 1, outside: 2 });
  });

  it("adds injuries to their own team, kind and group", () => {
    const rows = tally(
      [
        { teamId: "t", kind: "training", group: "x", aes: 30 },
        { teamId: "t", kind: "training", group: "x", aes: 10 },
        { teamId: "u", kind: "match", group: "y", aes: 5 },
      ],
      [placed(), placed({}, { sessionKind: "match" }), placed({}, { teamId: "u", sessionKind: "match" })],
      () => "x",
    );
    expect(rows).toEqual([
      { teamId: "t", kind: "training", group: "x", events: 1, aes: 40 },
      { teamId: "u", kind: "match", group: "y", events: 0, aes: 5 },
      { teamId: "t", kind: "match", group: "x", events: 1, aes: 0 },
      { teamId: "u", kind: "match", group: "x", events: 1, aes: 0 },
    ]);
    expect(byGroup(rows, ["x", "y"]).map(({ group, events, exposure }) => [group, events, exposure])).toEqual(
      [
        ["x", 3, 40],
        ["y", 0, 5],
      ],
    );
  });
});

const row = (
  teamId: string,
  kind: "training" | "match",
  group: "a" | "b",
  events: number,
  aes: number,
): Tally<"a" | "b"> => ({ teamId, kind, group, events, aes });

/** Six teams; in each kind `a` has half the rate of `b`: 2 and 4 per 1000 in training, 5 and 10 in matches. */
const halved = Array.from({ length: 6 }, (_, n) => `team ${n}`).flatMap((team) => [
  row(team, "training", "a", 2, 1000),
  row(team, "training", "b", 1, 250),
  row(team, "match", "a", 1, 200),
  row(team, "match", "b", 1, 100),
]);

describe("a comparison within session kind", () => {
  it("finds the ratio that holds in both kinds, which the crude one is not", () => {
    const { robust, pooled, byKind, a, b, reason } = contrast(halved, "a", "b");
    expect(reason).toBeNull();
    expect([a, b]).toEqual([
      { events: 18, exposure: 7200 },
      { events: 12, exposure: 2100 },
    ]);
    expect(a.events / a.exposure / (b.events / b.exposure)).toBeCloseTo(0.4375, 10);
    expect(robust?.estimate).toBeCloseTo(0.5, 6);
    expect(robust?.clusters).toBe(6);
    expect(robust?.fewClusters).toBe(true);
    expect(pooled?.estimate).toBeCloseTo(0.5, 10);
    expect(pooled?.lower).toBeCloseTo(
      mantelHaenszel([
        { a: { events: 12, exposure: 6000 }, b: { events: 6, exposure: 1500 } },
        { a: { events: 6, exposure: 1200 }, b: { events: 6, exposure: 600 } },
      ]).lower,
      10,
    );
    expect(byKind.map(({ kind, ratio }) => [kind, ratio?.estimate])).toEqual([
      ["training", 0.5],
      ["match", 0.5],
    ]);
  });

  it("turns around when the groups are swapped", () => {
    const there = contrast(halved, "a", "b").robust;
    const back = contrast(halved, "b", "a").robust;
    expect(back?.estimate).toBeCloseTo(1 / (there?.estimate ?? 0), 8);
    expect(back?.lower).toBeCloseTo(1 / (there?.upper ?? 0), 8);
  });

  it("leaves injuries without exposure of their group out of the ratio and says how many", () => {
    const more = [...halved, row("team 7", "training", "b", 3, 0)];
    const { robust, withoutExposure, b } = contrast(more, "a", "b");
    expect(withoutExposure).toBe(3);
    expect(b.events).toBe(12);
    expect(robust?.estimate).toBeCloseTo(0.5, 6);
  });

  it("says why there is no ratio", () => {
    expect(contrast([row("t", "training", "a", 1, 50)], "a", "b")).toMatchObject({
      robust: null,
      pooled: null,
      reason: "one of the two has no athlete-exposures",
      smallest: null,
    });
    const none = [row("t", "training", "a", 0, 50), row("t", "training", "b", 0, 50)];
    expect(contrast(none, "a", "b")).toMatchObject({
      robust: null,
      reason: expect.stringContaining("no injury"),
    });
    expect(contrast<"a" | "b">([], "a", "b")).toMatchObject({ robust: null, byKind: [] });
  });

  it("asks the statistics what could have been shown, from the rate of both together, widened for teams", () => {
    const clustered = halved.map((each, index) =>
      each.group === "a" && index < 12 ? { ...each, events: each.events * 20 } : each,
    );
    const { smallest, robust, a, b } = contrast(clustered, "a", "b");
    expect(robust?.varianceInflation).toBeGreaterThan(1);
    expect(smallest?.designEffect).toBe(robust?.varianceInflation);
    const rate = (1000 * (a.events + b.events)) / (a.exposure + b.exposure);
    expect(smallest?.rate.estimate).toBeCloseTo(rate, 10);
    const by = smallest?.designEffect ?? 1;
    expect(smallest?.ratio).toBe(
      smallestDetectableRatio({ exposureA: a.exposure / by, exposureB: b.exposure / by, rate, power: 0.8 }),
    );
    const narrow = smallestDetectableRatio({ exposureA: a.exposure, exposureB: b.exposure, rate }) ?? 0;
    expect(smallest?.ratio ?? 0).toBeLessThan(narrow);
  });
});

describe("the sentences", () => {
  it("say both rates, the ratio, its interval and what it includes", () => {
    const found = contrast(halved, "a", "b");
    const text = textOf(contrastSentence(found, warmUpWords));
    expect(text).toContain(
      "After a warm-up there were 18 injuries in 7,200 athlete-exposures, 2.5 per 1000 (",
    );
    expect(text).toContain("; without one 12 injuries in 2,100 athlete-exposures, 5.7 per 1000 (");
    expect(text).toContain("Within session kind that is 0.50 times the rate without a warm-up (");
    expect(text).toContain("the interval includes no difference");
    expect(text).not.toContain("thin evidence");
    expect(clusterNote(found)).toContain("fewer than 40 teams");
  });

  it("say when the evidence is thin, and never more than there is", () => {
    const thin = contrast([row("t", "training", "a", 2, 500), row("u", "training", "b", 0, 400)], "a", "b");
    const text = textOf(contrastSentence(thin, warmUpWords));
    expect(text).toContain("no injuries in 400 athlete-exposures");
    expect(text).toContain("no upper limit and could be as low as 0.");
    expect(text).toContain("thin evidence");
    expect(text).not.toMatch(/NaN|Infinity/);
    expect(clusterNote(thin)).toContain("too narrow");
    const none = contrast([row("t", "training", "a", 0, 500), row("u", "training", "b", 0, 400)], "a", "b");
    expect(textOf(contrastSentence(none, warmUpWords))).toContain("No ratio can be made");
  });

  it("say what could have been shown, or that nothing could", () => {
    const found = contrast(halved, "a", "b");
    const words = textOf(smallestSentence(found.smallest, found, ["warmed up", "not warmed up"]));
    expect(words).toContain(
      "With 7,200 athlete-exposures warmed up, 2,100 not warmed up and 3.2 injuries per 1000",
    );
    expect(words).toMatch(
      /4 times in 5 only if the rate were 0\.\d+ times as high or less, a reduction of \d+ %/,
    );
    const few = contrast([row("t", "training", "a", 1, 90), row("u", "training", "b", 1, 30)], "a", "b");
    expect(textOf(smallestSentence(few.smallest, few, ["x", "y"]))).toContain("no reduction, however large");
    expect(textOf(smallestSentence(null, few, ["x", "y"]))).toContain("nothing can be said");
  });

  it("say how the ratio changes by the session's record alone", () => {
    const words = textOf(recordSentence(3, contrast(halved, "a", "b")));
    expect(words).toContain("3 injuries' own records say something else");
    expect(words).toContain("0.50 times");
    expect(recordSentence(0, null)).toEqual([]);
  });

  it("count what stands outside, and nothing that is not there", () => {
    const none = { noSession: 0, noParticipations: 0, outside: 0 };
    expect(leftOutLines(none, { beforeStart: 0, noProgramme: 0 }, 0)).toEqual([]);
    expect(leftOutLines({ ...none, outside: 1 }, { beforeStart: 1200, noProgramme: 0 }, 0)).toEqual([
      "1,200 athlete-exposures of teams before the day their programme began",
      "1 injury of teams before that day or without a programme",
    ]);
  });
});

describe("the tables", () => {
  const rates = rateTable({
    id: "x",
    caption: "Rates",
    head: "Athlete",
    groups: ["a", "b"] as const,
    words: { a: "Warmed up", b: "Not" },
    tallies: halved,
    coverage: { held: 10, recorded: 10, share: 1, state: "good" },
    outcome: "knees",
  });

  it("hold every kind and the sum, and in the file alone which injuries are counted", () => {
    expect(rates.rows.map(({ key, cells }) => [key, cells.injuries, cells.aes])).toEqual([
      ["a training", 12, 6000],
      ["a match", 6, 1200],
      ["a all", 18, 7200],
      ["b training", 6, 1500],
      ["b match", 6, 600],
      ["b all", 12, 2100],
    ]);
    expect(rates.columns.map(({ id }) => id)).toContain("outcome");
    expect(onPage(rates).columns.map(({ id }) => id)).not.toContain("outcome");
  });

  it("hold no estimate without an end", () => {
    const found = contrast([row("t", "training", "a", 2, 500), row("u", "training", "b", 0, 400)], "a", "b");
    const table = ratioTable({ id: "r", caption: "", contrast: found, withheld: null, outcome: "knees" });
    expect(table.rows[0]?.cells.ratio).toEqual({ reason: "no injury to compare with" });
    expect(JSON.stringify(table)).not.toMatch(/NaN|null,"upper":null/);
    const held = ratioTable({ id: "r", caption: "", contrast: found, withheld: "withheld", outcome: "k" });
    for (const { cells } of held.rows) expect(cells.ratio).toEqual({ reason: "withheld" });
  });

  it("give the picture its kinds with the groups side by side", () => {
    const { groups } = contrastPicture(rates, [
      ["a", "warmed up"],
      ["b", "not"],
    ]);
    expect(groups.map(({ label, points }) => [label, points.map((point) => point.label)])).toEqual([
      ["Training", ["warmed up", "not"]],
      ["Matches", ["warmed up", "not"]],
      ["Together", ["warmed up", "not"]],
    ]);
  });
});

describe("which plan counts", () => {
  const plan = (id: string, recordedOn: string): Plan => ({
    ...{ id, recordedOn, recordedTime: "10:00", recordedBy: "Ada", words: "w", comparison: "warmed-up" },
    ...{ area: "knee", contact: "without", onset: "sudden", caseDefinition: "time-loss" },
  });
  const season = { from: "2026-08-01", endsOn: "2027-06-30" };

  it("is the last one before the season, else the first one of all", () => {
    const [old, last, during, after] = [
      plan("old", "2025-07-01"),
      plan("last", "2026-07-31"),
      plan("during", "2026-08-01"),
      plan("after", "2027-09-01"),
    ];
    expect(plansOfSeason([old, last, during, after], season)).toEqual({
      counts: last,
      later: [during, after],
      earlier: [old],
    });
    expect(plansOfSeason([during, after], season)).toEqual({ counts: during, later: [after], earlier: [] });
    expect(plansOfSeason([], season)).toBeNull();
    expect([old, last, during, after].map((each) => timingOf(each, season))).toEqual([
      "before",
      "before",
      "during",
      "after",
    ]);
  });

  it("is said in words", () => {
    expect(outcomeInWords(plan("p", "2026-07-01"))).toBe(
      "sudden non-contact and indirect contact knee injuries with time loss",
    );
  });
});
