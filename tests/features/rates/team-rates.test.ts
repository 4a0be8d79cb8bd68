import { describe, expect, it } from "vitest";
import { expectedIn, standardOf } from "~/features/rates/expected";
import { defaultFilters } from "~/features/rates/filters";
import { select } from "~/features/rates/selection";
import { textOf } from "~/features/rates/sentence";
import { chanceOutside, teamRates } from "~/features/rates/teams/team-rates";
import { expectedTable, teamsTable } from "~/features/rates/teams/team-rates-tables";
import { teamsNote, teamsSentence } from "~/features/rates/teams/team-rates-words";
import { funnelLimits } from "~/statistics";
import { cell, counts, injury, several } from "./view";

// statistics.md "Shrunken rates" [R: MASS::glm.nb].
const events = [2, 9, 4, 0, 12, 3, 7, 1, 15, 5];
const aes = [900, 1500, 1100, 640, 1450, 980, 1320, 760, 1610, 1240];
const ids = aes.map((_, index) => `t${index}`);
const ten = counts({
  teams: ids.map((id, index) => ({ id, name: `Team ${index}`, sport: "soccer", sex: "girls" })),
  sessions: [],
  cells: ids.map((teamId, index) => cell({ teamId, aes: aes[index] ?? 0 })),
  injuries: [
    ...ids.flatMap((teamId, index) => several(events[index] ?? 0, { teamId })),
    // The team without a counted injury reports: one without time loss.
    injury({ teamId: "t3", daysLost: 0 }),
  ],
});
const ratesOf = (made: typeof ten, shown: readonly string[] | null = null) =>
  teamRates({ counts: made, selection: select(made, defaultFilters), unit: "aes" }, shown);

describe("teams against the whole", () => {
  const rates = ratesOf(ten);

  it("have the shrunken rates of R beside their own", () => {
    expect(rates.whole?.estimate).toBeCloseTo((58 / 11500) * 1000, 10);
    const shrunken = [
      3.696754, 5.408679, 4.223492, 3.159416, 6.600826, 4.006548, 5.015907, 3.461791, 7.270359, 4.384826,
    ];
    for (const [index, value] of shrunken.entries())
      expect(rates.teams[index]?.shrunken?.estimate).toBeCloseTo(value, 5);
    expect(rates.teams[0]?.shrunken?.lower).toBeCloseTo(1.606876, 5);
    expect(rates.spread).toBe("more than luck");
  });

  it("lie outside exactly where their own limits say", () => {
    // By hand, mid-P: none where 3.2 are expected, exp(-3.228) / 2 = 0.020; 15 where 8.1 are, 0.014.
    const whole = rates.whole?.estimate ?? 0;
    for (const { row, outside } of rates.teams) {
      const exposure = row.denominator ?? 0;
      const { lower, upper } = funnelLimits({ rate: whole, exposure, level: 0.95 });
      const own = ((row.injuries ?? 0) / exposure) * 1000;
      expect(outside[0]).toBe(own > upper ? "above" : own < lower ? "below" : null);
    }
    expect(rates.teams.filter(({ outside }) => outside[0]).map(({ row }) => row.label)).toEqual([
      "Team 3",
      "Team 8",
    ]);
  });

  it("name those outside, and how many luck alone would bring", () => {
    const luck = rates.teams.reduce((sum, team) => sum + team.luck, 0);
    expect(luck).toBeGreaterThan(0);
    const sentence = textOf(teamsSentence(rates, defaultFilters, "The club"));
    expect(sentence).toMatch(
      /^The club had 58 injuries, 5\.0 per 1000 athlete-exposures \(3\.8 to 6\.5\)\. Of 10 teams 2 lie outside the 95 % limits for their exposure: Team 3 \(0\.0, below; unstable\) and Team 8 \(9\.3, above\)\./,
    );
    expect(sentence).toContain(`By luck alone about ${luck.toFixed(1)} of 10 would`);
    expect(textOf(teamsNote(rates))).toContain("Team 8 1.8 (1.0");
  });

  it("are one in twenty by luck, or as near as whole counts come", () => {
    // Poisson(5) by hand: limits between which the counts lie, and the chance of all others.
    const chances = Array.from({ length: 60 }, (_, k) =>
      Math.exp(
        -5 +
          k * Math.log(5) -
          Array.from({ length: k }, (__, i) => Math.log(i + 1)).reduce((a, b) => a + b, 0),
      ),
    );
    const { lower, upper } = funnelLimits({ rate: 5, exposure: 1000, level: 0.95 });
    const outside = chances.reduce((sum, p, k) => (k > upper || k < lower ? sum + p : sum), 0);
    expect(chanceOutside(5, 1000, 0.95)).toBeCloseTo(outside, 10);
    expect(outside).toBeGreaterThan(0.01);
    expect(outside).toBeLessThan(0.1);
  });

  it("show a person of listed teams those teams and the whole's sums, and nothing of the others", () => {
    const own = ratesOf(ten, ["t2"]);
    expect(own.whole).toEqual(rates.whole);
    expect(own.teams).toEqual([rates.teams[2]]);
    const sent = JSON.stringify([
      teamsTable(own, "aes", "All"),
      expectedTable(own),
      teamsSentence(own, defaultFilters, "Club"),
      teamsNote(own),
      own.limits,
    ]);
    expect(sent).toContain("Team 2");
    expect(sent).not.toMatch(/Team [013-9]/);
  });

  it("say what cannot be shown of fewer than three, and that a silent team has not reported", () => {
    const two = counts({
      ...ten,
      teams: ten.teams.slice(0, 2),
      cells: ten.cells.slice(0, 2),
      injuries: ten.injuries.slice(0, 11),
    });
    const few = ratesOf(two);
    expect(textOf(teamsSentence(few, defaultFilters, "The club"))).toContain("With 2 teams that have a rate");
    expect(few.limits).toEqual([]);
    expect(few.teams.every(({ shrunken, ratio, outside }) => !shrunken && !ratio && !outside[0])).toBe(true);
    const silent = ratesOf({
      ...ten,
      teams: [...ten.teams, { id: "s", name: "Silent", sport: "soccer", sex: "girls" }],
      silent: [cell({ teamId: "s" })],
    });
    expect(silent.teams.at(-1)?.row).toMatchObject({ injuries: null, rate: null });
    expect(textOf(teamsNote(silent))).toContain("Not reported: Silent.");
  });
});

describe("expected injuries", () => {
  const cells = [
    cell({ teamId: "t", age: 13, aes: 1000 }),
    cell({ teamId: "t", age: 13, kind: "match", aes: 200 }),
    cell({ teamId: "u", age: 15, aes: 500 }),
    cell({ teamId: "u", age: 13, kind: "match", aes: 300 }),
    cell({ teamId: "u", age: null, aes: 50 }),
  ];
  const counted = [
    ...several(6, { age: 13 }),
    ...several(5, { age: 13, sessionKind: "match" }),
    ...several(2, { age: 15 }),
    injury({ age: 13, sessionKind: null, onset: "gradual" }),
    injury({ age: 40, sessionKind: null, onset: "gradual" }),
  ];
  const { bands } = counts();
  const standard = standardOf({ cells, counted }, "age-kind", bands, "aes");

  it("are counted by hand", () => {
    // Training at 13: 6 in 1000; matches at 13: 5 in 500; gradual at 13: 1 in 1500; the one of 40, an age without
    // exposure of its own: 1 in 2050 of all.
    const own = cells.filter(({ teamId }) => teamId === "t");
    expect(expectedIn(standard, own)?.estimate).toBeCloseTo(
      6 + (200 * 5) / 500 + 1200 / 1500 + 1200 / 2050,
      10,
    );
  });

  it("are of the standard itself what it had, however it is parted", () => {
    expect(expectedIn(standard, cells)?.estimate).toBeCloseTo(counted.length, 10);
    const parts = ["t", "u"].map(
      (id) =>
        expectedIn(
          standard,
          cells.filter(({ teamId }) => teamId === id),
        )?.estimate ?? 0,
    );
    expect(parts.reduce((sum, part) => sum + part, 0)).toBeCloseTo(counted.length, 10);
    expect(expectedIn(standard, [])).toBeNull();
  });
});
