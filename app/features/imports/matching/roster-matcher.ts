import { randomUUID } from "node:crypto";
import { formatDay } from "~/platform/days";
import type { RosterRow } from "~imports/roster/definition";
import type { Answers } from "../imports.schema";
import type { RowWarning } from "../mapping/read-row";
import { normaliseName } from "../values/names";
import { type AthleteIndex, findAthlete } from "./find-athlete";
import type { GuardianBook } from "./match-guardian";
import {
  type AthleteRecord,
  type Candidate,
  count,
  type Decision,
  type EntryRecord,
  type FieldChange,
  type PendingWrites,
  reject,
  type Tally,
  type TeamRecord,
} from "./records";
import type { TeamBook } from "./team-book";

export type RosterState = {
  athletes: AthleteIndex;
  teams: TeamBook;
  guardians: GuardianBook;
  entries: readonly EntryRecord[];
};
export type RosterChoices = {
  doubts: NonNullable<Answers["doubts"]>;
  /** First day in the team where the row does not say. */
  fromDay: string;
  coversAll: boolean;
};

const lostLetter = /[?\uFFFD¿]/u;

/** Decides what each row of a roster does, and gathers the writes. The rows come in the order of the file. */
export class RosterMatcher {
  readonly tally: Tally = {};
  private readonly state: RosterState;
  private readonly choices: RosterChoices;
  private readonly writes: PendingWrites;
  private readonly entries = new Map<string, EntryRecord[]>();
  private readonly made = new Set<AthleteRecord>();
  private readonly touched = new Set<AthleteRecord>();

  constructor(state: RosterState, choices: RosterChoices, writes: PendingWrites) {
    this.state = state;
    this.choices = choices;
    this.writes = writes;
    for (const entry of state.entries) this.entriesOf(entry.athleteId).push(entry);
  }

  decide(line: number, row: RosterRow): Decision {
    const resolved = row.teamName ? this.state.teams.resolve(row.teamName) : undefined;
    if (resolved && "problem" in resolved) return reject(resolved.problem);
    const match = findAthlete(row, this.state.athletes, this.choices.doubts[line]);
    if (match.kind === "problem") return reject(match.problem);
    if (match.kind === "doubt") return reject(this.describeDoubt(row, match));
    if (match.kind === "new" && !resolved && !this.choices.coversAll) return reject(needsTeam(row));
    const warnings: RowWarning[] = [];
    if (match.kind === "new" && match.warning)
      warnings.push({ column: "Family name", cell: row.familyName, warning: match.warning });
    const athlete = match.kind === "known" ? match.athlete : this.make(row);
    const changes = match.kind === "known" ? this.update(athlete, row, warnings) : [];
    if (resolved) this.join(athlete, resolved.team, row, changes, warnings);
    if (row.guardian) this.addGuardian(athlete, row.guardian, changes, warnings);
    if (this.made.has(athlete)) return { outcome: "create", problems: [], changes: [], warnings };
    return { outcome: changes.length > 0 ? "update" : "unchanged", problems: [], changes, warnings };
  }

  finish() {
    if (this.state.teams.created > 0) this.tally.teamsMade = this.state.teams.created;
  }

  private make(row: RosterRow) {
    const athlete: AthleteRecord = {
      id: randomUUID(),
      givenName: row.givenName,
      familyName: row.familyName,
      nameKey: normaliseName(`${row.givenName} ${row.familyName}`),
      number: row.number ?? null,
      dateOfBirth: row.dateOfBirth ?? null,
      sex: row.sex ?? "not_stated",
      dominantLeg: row.dominantLeg ?? "unknown",
      archived: false,
      visible: true,
      version: 1,
    };
    this.made.add(athlete);
    this.state.athletes.add(athlete);
    this.writes.insert("athletes", athlete);
    count(this.tally, "athletesMade");
    return athlete;
  }

  /** An absent column and an empty cell leave what is stored; so does a name that lost a letter on its way. */
  private update(athlete: AthleteRecord, row: RosterRow, warnings: RowWarning[]) {
    const changes: FieldChange[] = [];
    const set = <Key extends "givenName" | "familyName" | "number" | "dateOfBirth" | "sex" | "dominantLeg">(
      key: Key,
      label: string,
      next: AthleteRecord[Key] | null | undefined,
    ) => {
      if (next === null || next === undefined || next === athlete[key]) return;
      changes.push({ field: label, before: athlete[key], after: next });
      athlete[key] = next;
    };
    for (const [key, label] of [
      ["givenName", "Given name"],
      ["familyName", "Family name"],
    ] as const) {
      if (lostLetter.test(row[key]) && !lostLetter.test(athlete[key])) {
        const warning = "The stored name is kept, since this one seems to have lost a letter.";
        warnings.push({ column: label, cell: row[key], warning });
      } else set(key, label, row[key]);
    }
    set("number", "Number", athlete.number === null ? row.number : null);
    set("dateOfBirth", "Date of birth", row.dateOfBirth);
    set("sex", "Sex", row.sex === "not_stated" ? null : row.sex);
    set("dominantLeg", "Dominant leg", row.dominantLeg === "unknown" ? null : row.dominantLeg);
    if (athlete.archived)
      warnings.push({
        column: "Family name",
        cell: row.familyName,
        warning: "This athlete is archived and stays so.",
      });
    if (changes.length === 0) return changes;
    athlete.nameKey = normaliseName(`${athlete.givenName} ${athlete.familyName}`);
    this.state.athletes.noteNumber(athlete);
    this.writes.update("athletes", athlete);
    this.touch(athlete);
    return changes;
  }

  /** A membership that is there is kept, whatever its first day; a new one never overlaps. */
  private join(
    athlete: AthleteRecord,
    team: TeamRecord,
    row: RosterRow,
    changes: FieldChange[],
    warnings: RowWarning[],
  ) {
    const fromDay = row.fromDay ?? this.choices.fromDay;
    const own = this.entriesOf(athlete.id).filter(({ teamId }) => teamId === team.id);
    const kept = own.find(({ toDay }) => toDay === null || toDay >= fromDay);
    if (kept) {
      if (row.fromDay && row.fromDay !== kept.fromDay) {
        const warning = `In ${team.name} since ${formatDay(kept.fromDay)} already: that day is kept.`;
        warnings.push({ column: "In the team from", cell: row.fromDay, warning });
      }
      return;
    }
    const entry: EntryRecord = {
      id: randomUUID(),
      athleteId: athlete.id,
      teamId: team.id,
      fromDay,
      toDay: null,
      version: 1,
    };
    this.entriesOf(athlete.id).push(entry);
    this.writes.insert("roster_entries", entry);
    changes.push({ field: "Team", before: null, after: `${team.name} from ${formatDay(fromDay)}` });
    count(this.tally, "membershipsMade");
  }

  private addGuardian(
    athlete: AthleteRecord,
    given: NonNullable<RosterRow["guardian"]>,
    changes: FieldChange[],
    warnings: RowWarning[],
  ) {
    const { made, changed } = this.state.guardians.apply(athlete, given, changes, warnings);
    if (made === "guardian") count(this.tally, "guardiansMade");
    if (!made && changed) count(this.tally, "guardiansChanged");
  }

  private touch(athlete: AthleteRecord) {
    if (this.made.has(athlete) || this.touched.has(athlete)) return;
    this.touched.add(athlete);
    count(this.tally, "athletesChanged");
  }

  private entriesOf(athleteId: string) {
    const own = this.entries.get(athleteId) ?? [];
    this.entries.set(athleteId, own);
    return own;
  }

  private describeDoubt(
    row: RosterRow,
    { candidates, separable, reason }: { candidates: AthleteRecord[]; separable: boolean; reason: string },
  ) {
    const choice = separable
      ? "the same athlete or another one"
      : "the same athlete; if not, correct the number";
    return {
      column: row.number ? "Number" : "Family name",
      cell: row.number ?? row.familyName,
      code: "match.doubtful",
      reason,
      mend: `Decide whether this is ${choice}.`,
      candidates: candidates.map((athlete) => this.describe(athlete)),
      separable,
    };
  }

  private describe(athlete: AthleteRecord): Candidate {
    const teams = this.entriesOf(athlete.id).filter(({ toDay }) => toDay === null);
    return {
      id: athlete.id,
      name: `${athlete.givenName} ${athlete.familyName}`,
      number: athlete.number,
      dateOfBirth: athlete.dateOfBirth,
      sex: athlete.sex,
      teams: teams.map(({ teamId }) => this.state.teams.name(teamId)),
    };
  }
}

function needsTeam(row: RosterRow) {
  return {
    column: "Team",
    cell: row.teamName ?? "",
    code: "team.missing",
    reason: "The row names no team, and you cover listed teams only.",
    mend: "Fill in one of your teams.",
  };
}
