import { describe, expect, it } from "vitest";
import { defaultFilters, type RatesFilters } from "~/features/rates/filters";
import { hidesOtherTeams } from "~/features/rates/whole";
import { cell, counts } from "./view";

const hides = (cells: Parameters<typeof cell>[0][], filters: Partial<RatesFilters> = {}, own = ["mine"]) =>
  hidesOtherTeams(
    counts({
      cells: cells.map(cell),
      seasons: [
        { id: "x", name: "2025/26", startsOn: "2025-08-01", endsOn: "2026-06-30" },
        { id: "y", name: "2026/27", startsOn: "2026-08-01", endsOn: "2027-06-30" },
      ],
    }),
    { ...defaultFilters, ...filters },
    own,
  );
const [mine, a, b] = ["mine", "a", "b"].map((teamId) => ({ teamId }));

describe("the whole beside listed teams", () => {
  it("hides the others where two of them stand in it, or none, and never a single one", () => {
    expect(hides([{ ...mine }, { ...a }, { ...b }])).toBe(true);
    expect(hides([{ ...mine }])).toBe(true);
    expect(hides([{ ...mine }, { ...a }])).toBe(false);
    expect(hides([{ ...mine }, { ...a }, { ...b }], {}, ["mine", "a"])).toBe(false);
  });

  it("hides them under no narrowing that parts teams: two answers would be taken off each other", () => {
    const three = [{ ...mine }, { ...a }, { ...b }];
    expect(hides(three, { area: "knee", contact: "without" })).toBe(true);
    for (const narrowed of [{ sex: "female" }, { age: "13-14" }, { sport: "soccer" }])
      expect(hides(three, narrowed)).toBe(false);
  });

  it("takes a kind of session, estimated hours or a season that only one other team has for that team", () => {
    const base = [{ ...mine }, { ...a }, { ...b }];
    const oneMatch = [...base, { ...a, kind: "match" as const }];
    expect(hides(oneMatch)).toBe(true);
    expect(hides(oneMatch, { sessions: "match" })).toBe(false);
    expect(hides(oneMatch, { sessions: "training" })).toBe(false);
    const estimates = [...base, { ...a, kind: "match" as const, grade: "estimated" as const, aes: 0 }];
    expect(hides(estimates)).toBe(true);
    expect(hides(estimates, { per: "hours" })).toBe(false);
    expect(hides([...base, { ...a, day: "2026-01-10" }], { by: "season" })).toBe(false);
  });
});
