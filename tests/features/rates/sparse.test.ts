import { describe, expect, it } from "vitest";
import { defaultFilters } from "~/features/rates/filters";
import { computeRates } from "~/features/rates/rates";
import { cell, counts, injury } from "./view";

/** Few injuries, in corners where nobody was exposed. */

const teams = [
  { id: "girls", name: "Girls", sport: "soccer", sex: "girls" },
  { id: "boys", name: "Boys", sport: "handball", sex: "boys" },
];
const cells = [cell({ teamId: "girls", sex: "female" }), cell({ teamId: "boys", sex: "male" })];

describe("injuries of athletes whose team has no exposure of their own sex", () => {
  const gradual = { onset: "gradual", sessionKind: null, sessionId: null, sessionState: null } as const;
  const view = counts({
    teams,
    cells,
    injuries: [
      injury({ ...gradual, id: "1", sex: "female", teamId: "boys" }),
      injury({ ...gradual, id: "2", sex: "male", teamId: "girls" }),
    ],
  });

  it("are compared without limits for teams, which have no event to rest on", () => {
    const { comparison } = computeRates(view, { ...defaultFilters, by: "sex" });
    expect(comparison?.ratio?.estimate).toBeCloseTo(1, 9);
    expect(comparison?.robust).toBeNull();
  });
});

describe("team-weeks that were reported on", () => {
  it("are those of the teams and sessions looked at", () => {
    const view = counts({ teams, cells, injuries: [injury({ teamId: "girls" })] });
    expect(computeRates(view, defaultFilters).reportedWeeks).toEqual({ reported: 1, all: 2 });
    const soccer = computeRates(view, { ...defaultFilters, sport: "soccer" });
    expect(soccer.reportedWeeks).toEqual({ reported: 1, all: 1 });
    const matches = computeRates(view, { ...defaultFilters, sessions: "match" });
    expect(matches.reportedWeeks).toEqual({ reported: 0, all: 0 });
  });
});
