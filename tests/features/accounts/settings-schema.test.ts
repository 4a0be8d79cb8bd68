import { describe, expect, it } from "vitest";
import { organisationSchema, seasonSchema, teamSchema } from "~/features/accounts/settings.schema";

const settings = {
  name: "Saltings Athletic",
  timeZone: "Europe/London",
  phone: "+44 1632 960170",
  ageBands: "under 10\n10-12\n13-14\n15-16\n17-18\n19-25\nover 25",
  ownDecisionAge: "16",
  smallNumber: "5",
  retentionYears: "7",
  noticeLinkDays: "14",
};
const messages = (given: Partial<typeof settings>) =>
  organisationSchema.safeParse({ ...settings, ...given }).error?.issues.map(({ message }) => message) ?? [];

describe("age bands", () => {
  it("are read from lines in any order, each age once", () => {
    const { ageBands } = organisationSchema.parse({
      ...settings,
      ageBands: " over 18 \nUnder 13\n\n13 to 15\n16–18",
    });
    expect(ageBands).toEqual([
      { label: "Under 13", from: 0, to: 12 },
      { label: "13 to 15", from: 13, to: 15 },
      { label: "16–18", from: 16, to: 18 },
      { label: "over 18", from: 19, to: null },
    ]);
  });

  it.each([
    ["", "begin with under"],
    ["10-12\nover 12", "begin with under"],
    ["under 10\n10-12", "last band must be over"],
    ["under 10\n11-12\nover 12", "leave an age out"],
    ["under 10\n10-13\n13-14\nover 14", "overlap"],
    ["under 10\nover 9\nover 25", "overlap"],
    ["under 10\n10-12\n10-12\nover 12", "overlap"],
    ["under 13\n13-12\nover 12", "ends before it begins"],
    ["under 10\njuniors\nover 9", "“juniors” is not an age band"],
    ["under 10\n10-120\nover 120", "“10-120” is not an age band"],
  ])("refuse %j in words", (ageBands, words) => {
    expect(messages({ ageBands })).toEqual([expect.stringContaining(words)]);
  });
});

it("refuses numbers that would undo a protection", () => {
  expect(messages({ smallNumber: "1" })).toEqual(["Enter 3 or more."]);
  expect(messages({ ownDecisionAge: "5" })).toEqual(["Enter 12 or more."]);
  expect(messages({ noticeLinkDays: "61" })).toEqual(["Enter 60 or less."]);
  expect(messages({ retentionYears: "two" })).toEqual(["Enter a whole number."]);
  expect(messages({ smallNumber: "4.5" })).toEqual(["Enter a whole number."]);
  expect(messages({ timeZone: "London" })).toEqual([expect.stringContaining("Europe/London")]);
});

it("reads days of a season as people type them, the last after the first", () => {
  expect(seasonSchema.parse({ name: "2026/27", startsOn: "1 Aug 2026", endsOn: "30.6.2027" })).toMatchObject({
    startsOn: "2026-08-01",
    endsOn: "2027-06-30",
  });
  const same = seasonSchema.safeParse({ name: "A day", startsOn: "1 8 2026", endsOn: "1 8 2026" });
  expect(same.error?.issues).toMatchObject([{ path: ["endsOn"] }]);
  expect(seasonSchema.safeParse({ name: "B", startsOn: "31 2 2026", endsOn: "1 8 2026" }).success).toBe(
    false,
  );
});

it("leaves the age of an open team empty", () => {
  const team = { name: "First", sport: "soccer", sex: "women" };
  for (const underAge of ["", undefined])
    expect(teamSchema.safeParse({ ...team, sex: "girls", underAge })).toMatchObject({
      data: { underAge: null },
    });
  expect(teamSchema.safeParse({ ...team, sex: "girls", underAge: "4" }).success).toBe(false);
});
