import { describe, expect, it } from "vitest";
import { fullTimeOf, gradeOf, hasBegun, hasPassed, statusOf } from "~/features/sessions/session-state";

const session = { day: "2026-12-01", startTime: "17:30", plannedMinutes: 90, state: "planned" };
const at = (time: string, day = "2026-12-01") => ({ day, time });

describe("where a session stands", () => {
  it("begins at its start and passes after its planned minutes", () => {
    expect(hasBegun(session, at("17:29"))).toBe(false);
    expect(hasBegun(session, at("17:30"))).toBe(true);
    expect(hasPassed(session, at("18:59"))).toBe(false);
    expect(hasPassed(session, at("19:00"))).toBe(true);
  });

  it("reads unconfirmed only while planned and past", () => {
    expect(statusOf(session, at("18:00"))).toBe("planned");
    expect(statusOf(session, at("19:00"))).toBe("unconfirmed");
    expect(statusOf(session, at("00:00", "2026-12-02"))).toBe("unconfirmed");
    expect(statusOf(session, at("23:59", "2026-11-30"))).toBe("planned");
    for (const state of ["held", "abandoned", "cancelled"])
      expect(statusOf({ ...session, state }, at("23:00", "2026-12-05"))).toBe(state);
  });

  it("without a start time begins and passes with its day", () => {
    const open = { ...session, startTime: null };
    expect(hasBegun(open, at("00:00"))).toBe(true);
    expect(statusOf(open, at("23:59"))).toBe("planned");
    expect(statusOf(open, at("00:00", "2026-12-02"))).toBe("unconfirmed");
  });

  it("is taken to last 90 minutes when nobody said", () => {
    const open = { ...session, plannedMinutes: null };
    expect(hasPassed(open, at("18:59"))).toBe(false);
    expect(hasPassed(open, at("19:00"))).toBe(true);
  });
});

describe("the one grade", () => {
  const none = { kind: "training", state: "held", participations: 0, headcount: null };
  it("is the best that is known", () => {
    expect(gradeOf({ ...none, participations: 3, headcount: 12 })).toBe("recorded");
    expect(gradeOf({ ...none, headcount: 12 })).toBe("headcount");
    expect(gradeOf(none)).toBe("none");
  });
  it("is estimated only for a match that took place", () => {
    expect(gradeOf({ ...none, kind: "match" })).toBe("estimated");
    expect(gradeOf({ ...none, kind: "match", state: "abandoned" })).toBe("estimated");
    expect(gradeOf({ ...none, kind: "match", state: "planned" })).toBe("none");
    expect(gradeOf({ ...none, kind: "match", state: "cancelled" })).toBe("none");
  });
});

it("full time is what was played", () => {
  const times = { state: "held", plannedMinutes: 90, actualMinutes: null, abandonedAfter: null };
  expect(fullTimeOf(times)).toBe(90);
  expect(fullTimeOf({ ...times, actualMinutes: 75 })).toBe(75);
  expect(fullTimeOf({ ...times, state: "abandoned", actualMinutes: 75, abandonedAfter: 20 })).toBe(20);
  expect(fullTimeOf({ ...times, plannedMinutes: null })).toBeNull();
});
