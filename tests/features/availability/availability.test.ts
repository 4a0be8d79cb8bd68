import { describe, expect, it } from "vitest";
import {
  type Contribution,
  returnDayOf,
  stateFromContributions,
  timeLossOf,
} from "~/features/availability/availability";
import { availabilityChangeSchema } from "~/features/availability/availability.schema";
import type { AvailabilityState } from "~db/schema/codes";

const part = (
  fromDay: string,
  toDay: string | null,
  state: AvailabilityState,
  rest: Partial<Contribution> = {},
): Contribution => ({
  fromDay,
  toDay,
  state,
  restrictions: [],
  minutesLimit: null,
  expectedOn: null,
  ...rest,
});

describe("state of a day", () => {
  it("is full without any contribution, and outside the days of one", () => {
    expect(stateFromContributions([], "2026-03-10").state).toBe("full");
    const parts = [part("2026-03-11", "2026-03-12", "unavailable")];
    expect(stateFromContributions(parts, "2026-03-10").state).toBe("full");
    expect(stateFromContributions(parts, "2026-03-11").state).toBe("unavailable");
    expect(stateFromContributions(parts, "2026-03-12").state).toBe("unavailable");
    expect(stateFromContributions(parts, "2026-03-13").state).toBe("full");
  });

  it("is the most restrictive of all reasons, whatever their order", () => {
    const parts = [
      part("2026-03-01", null, "full"),
      part("2026-03-01", null, "modified", { restrictions: ["no_contact"], expectedOn: "2026-03-20" }),
      part("2026-03-05", null, "unavailable", { expectedOn: "2026-03-12" }),
    ];
    for (const order of [parts, [...parts].reverse()]) {
      expect(stateFromContributions(order, "2026-03-06")).toEqual({
        state: "unavailable",
        restrictions: ["no_contact"],
        minutesLimit: null,
        expectedOn: "2026-03-20",
      });
    }
  });

  it("adds restrictions up, takes the smallest minutes limit, and expects nothing when one reason has no end in sight", () => {
    const parts = [
      part("2026-03-01", null, "modified", {
        restrictions: ["no_cutting", "minutes_limit"],
        minutesLimit: 45,
      }),
      part("2026-03-01", null, "modified", {
        restrictions: ["no_cutting", "no_jumping", "minutes_limit"],
        minutesLimit: 30,
        expectedOn: "2026-03-20",
      }),
    ];
    const state = stateFromContributions(parts, "2026-03-02");
    expect(state.restrictions).toEqual(["no_cutting", "minutes_limit", "no_jumping"]);
    expect(state.minutesLimit).toBe(30);
    expect(state.expectedOn).toBeNull();
  });
});

describe("time loss from the contributions of one injury", () => {
  const onset = "2026-03-10";

  it("is 0 days without a contribution", () => {
    expect(timeLossOf(onset, [], "2026-04-01")).toEqual({ days: 0, ongoing: false });
  });

  it("is 0 days when the athlete leaves the session and takes full part in the next", () => {
    const parts = [part(onset, onset, "unavailable"), part("2026-03-11", null, "full")];
    expect(timeLossOf(onset, parts, "2026-04-01")).toEqual({ days: 0, ongoing: false });
  });

  it("counts from the day after the onset to the day before full availability, modified days included", () => {
    const parts = [
      part(onset, "2026-03-16", "unavailable"),
      part("2026-03-17", "2026-03-19", "modified"),
      part("2026-03-20", null, "full"),
    ];
    expect(timeLossOf(onset, parts, "2026-04-01")).toEqual({ days: 9, ongoing: false });
  });

  it("counts an open injury to today and marks it ongoing", () => {
    const parts = [part(onset, null, "unavailable")];
    expect(timeLossOf(onset, parts, onset)).toEqual({ days: 0, ongoing: true });
    expect(timeLossOf(onset, parts, "2026-03-24")).toEqual({ days: 14, ongoing: true });
  });

  it("takes a full availability that lies ahead for a plan", () => {
    const parts = [part(onset, "2026-03-30", "unavailable"), part("2026-03-31", null, "full")];
    expect(timeLossOf(onset, parts, "2026-03-20")).toEqual({ days: 10, ongoing: true });
    expect(timeLossOf(onset, parts, "2026-03-31")).toEqual({ days: 20, ongoing: false });
  });

  it("counts the days of a late beginning and of a setback, not the full days between", () => {
    const parts = [
      part("2026-03-15", "2026-03-19", "modified"),
      part("2026-03-20", "2026-03-24", "full"),
      part("2026-03-25", "2026-03-26", "unavailable"),
      part("2026-03-27", null, "full"),
    ];
    expect(timeLossOf(onset, parts, "2026-04-01")).toEqual({ days: 7, ongoing: false });
  });

  it("does not count a limit that is only planned", () => {
    expect(timeLossOf(onset, [part("2026-05-01", null, "unavailable")], "2026-04-01")).toEqual({
      days: 0,
      ongoing: false,
    });
  });

  it("does not depend on the order in which contributions arrive", () => {
    const parts = [part("2026-03-17", null, "full"), part(onset, "2026-03-16", "unavailable")];
    expect(timeLossOf(onset, parts, "2026-04-01").days).toBe(6);
  });

  it("counts across a change of clocks and a leap day by the calendar", () => {
    const leap = [part("2028-02-27", "2028-03-01", "unavailable"), part("2028-03-02", null, "full")];
    expect(timeLossOf("2028-02-27", leap, "2028-04-01").days).toBe(3);
  });
});

describe("return to full availability", () => {
  it("is the onset when nothing was lost, null while something still is, the day after the last limit else", () => {
    expect(returnDayOf("2026-03-10", [])).toBe("2026-03-10");
    expect(returnDayOf("2026-03-10", [part("2026-03-10", null, "modified")])).toBeNull();
    expect(
      returnDayOf("2026-03-10", [
        part("2026-03-10", "2026-03-14", "unavailable"),
        part("2026-03-15", null, "full"),
      ]),
    ).toBe("2026-03-15");
  });
});

describe("a change as it is typed", () => {
  const typed = {
    state: "modified",
    restrictions: ["no_cutting"],
    minutesLimit: "30",
    fromDay: "10 3 2026",
    expectedOn: "20 Mar 2026",
  };

  it("reads days as people write them and codes the minutes limit", () => {
    expect(availabilityChangeSchema.parse(typed)).toEqual({
      state: "modified",
      restrictions: ["no_cutting", "minutes_limit"],
      minutesLimit: 30,
      fromDay: "2026-03-10",
      expectedOn: "2026-03-20",
    });
  });

  it("lets nothing of an earlier choice linger under full", () => {
    expect(availabilityChangeSchema.parse({ ...typed, state: "full" })).toMatchObject({
      restrictions: [],
      minutesLimit: null,
      expectedOn: null,
    });
  });

  it.each([
    [{ ...typed, restrictions: [], minutesLimit: "" }, "restrictions"],
    [{ ...typed, minutesLimit: "0" }, "minutesLimit"],
    [{ ...typed, minutesLimit: "half an hour" }, "minutesLimit"],
    [{ ...typed, expectedOn: "9 3 2026" }, "expectedOn"],
    [{ ...typed, fromDay: "31 2 2026" }, "fromDay"],
    [{ ...typed, state: "ready" }, "state"],
  ])("refuses what cannot be acted on, naming the field (%#)", (input, field) => {
    const result = availabilityChangeSchema.safeParse(input);
    expect(result.error?.issues.map(({ path }) => path[0])).toContain(field);
  });
});
