import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type ExposureParts, exposureOfSession, ruleFor } from "~/features/sessions/exposure";

const adults = { fromAge: 18, playersOnField: 11, regulationMinutes: 90 };
const session = {
  state: "held",
  kind: "training",
  exposureGrade: "recorded",
  headcount: null,
  headcountMinutes: null,
  abandonedAfter: null,
};
const parts = (given: Partial<ExposureParts> = {}): ExposureParts => ({
  participations: [],
  roster: [],
  unavailable: new Set(),
  rule: adults,
  ...given,
});

describe("recorded", () => {
  it("counts who took part with minutes, and nobody else", () => {
    const exposure = exposureOfSession(
      session,
      parts({
        participations: [
          { athleteId: "a", presence: "took_part", minutes: 90 },
          { athleteId: "b", presence: "took_part", minutes: 30 },
          { athleteId: "c", presence: "took_part", minutes: 0 },
          { athleteId: "d", presence: "present_only", minutes: 0 },
          { athleteId: "e", presence: "absent", minutes: 0 },
        ],
      }),
    );
    expect(exposure).toMatchObject({ grade: "recorded", aes: 2, hours: 2, unknown: { aes: 0, hours: 0 } });
    expect(exposure.athletes.map(({ athleteId }) => athleteId)).toEqual(["a", "b"]);
  });
});

describe("headcount", () => {
  const counted = { ...session, exposureGrade: "headcount", headcount: 12, headcountMinutes: 60 };
  const roster = Array.from({ length: 16 }, (_, index) => `athlete ${index}`);

  it("spreads equally over the roster less the unavailable", () => {
    const exposure = exposureOfSession(counted, parts({ roster, unavailable: new Set(["athlete 0"]) }));
    expect(exposure).toMatchObject({ aes: 12, hours: 12, unknown: { aes: 0, hours: 0 } });
    expect(exposure.athletes).toHaveLength(15);
    expect(exposure.athletes.some(({ athleteId }) => athleteId === "athlete 0")).toBe(false);
    expect(exposure.athletes[0]?.aes).toBeCloseTo(12 / 15, 12);
  });

  it("gives what exceeds the roster to unknown", () => {
    const exposure = exposureOfSession(counted, parts({ roster: roster.slice(0, 10) }));
    expect(exposure.athletes.every(({ aes }) => aes === 1)).toBe(true);
    expect(exposure).toMatchObject({ aes: 12, hours: 12, unknown: { aes: 2, hours: 2 } });
  });

  it("without a roster is all unknown", () => {
    expect(exposureOfSession(counted, parts())).toMatchObject({ aes: 12, unknown: { aes: 12, hours: 12 } });
  });

  it("always adds up to the headcount", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 60 }),
        fc.integer({ min: 1, max: 240 }),
        fc.integer({ min: 0, max: 40 }),
        fc.integer({ min: 0, max: 40 }),
        (headcount, headcountMinutes, size, out) => {
          const people = Array.from({ length: size }, (_, index) => String(index));
          const exposure = exposureOfSession(
            { ...counted, headcount, headcountMinutes },
            parts({ roster: people, unavailable: new Set(people.slice(0, out)) }),
          );
          const sum = exposure.athletes.reduce((total, { aes }) => total + aes, 0) + exposure.unknown.aes;
          expect(sum).toBeCloseTo(headcount, 9);
          expect(exposure.hours).toBeCloseTo((headcount * headcountMinutes) / 60, 9);
          expect(exposure.athletes.every(({ aes }) => aes <= 1)).toBe(true);
        },
      ),
    );
  });
});

describe("estimated", () => {
  const match = { ...session, kind: "match", exposureGrade: "estimated" };

  it("gives 16.5 hours for a football match of adults, and no athlete-exposures", () => {
    expect(exposureOfSession(match, parts())).toMatchObject({
      grade: "estimated",
      aes: 0,
      hours: 16.5,
      athletes: [],
      unknown: { aes: 0, hours: 16.5 },
    });
  });

  it("counts an abandoned match until it stopped, at most regulation time", () => {
    const stopped = { ...match, state: "abandoned", abandonedAfter: 30 };
    expect(exposureOfSession(stopped, parts()).hours).toBe(5.5);
    expect(exposureOfSession({ ...stopped, abandonedAfter: 120 }, parts()).hours).toBe(16.5);
  });

  it("is nothing without a rule, and never for a training", () => {
    expect(exposureOfSession(match, parts({ rule: null }))).toMatchObject({ grade: "none", hours: 0 });
    expect(exposureOfSession({ ...match, kind: "training" }, parts()).hours).toBe(0);
  });
});

it("a planned or cancelled session has no exposure, whatever was entered", () => {
  const participations = [{ athleteId: "a", presence: "took_part", minutes: 90 }];
  for (const state of ["planned", "cancelled"])
    expect(exposureOfSession({ ...session, state }, parts({ participations }))).toMatchObject({
      grade: "none",
      aes: 0,
      hours: 0,
    });
  expect(exposureOfSession({ ...session, exposureGrade: "none" }, parts({ participations })).aes).toBe(0);
});

describe("the rule of a team's age", () => {
  const rules = [{ ...adults, fromAge: 0 }, { ...adults, fromAge: 14 }, adults];
  it("is the one from the highest age that the team's athletes can have", () => {
    expect(ruleFor(rules, 12)?.fromAge).toBe(0);
    expect(ruleFor(rules, 14)?.fromAge).toBe(0);
    expect(ruleFor(rules, 15)?.fromAge).toBe(14);
    expect(ruleFor(rules, 18)?.fromAge).toBe(14);
    expect(ruleFor(rules, 19)?.fromAge).toBe(18);
    expect(ruleFor(rules, null)?.fromAge).toBe(18);
    expect(ruleFor([], 12)).toBeNull();
  });
});
