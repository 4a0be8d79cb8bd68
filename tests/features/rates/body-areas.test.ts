import { describe, expect, it } from "vitest";
import { type AreaWithSides, bodyAreasOf } from "~/features/rates/body-areas/body-areas";
import { bodyAreasTables, pictureRows } from "~/features/rates/body-areas/body-areas-tables";
import { bodyAreasNote, bodyAreasSentence, sidesWords } from "~/features/rates/body-areas/body-areas-words";
import type { InjuryRow } from "~/features/rates/counting";
import { defaultFilters, type RatesFilters } from "~/features/rates/filters";
import { textOf } from "~/features/rates/sentence";
import type { BodyArea, Side } from "~db/schema/codes";
import { expectInterval } from "../../statistics/agreement";
import { cell, counts, injury, tally } from "./view";

const hurt = (bodyArea: BodyArea, side: Side, ...days: number[]): InjuryRow[] =>
  days.map((daysLost, index) => injury({ id: `${bodyArea} ${side} ${index}`, bodyArea, side, daysLost }));

/** 1000 athlete-exposures; 10 knees (54 days), 5 ankles (140), 2 heads (20), 1 hand (30): 244 days. */
const injuries = [
  ...hurt("knee", "left", 5, 5, 5, 5, 5, 5),
  ...hurt("knee", "right", 6, 6, 6, 6),
  ...hurt("ankle", "left", 20, 20, 20),
  ...hurt("ankle", "right", 80),
  ...hurt("ankle", "unknown", 0),
  ...hurt("head", "none", 10, 10),
  ...hurt("hand", "right", 30),
];
const attended: RatesFilters = { ...defaultFilters, injuries: "medical-attention" };
const club = counts({ cells: [cell({ aes: 1000 })], injuries });
const areaOf = (areas: readonly AreaWithSides[], area: BodyArea) => areas.find((row) => row.area === area);
const say = (given: Parameters<typeof counts>[0], filters = attended) =>
  textOf(bodyAreasSentence(bodyAreasOf(counts(given), filters), filters, "The club"));

/** P(X >= a) less half of P(X = a) for X ~ binomial(n, p): the upper mid tail, summed term by term. */
function midTail(a: number, n: number, p: number) {
  const choose = (k: number) =>
    Array.from({ length: k }, (_, i) => (n - i) / (i + 1)).reduce((x, y) => x * y, 1);
  const at = (k: number) => choose(k) * p ** k * (1 - p) ** (n - k);
  return Array.from({ length: n - a + 1 }, (_, i) => at(a + i)).reduce((x, y) => x + y, 0) - at(a) / 2;
}

describe("body areas", () => {
  it("count each area and side over the whole exposure, the most days first", () => {
    const { areas, total, allDays } = bodyAreasOf(club, attended);
    expect(areas.map(({ area, injuries: count, daysLost }) => [area, count, daysLost])).toEqual([
      ["ankle", 5, 140],
      ["knee", 10, 54],
      ["hand", 1, 30],
      ["head", 2, 20],
    ]);
    expect(allDays).toBe(244);
    expect(total.injuries).toBe(18);
    const knee = areaOf(areas, "knee");
    // 10 in 1000, exact (Garwood): statistics.md [R].
    expectInterval(knee?.rate ?? { lower: null, upper: null }, "10 (4.795389–18.390356)");
    // 6 and 4 in 1000, each side with the whole exposure.
    expectInterval(knee?.left?.rate ?? { lower: null, upper: null }, "6 (2.201894–13.059474)");
    expectInterval(knee?.right?.rate ?? { lower: null, upper: null }, "4 (1.089865–10.241589)");
    expect(knee?.right?.unstable).toBe(true);
    expect(areaOf(areas, "ankle")?.daysShare).toBeCloseTo(140 / 244, 12);
    expect(areaOf(areas, "ankle")?.largestShare).toBeCloseTo(80 / 140, 12);
  });

  it("have no sides where nothing is of a side, and a rate of 0 on a side without an injury", () => {
    const { areas } = bodyAreasOf(club, attended);
    expect(areaOf(areas, "head")).toMatchObject({ left: null, right: null });
    expect(areaOf(areas, "head")?.middle.map(({ side, injuries: count }) => [side, count])).toEqual([
      ["none", 2],
    ]);
    const rows = pictureRows(bodyAreasOf(club, attended));
    expect(rows.find(({ label }) => label.startsWith("Hand"))?.left).toMatchObject({
      value: 0,
      lower: 0,
      events: 0,
      unstable: true,
    });
    expect(rows.find(({ label }) => label === "Head, 20 days")).toMatchObject({
      left: null,
      right: null,
      middle: { text: "2 no side" },
    });
    expect(rows.find(({ label }) => label === "Ankle, 140 days")?.middle?.text).toBe("1 side not known");
  });

  it("compare left and right by their counts alone", () => {
    const ratio = areaOf(bodyAreasOf(club, attended).areas, "knee")?.ratio;
    expect(ratio?.estimate).toBeCloseTo(1.5, 12);
    // Given 10, those of the left are binomial; at each limit of the ratio a mid tail is 2.5 %.
    const share = (limit = 0) => limit / (1 + limit);
    expect(midTail(6, 10, share(ratio?.lower))).toBeCloseTo(0.025, 8);
    expect(1 - midTail(6, 10, share(ratio?.upper))).toBeCloseTo(0.025, 8);
    const doubled = bodyAreasOf(counts({ cells: [cell({ aes: 2000 })], injuries }), attended);
    expect(areaOf(doubled.areas, "knee")?.ratio).toEqual(ratio);
  });

  it("compare nothing of fewer than five, nor within one side", () => {
    expect(areaOf(bodyAreasOf(club, attended).areas, "ankle")?.ratio).toBeNull();
    expect(areaOf(bodyAreasOf(club, { ...attended, side: "left" }).areas, "knee")?.ratio).toBeNull();
  });

  it("say where most days go and where most injuries are", () => {
    expect(say({ cells: [cell({ aes: 1000 })], injuries })).toBe(
      "Ankle injuries cost 140 of 244 days lost, 57 %, in 5 injuries. Knee injuries have the highest rate: 10 injuries, 10.0 per 1000 athlete-exposures (4.8 to 18.4).",
    );
    expect(say({ cells: [cell({ aes: 1000 })], injuries: hurt("knee", "left", 4, 4, 4, 4, 4, 4) })).toBe(
      "Knee injuries cost 24 of 24 days lost, 100 %, in 6 injuries, 6.0 per 1000 athlete-exposures (2.2 to 13.1).",
    );
    const tied = [...hurt("knee", "left", 1), ...hurt("thigh", "left", 2), ...hurt("head", "none", 9)];
    expect(say({ cells: [cell({ aes: 1000 })], injuries: tied })).toContain(
      "Head, thigh and knee have the highest rate, 1 injury each, 1.0 per",
    );
  });

  it("keep the days of all areas in sight where the view is narrowed to one", () => {
    expect(say({ cells: [cell({ aes: 1000 })], injuries }, { ...attended, area: "ankle" })).toContain(
      "Ankle injuries cost 140 of 244 days lost, 57 %",
    );
  });

  it("speak plainly of nothing, of no days and of too little exposure", () => {
    expect(say({ cells: [cell()] })).toBe(
      "The club had no injuries that needed attention in this season so far.",
    );
    expect(say({ sessions: [] })).toContain("no session in this season that was held");
    expect(say({ silent: [cell()] })).toContain("The club has not reported: no injury is entered");
    expect(say({ cells: [cell({ aes: 1000 })], injuries: hurt("knee", "left", 0, 0) })).toContain(
      "The club lost no day to 2 injuries",
    );
    const withheld = { cells: [cell()], injuries, sessions: [tally({ recorded: 4 })] };
    expect(say(withheld)).toContain("Rates are withheld");
    expect(say(withheld)).not.toContain("per 1000");
    expect(
      pictureRows(bodyAreasOf(counts(withheld), attended)).every(({ left, right }) => !left && !right),
    ).toBe(true);
  });

  it("put left against right in words, without taking a leg for the dominant one", () => {
    const words = (list: InjuryRow[]) => {
      const [row] = bodyAreasOf(counts({ cells: [cell({ aes: 1000 })], injuries: list }), attended).areas;
      return row ? textOf(sidesWords(row)) : "";
    };
    const both = words([...hurt("knee", "left", 1, 1, 1, 1, 1, 1), ...hurt("knee", "right", 1, 1, 1, 1)]);
    expect(both).toContain(
      "Knee injuries: 6 left, 4 right. Both sides were exposed in the same sessions, so the left's rate is 1.5 times the right's",
    );
    expect(both).toContain("the interval includes no difference");
    expect(both).toContain("not assumed");
    expect(words(hurt("knee", "left", 1, 1, 1, 1, 1, 1))).toContain("has no upper limit");
    expect(words([...hurt("knee", "left", 1, 1), ...hurt("knee", "right", 1)])).toContain(
      "too few to compare",
    );
  });

  it("name the one long injury only where several stand beside it", () => {
    const note = textOf(bodyAreasNote(bodyAreasOf(club, attended), attended, "2026-12-01"));
    expect(note).toContain("One of the ankle injuries makes up more than half of their days.");
    expect(note).toContain("counted to 1 Dec 2026");
  });

  it("give tables that add up and hold no number that is none", () => {
    for (const cells of [[], [cell({ aes: 1000 })]]) {
      const tables = bodyAreasTables(
        bodyAreasOf(counts({ cells, injuries }), attended),
        "aes",
        (by, group) => `${by}:${group}`,
      );
      const text = JSON.stringify(tables, (_, part) =>
        typeof part === "number" && !Number.isFinite(part) ? "BROKEN" : part,
      );
      expect(text).not.toContain("BROKEN");
      const sum = (rows: readonly { cells: Record<string, unknown>; total?: boolean }[], id: string) =>
        rows.filter(({ total }) => !total).reduce((all, row) => all + Number(row.cells[id]), 0);
      const total = tables.areas.rows.find((row) => row.total)?.cells;
      for (const id of ["injuries", "days"]) {
        expect(sum(tables.areas.rows, id)).toBe(total?.[id]);
        expect(sum(tables.sides.rows, id)).toBe(total?.[id]);
      }
      expect(tables.sides.rows.find(({ key }) => key === "ankle left")?.href).toBe("area-side:ankle left");
    }
  });
});
