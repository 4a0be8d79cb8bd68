import { randomUUID } from "node:crypto";
import { formatDay } from "~/platform/days";
import type { AthleteExposure, ExposureRow, HeadcountExposure } from "~imports/exposure/definition";
import type { RowWarning } from "../mapping/read-row";
import {
  count,
  type FieldChange,
  type PendingWrites,
  type RowProblem,
  type SessionRecord,
  type Tally,
  type TeamRecord,
} from "./records";

type Located = { session: SessionRecord } | { problem: RowProblem };

/** The sessions an import meets, by team, day and kind, then by start; without a start there may be only one. */
export class SessionBook {
  private readonly groups = new Map<string, SessionRecord[]>();
  private readonly known = new Set<string>();
  private readonly made = new Set<SessionRecord>();
  private readonly changed = new Set<SessionRecord>();
  /** Most minutes of one athlete, of sessions whose length nobody has entered. */
  private readonly mostMinutes = new Map<SessionRecord, number>();
  private readonly writes: PendingWrites;
  private readonly tally: Tally;

  constructor(writes: PendingWrites, tally: Tally) {
    this.writes = writes;
    this.tally = tally;
  }

  /** Stored sessions; those that are known already keep what the file has changed. */
  add(sessions: readonly SessionRecord[]) {
    for (const session of sessions) {
      if (this.known.has(session.id)) continue;
      this.known.add(session.id);
      this.groupOf(session.teamId, session.day, session.kind).push(session);
    }
  }

  isMade(session: SessionRecord) {
    return this.made.has(session);
  }

  locate(team: TeamRecord, row: ExposureRow, warnings: RowWarning[]): Located {
    const group = this.groupOf(team.id, row.day, row.kind);
    if (!row.start) return this.locateWithoutStart(team, row, group);
    const exact = group.find(({ startTime }) => startTime === row.start);
    if (exact) return { session: exact };
    const open = group.find(({ startTime }) => startTime === null);
    if (open) {
      open.startTime = row.start;
      this.change(open);
      return { session: open };
    }
    const [other] = group.filter((session) => !this.made.has(session));
    if (other) {
      const warning = `A ${row.kind} of ${team.name} stands at ${other.startTime} that day too. This one becomes another session.`;
      warnings.push({ column: "Start", cell: row.start, warning });
    }
    return { session: this.make(team, row, group) };
  }

  /** Exposure by athlete: the best grade, and the session was held. */
  record(session: SessionRecord, row: AthleteExposure, warnings: RowWarning[]) {
    this.hold(session, row, warnings);
    this.set(session, "exposureGrade", "recorded");
    if (session.actualMinutes === null && row.minutes > 0)
      this.mostMinutes.set(session, Math.max(row.minutes, this.mostMinutes.get(session) ?? 0));
  }

  countHeads(session: SessionRecord, row: HeadcountExposure, warnings: RowWarning[]): FieldChange[] {
    if (session.exposureGrade === "recorded") {
      const warning =
        "The athletes of this session are recorded one by one already: the headcount is not needed.";
      warnings.push({ column: "Players", cell: String(row.players), warning });
      return [];
    }
    const before = { ...session };
    this.hold(session, row, warnings);
    this.set(session, "exposureGrade", "headcount");
    this.set(session, "headcount", row.players);
    this.set(session, "headcountMinutes", row.minutes);
    if (session.actualMinutes === null && row.minutes > 0)
      this.set(session, "actualMinutes", Math.round(row.minutes));
    return describeChanges(before, session);
  }

  /** Writes the length of sessions that had none: the most minutes of one athlete. */
  finish() {
    for (const [session, minutes] of this.mostMinutes)
      if (session.actualMinutes === null) this.set(session, "actualMinutes", Math.round(minutes));
    this.mostMinutes.clear();
  }

  private locateWithoutStart(team: TeamRecord, row: ExposureRow, group: SessionRecord[]): Located {
    const [only] = group;
    if (group.length === 1 && only) return { session: only };
    if (group.length === 0) return { session: this.make(team, row, group) };
    const starts = group.map(({ startTime }) => startTime ?? "no start").sort();
    return {
      problem: {
        column: "Start",
        cell: "",
        code: "session.several",
        reason: `${team.name} has several sessions of this kind on ${formatDay(row.day)} (${starts.join(", ")}).`,
        mend: "Fill in the start, so that it is clear which one is meant.",
      },
    };
  }

  private make(team: TeamRecord, row: ExposureRow, group: SessionRecord[]) {
    const session: SessionRecord = {
      id: randomUUID(),
      teamId: team.id,
      day: row.day,
      startTime: row.start ?? null,
      kind: row.kind,
      state: "held",
      actualMinutes: null,
      cancelReason: null,
      surface: row.surface ?? null,
      exposureGrade: "none",
      headcount: null,
      headcountMinutes: null,
      version: 1,
    };
    group.push(session);
    this.known.add(session.id);
    this.made.add(session);
    this.writes.insert("sessions", session);
    count(this.tally, "sessionsMade");
    return session;
  }

  private hold(session: SessionRecord, row: ExposureRow, warnings: RowWarning[]) {
    if (session.state === "cancelled") {
      const warning = "This session was cancelled. The file has exposure for it, so it counts as held.";
      warnings.push({ column: "Date", cell: row.day, warning });
      this.set(session, "cancelReason", null);
    }
    if (session.state !== "abandoned") this.set(session, "state", "held");
    if (!row.surface) return;
    if (session.surface === null) this.set(session, "surface", row.surface);
    else if (session.surface !== row.surface) {
      const warning = "The session stands with another surface, which is kept.";
      warnings.push({ column: "Surface", cell: row.surface.replaceAll("_", " "), warning });
    }
  }

  private set<Key extends keyof SessionRecord>(session: SessionRecord, key: Key, value: SessionRecord[Key]) {
    if (session[key] === value) return;
    session[key] = value;
    this.change(session);
  }

  private change(session: SessionRecord) {
    this.writes.update("sessions", session);
    if (this.made.has(session) || this.changed.has(session)) return;
    this.changed.add(session);
    count(this.tally, "sessionsChanged");
  }

  private groupOf(teamId: string, day: string, kind: string) {
    const key = `${teamId} ${day} ${kind}`;
    const group = this.groups.get(key) ?? [];
    this.groups.set(key, group);
    return group;
  }
}

const shown = [
  ["startTime", "Start"],
  ["state", "State"],
  ["surface", "Surface"],
  ["exposureGrade", "Exposure grade"],
  ["headcount", "Players"],
  ["headcountMinutes", "Minutes"],
  ["actualMinutes", "Length in minutes"],
] as const;

function describeChanges(before: SessionRecord, after: SessionRecord): FieldChange[] {
  const text = (value: string | number | null) =>
    value === null ? null : String(value).replaceAll("_", " ");
  return shown
    .filter(([key]) => before[key] !== after[key])
    .map(([key, field]) => ({ field, before: text(before[key]), after: text(after[key]) }));
}
