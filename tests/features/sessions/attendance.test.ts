import { describe, expect, it } from "vitest";
import { stateWords } from "~/features/availability/state-words";
import { proposePart } from "~/features/sessions/attendance";
import { readAttendanceForm } from "~/features/sessions/attendance-form";

const athletes = [
  { id: "full", state: "full" as const, minutesLimit: null },
  { id: "limited", state: "modified" as const, minutesLimit: 30 },
  { id: "out", state: "unavailable" as const, minutesLimit: null },
];
const form = (
  typed: Record<string, string>,
  given: { everyone?: boolean; fullTime?: number | null } = {},
) => ({
  everyone: false,
  fullTime: 90,
  base: {},
  text: (name: string) => typed[name] ?? "",
  ...given,
});
const took = (minutes: number) => ({ presence: "took_part", minutes });

describe("everyone available, full time", () => {
  it("never preselects the unavailable and keeps to a minutes limit", () => {
    expect(readAttendanceForm(athletes, form({}, { everyone: true }))).toEqual({
      changes: {
        "athlete:full": { base: null, value: took(90) },
        "athlete:limited": { base: null, value: took(30) },
      },
    });
    expect(proposePart({ state: "unavailable", minutesLimit: null }, 90)).toBeNull();
  });

  it("leaves what somebody entered", () => {
    const typed = { "presence-full": "absent" };
    expect(readAttendanceForm(athletes, form(typed, { everyone: true }))).toMatchObject({
      changes: { "athlete:full": { value: { presence: "absent", minutes: 0 } } },
    });
  });

  it("asks how long the session lasted", () => {
    expect(readAttendanceForm(athletes, form({}, { everyone: true, fullTime: null }))).toMatchObject({
      errors: { fields: { fullTime: [expect.stringContaining("how long")] } },
    });
  });
});

describe("the form by athlete", () => {
  it("sends only what differs from what it was opened with", () => {
    const typed = { "presence-full": "took_part", "minutes-full": "90", "presence-limited": "present_only" };
    expect(readAttendanceForm(athletes, { ...form(typed), base: { full: took(90) } })).toEqual({
      changes: { "athlete:limited": { base: null, value: { presence: "present_only", minutes: 0 } } },
    });
  });

  it("clears an entry that is set back to nothing", () => {
    expect(readAttendanceForm(athletes, { ...form({}), base: { full: took(90) } })).toEqual({
      changes: { "athlete:full": { base: took(90), value: null } },
    });
  });

  it("takes full time where minutes are left empty, and reads a decimal comma", () => {
    const typed = {
      "presence-full": "took_part",
      "presence-limited": "took_part",
      "minutes-limited": "22,5",
    };
    expect(readAttendanceForm(athletes, form(typed))).toMatchObject({
      changes: { "athlete:full": { value: took(90) }, "athlete:limited": { value: took(22.5) } },
    });
  });

  it.each(["0", "-3", "ninety", "9999"])("refuses %s minutes beside the athlete", (minutes) => {
    const answer = readAttendanceForm(
      athletes,
      form({ "presence-full": "took_part", "minutes-full": minutes }),
    );
    expect(answer).toMatchObject({ errors: { fields: { "minutes-full": [expect.any(String)] } } });
  });
});

it("says a state in words, with the limit and the time of entry", () => {
  const athlete = {
    state: "modified" as const,
    restrictions: ["no_cutting" as const, "minutes_limit" as const],
    minutesLimit: 30,
    expectedOn: "2026-12-12",
  };
  expect(stateWords(athlete, "15:10")).toBe(
    "Modified: no cutting, at most 30 minutes. Expected back 12 Dec. As of 15:10",
  );
  expect(stateWords({ ...athlete, state: "full" }, "15:10")).toBe("");
});
