import { describe, expect, it } from "vitest";
import { choosePair, comparePair } from "~/features/rates/comparisons/comparisons";
import { parseComparison } from "~/features/rates/comparisons/comparisons.schema";
import {
  compareBySport,
  sportRatiosTable,
  sportsSentence,
  sportsTable,
} from "~/features/rates/comparisons/comparisons-sports";
import type { Dimension } from "~/features/rates/comparisons/comparisons-strata";
import { ratesTable, ratiosTable, strataTable } from "~/features/rates/comparisons/comparisons-tables";
import { pairNote, pairSentence } from "~/features/rates/comparisons/comparisons-words";
import { defaultFilters, type RatesFilters } from "~/features/rates/filters";
import { type Counts, computeRates, tabulate } from "~/features/rates/rates";
import { select } from "~/features/rates/selection";
import { textOf } from "~/features/rates/sentence";
import { rateRatio } from "~/statistics";
import { cell, counts, injury, several, tally } from "./view";

const bands = [
  { label: "under 45", from: 0, to: 44 },
  { label: "45-54", from: 45, to: 54 },
  { label: "55-64", from: 55, to: 64 },
  { label: "65-74", from: 65, to: 74 },
  { label: "over 74", from: 75, to: null },
];
const ages = [40, 50, 60, 70, 80];

function compared(from: Counts, dimension: Dimension, asked: { a?: string; b?: string } = {}, given = {}) {
  const filters: RatesFilters = { ...defaultFilters, ...given };
  const selection = select(from, filters);
  const { first, second } = choosePair(tabulate(dimension, from, selection, filters.per), asked);
  if (!first || !second) throw new Error("nothing to compare");
  const pair = comparePair({ counts: from, selection, filters }, dimension, first, second);
  return {
    pair,
    filters,
    sentence: textOf(pairSentence(pair, filters)),
    note: textOf(pairNote(pair, filters)),
  };
}

describe("two groups within strata of age", () => {
  // British doctors [M]; crude, Mantel-Haenszel and heterogeneity as epiR::epi.2by2 gives them [R].
  const smokers = [
    [32, 52407],
    [104, 43248],
    [206, 28612],
    [186, 12663],
    [102, 5317],
  ] as const;
  const others = [
    [2, 18790],
    [12, 10673],
    [28, 5710],
    [28, 2585],
    [31, 1462],
  ] as const;
  const rows = ages.flatMap((age, index) => [
    { age, sex: "female" as const, events: smokers[index]?.[0] ?? 0, aes: smokers[index]?.[1] ?? 0 },
    { age, sex: "male" as const, events: others[index]?.[0] ?? 0, aes: others[index]?.[1] ?? 0 },
  ]);
  const doctors = counts({
    bands,
    cells: rows.map(({ age, sex, aes }) => cell({ age, sex, aes })),
    injuries: rows.flatMap(({ age, sex, events }) => several(events, { age, sex })),
  });
  const { pair, sentence, note } = compared(doctors, "sex", {}, { sessions: "training" });

  it("has the crude ratio of the whole and the pooled one of the strata", () => {
    expect(pair.held).toEqual(["age"]);
    expect(pair.ratio?.estimate).toBeCloseTo(1.719823, 6);
    expect(pair.adjusted?.strata).toBe(5);
    expect(pair.adjusted?.ratio.estimate).toBeCloseTo(1.424682, 6);
    expect(pair.adjusted?.ratio.lower).toBeCloseTo(1.154703, 6);
    expect(pair.adjusted?.ratio.upper).toBeCloseTo(1.757784, 6);
    expect(pair.adjusted?.ratio.heterogeneity).toMatchObject({ df: 4 });
    expect(pair.adjusted?.ratio.heterogeneity.statistic).toBeCloseTo(10.411659, 6);
    // Nothing is left out, so the crude ratio of what can be adjusted is the crude one.
    expect(pair.adjusted?.sameCrude).toEqual(pair.ratio);
    // Mantel-Haenszel difference 0.00114392 a person-year [R].
    expect(pair.adjusted?.difference?.estimate).toBeCloseTo(1.14392, 5);
  });

  it("says both in words, and that the ratio is not the same at every age", () => {
    expect(sentence).toMatch(
      /^Girls had 630 injuries in 142,247 exposures, 4\.4 per 1000 \(4\.1 to 4\.8\); boys had 101 in 39,220/,
    );
    expect(sentence).toContain("Girls were injured 1.7 times as often as boys (1.4 to 2.1).");
    expect(sentence).toContain("Held against the same ages it is 1.4 (1.2 to 1.8).");
    expect(note).toContain(
      "The ratio differs between ages by more than luck would often make (heterogeneity, p 0.03)",
    );
    // One team alone: no interval can allow for teams.
    expect(note).toContain("No interval allows for teams");
  });
});

it("standardise directly to the exposure of both groups together", () => {
  // Cases 4, 11, 6 in 5200, 8300, 3100 with weights 6, 6, 4: 1.269320 (0.770778-1.993561) [R].
  const three = bands.slice(0, 3);
  const own = [
    [4, 5200],
    [11, 8300],
    [6, 3100],
  ] as const;
  const rest = [3800, 700, 2900];
  const made = counts({
    bands: three,
    cells: own.flatMap(([, aes], index) => [
      cell({ age: ages[index], aes }),
      cell({ age: ages[index], sex: "male", aes: rest[index] }),
    ]),
    injuries: own.flatMap(([events], index) => several(events, { age: ages[index] })),
  });
  const { pair } = compared(made, "sex");
  expect(pair.adjusted?.standardised.a.estimate).toBeCloseTo(1.26932, 6);
  expect(pair.adjusted?.standardised.a.lower).toBeCloseTo(0.770778, 6);
  expect(pair.adjusted?.standardised.a.upper).toBeCloseTo(1.993561, 6);
  expect(pair.adjusted?.standardised.b.estimate).toBe(0);
});

it("allow for teams: twelve of them with the sandwich of R", () => {
  // statistics.md "Cluster": HC0 RR 0.397052 (0.199520-0.790147), CR2 Satterthwaite p 0.0428, df 8.10 [R].
  const aes =
    "210,240,230|180,200,190|260,250,270|150,160,170|220,210,240|300,280,310|200,230,220|190,210,200|250,240,260|160,170,150|230,220,250|290,300,270";
  const events = "1,0,1|2,1,1|0,1,0|0,0,1|1,2,1|0,1,1|3,2,4|1,0,1|2,3,2|0,1,0|4,3,5|1,2,1";
  const read = (text: string) => text.split("|").map((team) => team.split(",").map(Number));
  const ids = read(aes).map((_, index) => `t${index}`);
  const made = counts({
    teams: ids.map((id, index) => ({ id, name: id, sport: index < 6 ? "soccer" : "handball", sex: "girls" })),
    cells: read(aes).flatMap((months, team) =>
      months.map((value) => cell({ teamId: ids[team] ?? "", aes: value })),
    ),
    injuries: read(events).flatMap((months, team) =>
      months.flatMap((count) => several(count, { teamId: ids[team] ?? "" })),
    ),
  });
  const { pair, note } = compared(made, "sport", { a: "soccer", b: "handball" });
  expect(pair.robust.ratio?.estimate).toBeCloseTo(0.397052, 6);
  expect(pair.robust.ratio?.lower).toBeCloseTo(0.19952, 6);
  expect(pair.robust.ratio?.upper).toBeCloseTo(0.790147, 6);
  expect(pair.robust.ratio?.smallSample?.df).toBeCloseTo(8.1, 1);
  expect(pair.robust.ratio?.smallSample?.pValue).toBeCloseTo(0.0428, 4);
  expect(note).toContain(
    "With 12 teams, fewer than 40, even the interval that allows for teams is optimistic.",
  );
});

describe("what stands on one side only", () => {
  const made = counts({
    cells: [
      cell({ aes: 2000 }),
      cell({ sex: "male", aes: 1500 }),
      cell({ kind: "match", aes: 300 }),
      cell({ age: 20, aes: 400 }),
      cell({ age: null, sex: "male", aes: 70 }),
      cell({ age: 13, aes: 100 }),
      cell({ age: 13, sex: "male", aes: 100 }),
    ],
    injuries: [
      ...several(9),
      ...several(6, { sex: "male" }),
      ...several(2, { sessionKind: "match" }),
      injury({ id: "g", onset: "gradual", sessionKind: null, sessionState: null }),
      injury({ id: "u", sex: "male", age: null }),
    ],
  });
  const { pair, note } = compared(made, "sex");

  it("is counted and said, and stays in the rates as they are", () => {
    expect(pair.setAside).toEqual({
      oneSide: { events: 2, exposure: 700 },
      noKind: { events: 1, exposure: 0 },
      noAge: { events: 1, exposure: 70 },
      noExposure: { events: 0, exposure: 0 },
    });
    expect(pair.first).toMatchObject({ injuries: 12, denominator: 2800 });
    expect(pair.adjusted?.sameCrude).toEqual(
      rateRatio({ events: 9, exposure: 2100 }, { events: 6, exposure: 1600 }),
    );
    expect(note).toContain(
      "The adjusted figures leave out 2 injuries and 700 exposures at an age or in a kind of session that only one side has, 1 injury of gradual onset tied to no session and 1 injury and 70 exposures of athletes whose age is not known.",
    );
  });

  it("says in the table which side", () => {
    const { rows } = strataTable(pair, "aes");
    expect(rows.map(({ cells }) => cells.stratum)).toEqual([
      "13 to 14, training",
      "15 to 16, training",
      "15 to 16, matches",
      "15 to 16, gradual, no session",
      "Over 16, training",
      "Age not known, training",
    ]);
    const states = rows.map(({ cells }) => cells.ratio);
    expect(states).toContainEqual({ reason: "exposure of girls only" });
    expect(states).toContainEqual({ reason: "of no one session kind" });
    expect(rows.reduce((sum, { cells }) => sum + Number(cells["injuries-a"]), 0)).toBe(12);
  });
});

describe("groups without enough", () => {
  const both = [cell({ aes: 900 }), cell({ sex: "male", aes: 800 })];

  it("say that the ratio has no upper limit, and write no Infinity", () => {
    const { pair, sentence, note } = compared(counts({ cells: both, injuries: several(7) }), "sex");
    expect(pair.ratio?.upper).toBe(Infinity);
    const shown = JSON.stringify([ratiosTable(pair, "aes"), ratesTable(pair, "aes"), sentence, note]);
    expect(sentence).toContain("The ratio has no upper limit and could be as low as");
    expect(shown).not.toMatch(/NaN|Infinity|null,"upper"/);
  });

  it("say that there is nothing to compare without any injury", () => {
    const { pair, sentence } = compared(counts({ cells: both }), "sex");
    expect(pair.ratio).toBeNull();
    expect(sentence).toContain("So there is nothing to compare yet.");
  });

  it("have no interval that allows for teams when each side is one team", () => {
    const teams = ["t", "u"].map((id) => ({ id, name: `Team ${id}`, sport: "soccer", sex: "girls" }));
    const made = counts({
      teams,
      cells: [cell({ aes: 900 }), cell({ teamId: "u", aes: 800 })],
      injuries: [...several(7), ...several(5, { teamId: "u" })],
      sessions: [],
    });
    const filters = defaultFilters;
    const selection = select(made, filters);
    const rows = tabulate("team", made, selection, "aes");
    const [first, second] = rows;
    if (!first || !second) throw new Error("two teams expected");
    const pair = comparePair({ counts: made, selection, filters }, "team", first, second);
    expect(pair.robust).toMatchObject({ ratio: null });
    expect(textOf(pairNote(pair, filters))).toContain("each side is a single team");
  });

  it("drop an injury of a team that has no exposure on that side, and say so", () => {
    const teams = ["t", "u", "v", "w"].map((id) => ({ id, name: id, sport: "soccer", sex: "mixed" }));
    const made = counts({
      teams,
      cells: teams
        .slice(1)
        .flatMap(({ id }) => [cell({ teamId: id, aes: 500 }), cell({ teamId: id, sex: "male", aes: 400 })]),
      injuries: [
        ...teams.flatMap(({ id }) => several(2, { teamId: id })),
        ...teams.slice(1).flatMap(({ id }) => several(3, { teamId: id, sex: "male" })),
      ],
    });
    const { pair, note } = compared(made, "sex");
    expect(pair.robust.dropped).toBe(2);
    expect(pair.robust.ratio?.estimate).toBeCloseTo(6 / 1500 / (9 / 1200), 10);
    expect(note).toContain("2 injuries of a team without exposure on that side cannot enter it.");
  });
});

describe("the groups of an address", () => {
  const rows = computeRates(
    counts({ cells: [cell(), cell({ sex: "male", aes: 400 }), cell({ sex: "not_stated", aes: 90 })] }),
    { ...defaultFilters, by: "sex" },
  ).rows;

  it("are girls and boys unless asked for others", () => {
    expect(choosePair(rows, {})).toMatchObject({ first: { key: "female" }, second: { key: "male" } });
    expect(choosePair(rows, { a: "not_stated" })).toMatchObject({
      first: { key: "not_stated" },
      second: { key: "female" },
    });
    expect(choosePair(rows, { b: "female" })).toMatchObject({
      first: { key: "male" },
      second: { key: "female" },
    });
  });

  it("are never replaced by others in silence", () => {
    expect(choosePair(rows, { a: "female", b: "unknown" }).problem).toContain(
      "no exposure under these filters",
    );
    expect(choosePair(rows, { a: "male", b: "male" }).problem).toContain("two different groups");
    expect(choosePair(rows.slice(0, 1), {}).problem).toContain("no two groups");
  });

  it("are refused in words where the address asks for what there is not", () => {
    const address = (search: string) => new URL(`http://localhost/club/rates/comparisons${search}`);
    expect(parseComparison(address(""))).toEqual({ compare: "sex", over: "season" });
    expect(() => parseComparison(address("?compare=height"))).toThrow(/compare: Use one of: sex/);
    expect(() => parseComparison(address("?over=ever"))).toThrow(/over: Use one of: season, all/);
  });
});

describe("girls and boys by sport", () => {
  const teams = ["soccer", "soccer", "soccer", "soccer", "handball"].map((sport, index) => ({
    ...{ id: `t${index}`, name: `Team ${index}`, sport },
    sex: index % 2 === 0 ? "girls" : "boys",
  }));
  const sexOf = (index: number) => (index % 2 === 0 ? ("female" as const) : ("male" as const));
  const made = counts({
    teams,
    cells: teams.map(({ id }, index) => cell({ teamId: id, sex: sexOf(index), aes: 1000 })),
    injuries: [16, 4, 14, 5, 9].flatMap((count, index) =>
      several(count, { teamId: `t${index}`, sex: sexOf(index) }),
    ),
    sessions: [],
  });
  const selection = select(made, defaultFilters);
  const { pairs, oneSided } = compareBySport({ counts: made, selection, filters: defaultFilters });

  it("are compared within each sport that both play", () => {
    expect(pairs.map(({ key, female, male }) => [key, female.injuries, male.injuries])).toEqual([
      ["soccer", 30, 9],
    ]);
    expect(pairs[0]?.ratio).toEqual(rateRatio({ events: 30, exposure: 2000 }, { events: 9, exposure: 2000 }));
    expect(pairs[0]?.robust.ratio?.clusters).toBe(4);
    const names = ["Girls", "Boys"] as const;
    expect(sportsTable(pairs, "aes", names).rows).toHaveLength(2);
    expect(sportRatiosTable(pairs, names).rows[0]?.cells).toMatchObject({ injuries: "30 and 9" });
  });

  it("are said with the sports of one sex alone", () => {
    expect(textOf(sportsSentence(pairs, oneSided, "Girls"))).toBe(
      "The rate of girls differs beyond its interval in soccer (higher), of one sport. Handball: one sex only.",
    );
    expect(textOf(sportsSentence([], oneSided, "Girls"))).toContain(
      "No sport has injuries and exposure of both.",
    );
  });

  it("are withheld where too little of a sport's own sessions is recorded", () => {
    const low = {
      ...made,
      sessions: [tally({ teamId: "t0", recorded: 2 }), tally({ teamId: "t4", held: 90, recorded: 90 })],
    };
    const [soccer] = compareBySport({
      counts: low,
      selection: select(low, defaultFilters),
      filters: defaultFilters,
    }).pairs;
    expect(soccer).toMatchObject({ ratio: null, female: { rate: null }, male: { rate: null } });
    expect(soccer?.robust.ratio).toBeNull();
  });
});
