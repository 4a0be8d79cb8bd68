import { describe, expect, it } from "vitest";
import {
  byWeek,
  fromStartOn,
  leastRecorded,
  type ProgrammeTeam,
  skippingOf,
} from "~/features/rates/programme/programme-compliance";
import { compact, measuresTable, skippedTable } from "~/features/rates/programme/programme-compliance-tables";
import { skipSentence, unrecordedNote } from "~/features/rates/programme/programme-sentence";
import { textOf } from "~/features/rates/sentence";
import { complianceOf } from "~/features/warm-ups/compliance";
import type { TallySession, TeamCompliance } from "~/features/warm-ups/warm-ups.server";

const session = (given: Partial<TallySession> = {}): TallySession => ({
  sessionId: "s",
  teamId: "t",
  day: "2026-10-05",
  week: "2026-10-05",
  startTime: null,
  kind: "training",
  done: [],
  warmUp: { outcome: "full", blocks: 5, skipReason: null },
  blockShare: 1,
  participations: 10,
  warmedUp: 10,
  ...given,
});
const skipped: Partial<TallySession> = { warmUp: { outcome: "skipped", blocks: 0, skipReason: "weather" } };
const silent: Partial<TallySession> = { warmUp: null };

function team(name: string, counts: { done: number; skipped: number; notRecorded?: number }): ProgrammeTeam {
  const sessions = [
    ...Array.from({ length: counts.done }, () => session()),
    ...Array.from({ length: counts.skipped }, () => session(skipped)),
    ...Array.from({ length: counts.notRecorded ?? 0 }, () => session(silent)),
  ];
  return { teamId: name, name, startsOn: "2026-08-01", sessions, compliance: complianceOf(sessions) };
}

describe("days before the start", () => {
  it("are in no measure, and a team without a programme has none", () => {
    const of = (teamId: string): TeamCompliance => ({
      ...{ teamId, teamName: teamId, sport: "soccer", sex: "girls", assigned: true },
      targets: { sessionShare: 0.8, perWeek: 2, minutes: 15, blockShare: 1 },
      compliance: complianceOf([]),
      sessions: [
        session({ day: "2026-09-30", ...skipped }),
        session({ day: "2026-10-01" }),
        session({ day: "2026-10-02", kind: "strength", ...skipped }),
      ],
    });
    const [first, second] = fromStartOn([of("a"), of("b")], new Map([["a", "2026-10-01"]]), ["training"]);
    expect(first?.compliance).toMatchObject({ sessions: 1, full: 1, skipped: 0 });
    expect(second).toMatchObject({ startsOn: null, compliance: { sessions: 0 } });
  });
});

describe("which team skips", () => {
  it("is named with its counts against the others, and unrecorded sessions are no skipped ones", () => {
    const teams = [
      team("Boys U16", { done: 10, skipped: 30 }),
      team("Girls U16", { done: 38, skipped: 2, notRecorded: 60 }),
      team("Women", { done: 36, skipped: 4 }),
    ];
    const found = skippingOf(teams);
    expect(found.standingOut.map(({ name }) => name)).toEqual(["Boys U16"]);
    expect(found.others).toMatchObject({ skipped: 6, recorded: 80 });
    expect(textOf(skipSentence(found))).toBe(
      "Boys U16 skipped 30 of 40 recorded warm-ups, 75 % (60 to 86); the other teams 8 % (3 to 15).",
    );
    const least = leastRecorded(teams);
    expect(least).toEqual({ name: "Girls U16", notRecorded: 60, sessions: 100 });
    expect(unrecordedNote(least, 60, 180)).toContain("most of all by Girls U16 (60 of 100)");
  });

  it("is nobody clearly when the first is within what chance does", () => {
    const found = skippingOf([
      team("A", { done: 8, skipped: 2 }),
      team("B", { done: 9, skipped: 1 }),
      team("C", { done: 4, skipped: 0 }),
    ]);
    expect(found.standingOut).toEqual([]);
    // Four sessions are no habit.
    expect(found.teams.map(({ name }) => name)).toEqual(["A", "B"]);
    expect(textOf(skipSentence(found))).toContain("No team clearly skips more than the others.");
  });

  it("widens its limits with the number of teams", () => {
    // Alone against one other it stands out; the same counts among thirty do not.
    const one = team("A", { done: 14, skipped: 6 });
    const others = (count: number) =>
      Array.from({ length: count }, (_, n) => team(`B${n}`, { done: 176, skipped: 24 }));
    expect(skippingOf([one, ...others(1)]).standingOut).toHaveLength(1);
    expect(skippingOf([one, ...others(30)]).standingOut).toHaveLength(0);
  });

  it("is said to be none where none was skipped or nothing is recorded", () => {
    expect(textOf(skipSentence(skippingOf([team("A", { done: 9, skipped: 0 })])))).toBe(
      "No team has a recorded warm-up that was skipped.",
    );
    expect(textOf(skipSentence(skippingOf([team("A", { done: 0, skipped: 0, notRecorded: 30 })])))).toContain(
      "No team has five sessions with a warm-up record",
    );
    expect(leastRecorded([team("A", { done: 9, skipped: 0 })])).toBeNull();
    expect(unrecordedNote(null, 0, 9)).toBe("Every held session has a warm-up record.");
  });
});

describe("weeks and tables", () => {
  it("keep a week without a session apart from one without a record", () => {
    const weeks = byWeek([session(silent)], ["2026-10-05", "2026-10-12"]);
    expect(weeks[0]?.compliance).toMatchObject({ sessions: 1, recorded: 0, notRecorded: 1 });
    expect(weeks[0]?.compliance?.ofRecorded.estimate).toBeNull();
    expect(weeks[1]?.compliance).toBeNull();
  });

  it("put the team that skips most first, and every measure with its interval into one cell of the page", () => {
    const teams = [team("A", { done: 9, skipped: 1 }), team("B", { done: 5, skipped: 5 })];
    const table = skippedTable(teams, skippingOf(teams));
    expect(table.rows.map(({ cells }) => cells.team)).toEqual(["B", "A"]);
    const measures = compact(measuresTable(teams, complianceOf(teams.flatMap(({ sessions }) => sessions))));
    expect(measures.columns.map(({ kind }) => kind)).toEqual(Array(6).fill("text"));
    expect(measures.rows.map(({ cells }) => cells.ofRecorded)).toEqual([
      "90\u00a0% (60\u00a0to\u00a098)",
      "50\u00a0% (24\u00a0to\u00a076)",
      "70\u00a0% (48\u00a0to\u00a085)",
    ]);
  });
});
