import { describe, expect, it } from "vitest";
import {
  type AthleteStanding,
  explainStop,
  type GuardianStanding,
  limitsWarning,
  type StopCode,
  whoIsTold,
} from "~/features/notices/recipients";

const today = "2026-12-01";
const athlete: AthleteStanding = { dateOfBirth: "2012-03-27", onHold: false, ownDecisionAge: 18 };
const guardian: GuardianStanding = {
  endedAt: null,
  mayBeTold: true,
  limited: false,
  email: "a@example.org",
  wantsEmail: true,
  emailStoppedAt: null,
};
const told = (a: Partial<AthleteStanding> = {}, g: Partial<GuardianStanding> = {}, on = today) =>
  whoIsTold({ ...athlete, ...a }, { ...guardian, ...g }, on);

describe("who is told", () => {
  it("writes to a guardian who may be told and wants it", () => {
    expect(told()).toEqual({ way: "email" });
  });

  it.each<[StopCode, "phone" | "nobody", Partial<AthleteStanding>, Partial<GuardianStanding>]>([
    ["on_hold", "nobody", { onHold: true }, {}],
    ["of_age", "nobody", { dateOfBirth: "2008-12-01" }, {}],
    ["ended", "nobody", {}, { endedAt: new Date() }],
    ["limited", "nobody", {}, { mayBeTold: false, limited: true }],
    ["not_to_be_told", "nobody", {}, { mayBeTold: false }],
    ["no_birth_date", "phone", { dateOfBirth: null }, {}],
    ["no_birth_date", "phone", { dateOfBirth: "2027-01-01" }, {}],
    ["no_address", "phone", {}, { email: null }],
    ["email_stopped", "phone", {}, { emailStoppedAt: new Date() }],
    ["email_not_wanted", "phone", {}, { wantsEmail: false }],
  ])("%s: %s", (why, way, a, g) => {
    expect(told(a, g)).toEqual({ way, why });
    expect(explainStop(why, { athlete: "Ines", ownDecisionAge: 18 })).toMatch(/\.$/);
  });

  it("changes on the very day of the birthday, and by the organisation's own age", () => {
    const a = { dateOfBirth: "2008-12-02" };
    expect(told(a, {}, "2026-12-01")).toEqual({ way: "email" });
    expect(told(a, {}, "2026-12-02")).toEqual({ way: "nobody", why: "of_age" });
    expect(told({ ...a, ownDecisionAge: 16 }, {}, "2026-12-01")).toEqual({ way: "nobody", why: "of_age" });
  });

  it("lets a hold win over every other reason", () => {
    expect(told({ onHold: true, dateOfBirth: null }, { email: null, mayBeTold: false })).toEqual({
      way: "nobody",
      why: "on_hold",
    });
  });

  it("asks for a look at limits that do not forbid, and at their review", () => {
    const limits = { limited: true, mayBeTold: true };
    expect(limitsWarning({ ...limits, limitsReviewOn: null }, today)).toBe("read");
    expect(limitsWarning({ ...limits, limitsReviewOn: "2026-12-01" }, today)).toBe("read");
    expect(limitsWarning({ ...limits, limitsReviewOn: "2026-11-30" }, today)).toBe("review");
    expect(limitsWarning({ ...limits, mayBeTold: false, limitsReviewOn: null }, today)).toBeNull();
    expect(limitsWarning({ limited: false, mayBeTold: true, limitsReviewOn: null }, today)).toBeNull();
  });
});
