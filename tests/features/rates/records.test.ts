import { describe, expect, it } from "vitest";
import { defaultFilters } from "~/features/rates/filters";
import { computeRates } from "~/features/rates/rates";
import { exposureBehind, figurePartOf, groupLabel, injuriesBehind } from "~/features/rates/records/records";
import { select } from "~/features/rates/selection";
import { cell, counts, injury } from "./view";

const view = counts({
  cells: [
    cell({ aes: 10, hours: 15 }),
    cell({ sex: "male", aes: 8, hours: 12 }),
    cell({ day: "2026-11-02", aes: 9, hours: 13 }),
  ],
  injuries: [
    injury({ id: "1", daysLost: 40, ongoing: true }),
    injury({ id: "2", bodyArea: "ankle", daysLost: 3 }),
    injury({ id: "3", sex: "male", bodyArea: "ankle", daysLost: 9 }),
    injury({ id: "4", outsideSport: true }),
  ],
});
const behind = (search: string, by = defaultFilters.by) => {
  const filters = { ...defaultFilters, by };
  const part = figurePartOf(new URLSearchParams(search), by);
  const selection = select(view, filters);
  return {
    ids: injuriesBehind(part, view, selection).map(({ id }) => id),
    sessions: exposureBehind(part, view, selection),
    label: groupLabel(part, view),
  };
};

describe("the records behind a figure", () => {
  it("are those of its group, its severity, its course", () => {
    expect(behind("")).toMatchObject({ ids: ["1", "2", "3"], label: null });
    expect(behind("group=female", "sex")).toMatchObject({ ids: ["1", "2"], label: "Girls" });
    expect(behind("group=ankle", "area")).toMatchObject({ ids: ["2", "3"], label: "Ankle" });
    expect(behind("group=2026-10", "month").ids).toEqual(["1", "2", "3"]);
    expect(behind("severity=8-28").ids).toEqual(["3"]);
    expect(behind("lost=ongoing").ids).toEqual(["1"]);
    expect(behind("group=nobody", "sex")).toMatchObject({ ids: [], label: null });
    expect(behind("severity=9-9").ids).toHaveLength(3);
  });

  it("stand over the group's own exposure, and over all of it for groups of injuries", () => {
    expect(behind("group=female", "sex").sessions).toEqual([
      { teamId: "t", day: "2026-11-02", kind: "training", grade: "recorded", aes: 9, hours: 13 },
      { teamId: "t", day: "2026-10-05", kind: "training", grade: "recorded", aes: 10, hours: 15 },
    ]);
    expect(behind("group=ankle", "area").sessions).toHaveLength(2);
    expect(behind("group=ankle", "area").sessions.at(-1)).toMatchObject({ aes: 18, hours: 27 });
  });

  it("are as many as the row of the table says, in every grouping", () => {
    for (const by of ["sex", "age", "team", "month", "contact", "area", "area-side", "movement"] as const)
      for (const { key, injuries } of computeRates(view, { ...defaultFilters, by }).rows)
        expect(behind(new URLSearchParams({ group: key }).toString(), by).ids).toHaveLength(injuries ?? 0);
  });
});
