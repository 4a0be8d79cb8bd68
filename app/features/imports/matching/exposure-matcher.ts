import { formatDay } from "~/platform/days";
import { foldText } from "~/platform/fold-text";
import type { AthleteExposure, ExposureRow, HeadcountExposure } from "~imports/exposure/definition";
import type { RowWarning } from "../mapping/read-row";
import { normaliseName } from "../values/names";
import { quoteCell } from "../values/parsed";
import type { AthleteIndex } from "./find-athlete";
import {
  type AthleteRecord,
  count,
  type Decision,
  type EntryRecord,
  type FieldChange,
  type ParticipationRecord,
  type PendingWrites,
  type RowProblem,
  reject,
  type SessionRecord,
  type Tally,
  type TeamRecord,
} from "./records";
import { SessionBook } from "./session-book";
import type { TeamBook } from "./team-book";

export type ExposureState = {
  athletes: AthleteIndex;
  teams: TeamBook;
  entries: readonly EntryRecord[];
  seasons: readonly { startsOn: string; endsOn: string }[];
};

/** Decides what each row of exposure does, and gathers the writes. The rows come in the order of the file. */
export class ExposureMatcher {
  readonly tally: Tally = {};
  readonly sessions: SessionBook;
  private readonly state: ExposureState;
  private readonly today: string;
  private readonly writes: PendingWrites;
  private readonly entries = new Map<string, EntryRecord[]>();
  private readonly participations = new Map<string, ParticipationRecord>();
  /** The line of the file that spoke of an athlete in a session: one line each. */
  private readonly lines = new Map<string, number>();

  constructor(state: ExposureState, today: string, writes: PendingWrites) {
    this.state = state;
    this.today = today;
    this.writes = writes;
    this.sessions = new SessionBook(writes, this.tally);
    for (const entry of state.entries) {
      const key = `${entry.athleteId} ${entry.teamId}`;
      this.entries.set(key, [...(this.entries.get(key) ?? []), entry]);
    }
  }

  /** Participations of sessions that rows may concern; each session's are told once, before its first row. */
  addParticipations(participations: readonly ParticipationRecord[]) {
    for (const one of participations) this.participations.set(`${one.sessionId} ${one.athleteId}`, one);
  }

  /** The team a row would be about, for loading what it needs; undefined when the row will be refused for it. */
  teamOf(row: ExposureRow): TeamRecord | undefined {
    const resolved = this.state.teams.resolve(row.teamName);
    return "team" in resolved ? resolved.team : undefined;
  }

  decide(line: number, row: ExposureRow): Decision {
    if (row.day > this.today) return reject(inFuture(row));
    const resolved = this.state.teams.resolve(row.teamName);
    if ("problem" in resolved) return reject(resolved.problem);
    const warnings: RowWarning[] = [];
    if (!this.state.seasons.some(({ startsOn, endsOn }) => row.day >= startsOn && row.day <= endsOn)) {
      const warning = `${formatDay(row.day)} lies in no season: rates of a season leave it out.`;
      warnings.push({ column: "Date", cell: row.day, warning });
    }
    return row.shape === "by-headcount"
      ? this.decideHeadcount(resolved.team, row, warnings)
      : this.decideParticipation(line, resolved.team, row, warnings);
  }

  finish() {
    this.sessions.finish();
    if (this.state.teams.created > 0) this.tally.teamsMade = this.state.teams.created;
  }

  private decideParticipation(
    line: number,
    team: TeamRecord,
    row: AthleteExposure,
    warnings: RowWarning[],
  ): Decision {
    const found = this.findAthlete(row.athlete, warnings);
    if ("problem" in found) return reject(found.problem, warnings);
    const { athlete } = found;
    const located = this.sessions.locate(team, row, warnings);
    if ("problem" in located) return reject(located.problem, warnings);
    const { session } = located;
    const key = `${session.id} ${athlete.id}`;
    const earlier = this.lines.get(key);
    if (earlier !== undefined) return reject(repeated(row, earlier), warnings);
    this.lines.set(key, line);
    this.warnAboutRoster(team, athlete, row, warnings);
    this.sessions.record(session, row, warnings);
    return { ...this.write(key, session, athlete, row), problems: [], warnings };
  }

  private write(key: string, session: SessionRecord, athlete: AthleteRecord, row: AthleteExposure) {
    const stored = this.participations.get(key);
    const next = { presence: row.presence, minutes: row.minutes };
    if (!stored) {
      const made = { sessionId: session.id, athleteId: athlete.id, ...next, version: 1 };
      this.writes.insert("participations", made);
      count(this.tally, "participationsMade");
      return { outcome: "create" as const, changes: [] };
    }
    const changes: FieldChange[] = [];
    if (stored.presence !== next.presence)
      changes.push({ field: "Presence", before: stored.presence, after: next.presence });
    if (stored.minutes !== next.minutes)
      changes.push({ field: "Minutes", before: String(stored.minutes), after: String(next.minutes) });
    if (changes.length === 0) return { outcome: "unchanged" as const, changes };
    Object.assign(stored, next);
    this.writes.update("participations", stored);
    count(this.tally, "participationsChanged");
    return { outcome: "update" as const, changes };
  }

  private decideHeadcount(team: TeamRecord, row: HeadcountExposure, warnings: RowWarning[]): Decision {
    const located = this.sessions.locate(team, row, warnings);
    if ("problem" in located) return reject(located.problem, warnings);
    const made = this.sessions.isMade(located.session);
    const changes = this.sessions.countHeads(located.session, row, warnings);
    const outcome = made ? "create" : changes.length > 0 ? "update" : "unchanged";
    return { outcome, problems: [], changes: made ? [] : changes, warnings };
  }

  /** By number; without one by name, and by birthday where the name alone is not enough. */
  private findAthlete(
    asked: AthleteExposure["athlete"],
    warnings: RowWarning[],
  ): { athlete: AthleteRecord } | { problem: RowProblem } {
    const name = `${asked.givenName ?? ""} ${asked.familyName ?? ""}`.trim();
    if (asked.number) {
      const athlete = this.state.athletes.withNumber(asked.number);
      if (!athlete?.visible) return { problem: unknownNumber(asked.number) };
      if (name && normaliseName(name) !== athlete.nameKey) {
        const warning = `Number ${asked.number} is ${athlete.givenName} ${athlete.familyName}: the number was followed, not the name.`;
        warnings.push({ column: "Athlete name", cell: name, warning });
      }
      return { athlete };
    }
    const namesakes = this.state.athletes.named(foldText(name)).filter(({ visible }) => visible);
    const { dateOfBirth } = asked;
    const matching = dateOfBirth
      ? namesakes.filter((one) => one.dateOfBirth === null || one.dateOfBirth === dateOfBirth)
      : namesakes;
    const [athlete] = matching;
    if (athlete && matching.length === 1) return { athlete };
    return { problem: athlete ? severalNamed(name) : nobodyNamed(name, namesakes.length > 0) };
  }

  private warnAboutRoster(
    team: TeamRecord,
    athlete: AthleteRecord,
    { day }: AthleteExposure,
    warnings: RowWarning[],
  ) {
    const entries = this.entries.get(`${athlete.id} ${team.id}`) ?? [];
    if (entries.some(({ fromDay, toDay }) => fromDay <= day && (toDay === null || toDay >= day))) return;
    const warning = `Not on the roster of ${team.name} on ${formatDay(day)}. Imported all the same; correct the roster if it is wrong.`;
    warnings.push({ column: "Athlete number", cell: athlete.number ?? "", warning });
  }
}

function inFuture(row: ExposureRow): RowProblem {
  return {
    column: "Date",
    cell: row.day,
    code: "day.future",
    reason: `${formatDay(row.day)} lies in the future: nobody can have taken part yet.`,
    mend: "Correct the date, or import the row after the session.",
  };
}

function unknownNumber(number: string): RowProblem {
  return {
    column: "Athlete number",
    cell: number,
    code: "athlete.unknown",
    reason: `No athlete has the number ${quoteCell(number)}.`,
    mend: "Import the roster first, or correct the number.",
  };
}

function severalNamed(name: string): RowProblem {
  return {
    column: "Athlete name",
    cell: name,
    code: "athlete.several",
    reason: `Several athletes are called ${quoteCell(name)}.`,
    mend: "Add a column with the athletes’ numbers, or with their dates of birth.",
  };
}

function nobodyNamed(name: string, otherBirthday: boolean): RowProblem {
  return {
    column: "Athlete name",
    cell: name,
    code: "athlete.unknown",
    reason: otherBirthday
      ? `The athlete called ${quoteCell(name)} has another date of birth.`
      : `No athlete is called ${quoteCell(name)}.`,
    mend: "Import the roster first, or correct the name.",
  };
}

function repeated(row: AthleteExposure, earlier: number): RowProblem {
  return {
    column: "Athlete number",
    cell: row.athlete.number ?? "",
    code: "duplicate.same-athlete",
    reason: `Line ${earlier} already has this athlete in the same session.`,
    mend: "Keep the row that is right; if these are two sessions of one day, write the start times.",
  };
}
