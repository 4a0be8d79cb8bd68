import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import {
  countedInWords,
  injuriesInWords,
  narrowingInWords,
  peopleInWords,
} from "~/features/rates/filter-words";
import { changedFilters, defaultFilters, type RatesFilters } from "~/features/rates/filters";
import { dayWords, monthsOf, monthWords } from "~/features/rates/periods";
import { computeRates } from "~/features/rates/rates";
import { textOf, writeSentence } from "~/features/rates/sentence";
import { figure, type TableData, writeTableCsv } from "~/features/rates/tables";
import { searchWith } from "~/features/rates/views";
import { rateRatio } from "~/statistics";
import { cell, counts, several } from "./view";

const narrowed = { ...defaultFilters, contact: "without", area: "knee", sport: "soccer" } as const;

describe("the words of a view", () => {
  it("name the injuries and the people it is narrowed to", () => {
    expect(injuriesInWords(defaultFilters)).toBe("injuries with time loss");
    expect(injuriesInWords(narrowed)).toBe("non-contact and indirect contact knee injuries with time loss");
    expect(
      injuriesInWords({ ...defaultFilters, injuries: "medical-attention", occurrence: "recurrent" }),
    ).toBe("re-injuries that needed attention");
    expect(countedInWords(1, narrowed)).toBe("1 non-contact or indirect contact knee injury");
    expect(countedInWords(0, { ...defaultFilters, occurrence: "recurrent" })).toBe("no re-injuries");
    expect(peopleInWords({ ...narrowed, sex: "female", age: "15-16" })).toBe(
      "girls and women aged 15 to 16 in soccer",
    );
    expect(peopleInWords(defaultFilters)).toBe("");
  });

  it("say all that is narrowed, and nothing twice", () => {
    const words = (given: Partial<RatesFilters>) => narrowingInWords({ ...defaultFilters, ...given });
    expect(words({})).toBeNull();
    expect(words({ sex: "female" })).toBe("girls and women");
    expect(words({ side: "both" })).toBe("injuries, both sides");
    expect(words({ area: "knee", side: "left" })).toBe("left knee injuries");
    expect(words({ ...narrowed, side: "unknown", age: "unknown" })).toBe(
      `${injuriesInWords(narrowed).replace(" with time loss", "")}, side not known, age not known in soccer`,
    );
    expect(words({ occurrence: "recurrent", contact: "unknown" })).toBe("re-injuries, contact not known");
  });

  it("stand in the sentence, with the interval that allows for teams", () => {
    const teams = ["a", "b", "c", "d"].map((id) => ({ id, name: id, sport: "soccer", sex: "mixed" }));
    const view = counts({
      teams,
      cells: teams.flatMap(({ id }) => [
        cell({ teamId: id, aes: 500 }),
        cell({ teamId: id, sex: "male", aes: 600 }),
      ]),
      injuries: teams.flatMap(({ id }, index) => [
        ...several(3 + index, { teamId: id }),
        ...several(2, { teamId: id, sex: "male" }),
      ]),
      sessions: [],
    });
    const held = { teamId: "a", day: "2026-10-05", kind: "training", held: 4, recorded: 4 } as const;
    const rest = { headcount: 0, estimated: 0, withoutExposure: 0, unconfirmed: 0, cancelled: 0 };
    const rates = computeRates({ ...view, sessions: [{ ...held, ...rest }] }, { ...narrowed, by: "sex" });
    const text = textOf(writeSentence(rates, { ...narrowed, by: "sex" }, "The club"));
    const ratio = rateRatio({ events: 18, exposure: 2000 }, { events: 8, exposure: 2400 });
    expect(rates.comparison?.ratio).toEqual(ratio);
    expect(rates.comparison?.robust?.estimate).toBeCloseTo(ratio.estimate, 10);
    expect(text).toMatch(
      /^Girls in soccer had 18 non-contact and indirect contact knee injuries in 2,000 exposures/,
    );
    expect(text).toMatch(/times the boys' rate \([\d.]+ to [\d.]+; allowing for teams [\d.]+ to [\d.]+\)/);
  });

  it("name months and days", () => {
    expect(monthsOf("2025-11-20", "2026-02-01")).toEqual(["2025-11", "2025-12", "2026-01", "2026-02"]);
    expect(monthsOf("2026-05-02", "2026-04-30")).toEqual([]);
    expect([monthWords("2026-09"), dayWords("2026-09-07"), dayWords("2026-09-07", true)]).toEqual([
      "Sep 2026",
      "7 Sep",
      "7 Sep 2026",
    ]);
  });
});

describe("an address", () => {
  it("keeps the filters from view to view, and drops what belongs to one table", () => {
    expect(searchWith("?season=s&area=knee&sort=-rate&group=x")).toBe("?season=s&area=knee");
    expect(searchWith("?area=knee&by=sex", { area: undefined, group: "female" })).toBe(
      "?by=sex&group=female",
    );
    expect(searchWith("")).toBe("");
    expect(changedFilters(narrowed)).toEqual([
      ["sport", "soccer"],
      ["area", "knee"],
      ["contact", "without"],
    ]);
  });
});

describe("the file of a table", () => {
  const table: TableData = {
    id: "x",
    caption: "x",
    columns: [
      { id: "group", header: "Group", kind: "text" },
      { id: "injuries", header: "Injuries", kind: "count" },
      { id: "rate", header: "Rate", kind: "figure", form: "rate", unit: "per 1000 hours" },
    ],
    rows: [
      {
        key: "a",
        cells: {
          group: "=cmd",
          injuries: 3,
          rate: figure({ estimate: 1 / 3, lower: 0, upper: Infinity, level: 0.95, method: "exact" }, true),
        },
      },
      { key: "b", cells: { group: "B", injuries: null, rate: { reason: "no hours" } } },
    ],
  };
  const text = writeTableCsv(table, {
    organisation: "Club",
    season: "2026/27",
    from: "2026-08-01",
    to: "2026-12-01",
    team: "all teams",
    filters: narrowed,
    coverage: { recorded: 9, held: 10 },
  });
  const { data } = Papa.parse<Record<string, string>>(text.replace(/^\uFEFF/, ""), {
    header: true,
    skipEmptyLines: true,
  });

  it("holds the numbers unrounded, with limits, level, method and definition in each row", () => {
    expect(data).toHaveLength(2);
    expect(data[0]).toMatchObject({
      organisation: "Club",
      case_definition: "time loss of 1 day or more",
      narrowed_to: "sport=soccer; area=knee; contact=without",
      injuries: "3",
      rate: String(1 / 3),
      rate_lower: "0",
      rate_upper: "",
      rate_level: "0.95",
      rate_method: "exact",
      rate_unit: "per 1000 hours",
      rate_unstable: "unstable",
      held_sessions: "10",
    });
    expect(data[1]).toMatchObject({ rate: "no hours", injuries: "" });
  });

  it("escapes what a spreadsheet would run", () => {
    expect(data[0]?.group).toBe("'=cmd");
  });
});
