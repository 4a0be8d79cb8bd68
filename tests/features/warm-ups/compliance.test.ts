import { describe, expect, it } from "vitest";
import {
  athleteDose,
  type ComplianceSession,
  completeness,
  complianceOf,
  isCompliant,
  sessionCompliance,
  weeklyDose,
} from "~/features/warm-ups/compliance";
import { proportion } from "~/statistics";

let next = 0;
function session(given: Partial<ComplianceSession> & { blocks?: number; skipped?: boolean } = {}) {
  const { blocks, skipped, ...rest } = given;
  next += 1;
  const warmUp: ComplianceSession["warmUp"] = skipped
    ? { outcome: "skipped", blocks: 0, skipReason: "no_time" }
    : blocks
      ? { outcome: blocks === 5 ? "full" : "part", blocks, skipReason: null }
      : null;
  return {
    sessionId: `session ${next}`,
    teamId: "team",
    day: "2026-11-03",
    week: "2026-11-02",
    blockShare: 1,
    participations: 0,
    warmedUp: 0,
    warmUp,
    ...rest,
  };
}

describe("session compliance", () => {
  const sessions = [
    ...Array.from({ length: 6 }, () => session({ blocks: 5 })),
    session({ blocks: 3 }),
    session({ skipped: true }),
    session(),
    session(),
  ];

  it("is of the recorded, and of all held with the unrecorded as not done", () => {
    const { ofRecorded, ofHeld } = sessionCompliance(sessions);
    expect(ofRecorded).toMatchObject({ successes: 6, trials: 8 });
    expect(ofHeld).toMatchObject({ successes: 6, trials: 10 });
    expect(ofRecorded.estimate).toEqual(proportion({ successes: 6, trials: 8 }));
    expect(ofHeld.estimate?.method).toBe("Wilson score");
  });

  it("judges by the target share of blocks", () => {
    expect(isCompliant(session({ blocks: 4, blockShare: 0.8 }))).toBe(true);
    expect(isCompliant(session({ blocks: 3, blockShare: 0.8 }))).toBe(false);
    expect(isCompliant(session({ blocks: 3, blockShare: 0.6 }))).toBe(true);
    expect(isCompliant(session({ skipped: true, blockShare: 0 }))).toBe(false);
    expect(isCompliant(session({ blockShare: 0 }))).toBe(false);
  });

  it("has no estimate without sessions, never a false 0 or NaN", () => {
    expect(sessionCompliance([])).toEqual({
      ofRecorded: { successes: 0, trials: 0, estimate: null },
      ofHeld: { successes: 0, trials: 0, estimate: null },
    });
    const unrecorded = sessionCompliance([session()]);
    expect(unrecorded.ofRecorded.estimate).toBeNull();
    expect(unrecorded.ofHeld.estimate?.estimate).toBe(0);
  });

  it("keeps not recorded apart from skipped", () => {
    expect(complianceOf(sessions)).toMatchObject({
      sessions: 10,
      recorded: 8,
      full: 6,
      part: 1,
      skipped: 1,
      notRecorded: 2,
      skipReasons: { no_time: 1 },
    });
  });
});

describe("weekly dose", () => {
  it("counts warm-ups per week in which the team met", () => {
    const dose = weeklyDose([
      session({ blocks: 5 }),
      session({ blocks: 2 }),
      session({ skipped: true, week: "2026-11-09" }),
      session({ blocks: 5, teamId: "other" }),
    ]);
    expect(dose).toMatchObject({ warmUps: 3, teamWeeks: 3 });
    expect(dose.estimate?.estimate).toBe(1);
    // Garwood's exact limits of 3 events, over 3 weeks.
    expect(dose.estimate?.lower).toBeCloseTo(0.618672 / 3, 5);
    expect(dose.estimate?.upper).toBeCloseTo(8.767273 / 3, 5);
    expect(weeklyDose([]).estimate).toBeNull();
  });
});

describe("completeness", () => {
  it("is the mean share of blocks of what was done, skipped ones left out", () => {
    const { warmUps, estimate } = completeness([
      session({ blocks: 5 }),
      session({ blocks: 2 }),
      session({ skipped: true }),
      session(),
    ]);
    expect(warmUps).toBe(2);
    expect(estimate?.estimate).toBeCloseTo(0.7, 12);
    expect(estimate?.lower).toBe(proportion({ successes: 1, trials: 2 }).lower);
    expect(estimate?.upper).toBe(proportion({ successes: 2, trials: 2 }).upper);
  });

  it("is exact at its ends", () => {
    const all = completeness(Array.from({ length: 10 }, () => session({ blocks: 5 })));
    expect(all.estimate).toMatchObject({ estimate: 1, upper: 1 });
    expect(completeness([session()]).estimate).toBeNull();
  });
});

describe("athlete dose", () => {
  it("is warmed-up participations of all participations, unrecorded warm-ups as not warmed up", () => {
    expect(
      athleteDose([
        session({ blocks: 5, participations: 14, warmedUp: 12 }),
        session({ participations: 10 }),
        session({ skipped: true, participations: 6, warmedUp: 6 }),
      ]),
    ).toMatchObject({ successes: 12, trials: 30, estimate: { estimate: 0.4 } });
    expect(athleteDose([session({ blocks: 5 })]).estimate).toBeNull();
  });
});
