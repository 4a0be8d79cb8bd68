import { describe, expect, it } from "vitest";
import { defaultFilters, groupings, type RatesFilters } from "~/features/rates/filters";
import {
  assemblePrevalence,
  type PrevalenceSums,
  peopleGroupingOf,
  prevalenceOf,
} from "~/features/rates/prevalence/prevalence";
import { prevalenceTables } from "~/features/rates/prevalence/prevalence-tables";
import {
  groupingNote,
  prevalenceNote,
  prevalenceSentence,
} from "~/features/rates/prevalence/prevalence-words";
import { textOf } from "~/features/rates/sentence";
import { isFigure } from "~/features/rates/tables";
import { expectInterval } from "../../statistics/agreement";

const filters: RatesFilters = { ...defaultFilters, by: "sex" };

/** A week of 20 athletes, two of them not fully available every day: one unavailable and hurt, one modified and ill. */
const sums = (given: Partial<PrevalenceSums> = {}): PrevalenceSums => ({
  slice: "all",
  key: "",
  week: null,
  days: 7,
  roster: 140,
  limited: 0.7,
  unavailable: 0.35,
  modified: 0.35,
  injury: 0.35,
  illness: 0.35,
  other: 0,
  affected: 6,
  ...given,
});

const group = (key: string, label: string) => ({ key, label, sex: null, band: null, teamId: null });
const groups = [group("female", "Girls"), group("male", "Boys"), group("not_stated", "Sex not stated")];
const sundayOf = (week: string) => ({ "2026-11-23": "2026-11-29", "2026-11-30": "2026-12-06" })[week] ?? "";
const assemble = (rows: readonly PrevalenceSums[], today = "2026-12-01") =>
  assemblePrevalence(rows, { groups, today, sundayOf });

describe("prevalence", () => {
  it("is the mean of the days' shares, its interval on the roster of an average day", () => {
    const whole = prevalenceOf(sums());
    expect(whole.roster).toBe(20);
    expect(whole.limited).toBeCloseTo(2, 12);
    // Wilson by hand for 2 of 20 and, for the halves, 1 of 20.
    expectInterval(whole.shares.limited, "10 (2.786648–30.103364)");
    expectInterval(whole.shares.unavailable, "5 (0.888145–23.613119)");
    expect(whole.shares.other).toMatchObject({ estimate: 0, lower: 0 });
    expect(whole.shares.other.upper).toBeGreaterThan(16);
  });

  it("does not grow surer with the days: 70 days say no more than 7", () => {
    const longer = sums({ days: 70, roster: 1400, limited: 7, unavailable: 3.5, modified: 3.5 });
    expect(prevalenceOf(longer).shares.limited.upper).toBeCloseTo(
      prevalenceOf(sums()).shares.limited.upper,
      9,
    );
  });

  it("is unstable with fewer than five different athletes", () => {
    expect(prevalenceOf(sums({ affected: 4 })).unstable).toBe(true);
    expect(prevalenceOf(sums({ affected: 5 })).unstable).toBe(false);
  });

  it("keeps the groups in their order and drops those without a day on a roster", () => {
    const { groups: found } = assemble([
      sums(),
      sums({ slice: "group", key: "male" }),
      sums({ slice: "group", key: "female" }),
    ]);
    expect(found.map((row) => row.group.label)).toEqual(["Girls", "Boys"]);
  });

  it("marks the week that is not finished, also on its Sunday", () => {
    const rows = [
      sums(),
      sums({ week: "2026-11-23" }),
      sums({ week: "2026-11-30", days: 2, roster: 40, limited: 0.2 }),
    ];
    expect(assemble(rows).weeks.map(({ finished }) => finished)).toEqual([true, false]);
    expect(assemble(rows, "2026-12-06").weeks.at(-1)?.finished).toBe(false);
    expect(assemble(rows, "2026-12-07").weeks.at(-1)?.finished).toBe(true);
    expect(prevalenceTables(assemble(rows), () => undefined).weeks.rows.at(-1)?.cells.name).toBe(
      "30 Nov 2026, not finished",
    );
  });

  it("is said in words, with the latest week beside the season", () => {
    const parts = assemble([sums(), sums({ week: "2026-11-30", days: 2, roster: 40, limited: 0.2 })]);
    expect(textOf(prevalenceSentence(parts, filters, "The club"))).toBe(
      "The club: on an average day of the season 2.0 of 20 athletes were not fully available, 10.0 % (2.8 to 30.1): about 1.0 unavailable and 1.0 modified. This week, from 30 Nov and not finished, it is 10.0 % (2.8 to 30.1); the two intervals overlap.",
    );
    const none = assemble([
      sums({ limited: 0, unavailable: 0, modified: 0, injury: 0, illness: 0, affected: 0 }),
    ]);
    expect(textOf(prevalenceSentence(none, filters, "The club"))).toContain(
      "0.0 of 20 athletes were not fully available, 0.0 % (0.0 to 16.1).",
    );
    expect(textOf(prevalenceSentence(assemble([]), filters, "The club"))).toContain("nobody on a roster");
  });

  it("says which of the filters change nothing", () => {
    const parts = assemble([sums()]);
    expect(textOf(prevalenceNote(parts, filters))).not.toContain("Nor does");
    expect(textOf(prevalenceNote(parts, { ...filters, area: "knee" }))).toContain(
      "Nor does the narrowing to a kind of injury",
    );
    expect(textOf(prevalenceNote(parts, { ...filters, sex: "female" }))).not.toContain("Nor does");
  });

  it("says plainly when a grouping is not of people", () => {
    expect(groupings.filter((by) => peopleGroupingOf(by) !== by)).toEqual([
      "kind",
      "season",
      "contact",
      "movement",
      "area",
      "area-side",
      "tissue",
    ]);
    expect(groupingNote({ ...filters, by: "kind" })).toContain("has no session kind");
    expect(groupingNote({ ...filters, by: "season" })).toContain("one season at a time");
    expect(groupingNote(filters)).toBeNull();
  });

  it("shows no figure without its limits in any table", () => {
    const rows = [sums(), sums({ week: "2026-11-30" }), sums({ slice: "group", key: "female", affected: 1 })];
    for (const table of Object.values(prevalenceTables(assemble(rows), () => "/x"))) {
      expect(table.rows.length, table.id).toBeGreaterThan(0);
      for (const { cells } of table.rows)
        for (const { id, kind } of table.columns) {
          const cell = cells[id];
          if (kind === "figure")
            expect(
              isFigure(cell) && [cell.estimate, cell.lower, cell.upper].every(Number.isFinite),
              `${table.id} ${id}`,
            ).toBe(true);
          else expect(cell, `${table.id} ${id}`).toBeDefined();
        }
    }
  });
});
