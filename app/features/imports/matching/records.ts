import type {
  ExposureGrade,
  Presence,
  RowOutcome,
  SessionKind,
  SessionState,
  Sex,
  Sport,
  Surface,
  TeamSex,
} from "~db/schema/codes";
import type { RowRejection, RowWarning } from "../mapping/read-row";

/** The stored records as the matchers hold them, one object per row; a matcher changes them in place. */
export type TeamRecord = {
  id: string;
  name: string;
  nameKey: string;
  sport: Sport;
  sex: TeamSex;
  underAge: number | null;
  archived: boolean;
  /** One of the person's own teams. */
  covered: boolean;
  version: number;
};
export type AthleteRecord = {
  id: string;
  givenName: string;
  familyName: string;
  nameKey: string;
  number: string | null;
  dateOfBirth: string | null;
  sex: Sex;
  dominantLeg: string;
  archived: boolean;
  /** Visible to the person who imports. Of the others only their number is used, and nothing is shown. */
  visible: boolean;
  version: number;
};
export type EntryRecord = {
  id: string;
  athleteId: string;
  teamId: string;
  fromDay: string;
  toDay: string | null;
  version: number;
};
export type GuardianRecord = {
  id: string;
  name: string;
  email: string | null;
  phone: string | null;
  language: string;
  emailStopped: boolean;
  version: number;
};
export type GuardianshipRecord = {
  athleteId: string;
  guardianId: string;
  relation: string;
  phoneOrder: number;
  /** Carries sealed text that is bound to its version: an import leaves such a row alone. */
  keep: boolean;
  ended: boolean;
  version: number;
};
export type SessionRecord = {
  id: string;
  teamId: string;
  day: string;
  /** HH:MM */
  startTime: string | null;
  kind: SessionKind;
  state: SessionState;
  actualMinutes: number | null;
  cancelReason: string | null;
  surface: Surface | null;
  exposureGrade: ExposureGrade;
  headcount: number | null;
  headcountMinutes: number | null;
  version: number;
};
export type ParticipationRecord = {
  sessionId: string;
  athleteId: string;
  presence: Presence;
  minutes: number;
  version: number;
};

export type RecordsByTable = {
  teams: TeamRecord;
  athletes: AthleteRecord;
  guardians: GuardianRecord;
  guardianships: GuardianshipRecord;
  roster_entries: EntryRecord;
  sessions: SessionRecord;
  participations: ParticipationRecord;
};
export type BulkTable = keyof RecordsByTable;
/** Parents before children: the order of writing; undo goes the other way. */
export const bulkTables = [
  "teams",
  "athletes",
  "guardians",
  "guardianships",
  "roster_entries",
  "sessions",
  "participations",
] as const satisfies readonly BulkTable[];

/** One value that a row changes, in words. */
export type FieldChange = { field: string; before: string | null; after: string | null };
/** A known athlete whom a row may mean, as shown beside it. */
export type Candidate = {
  id: string;
  name: string;
  number: string | null;
  dateOfBirth: string | null;
  sex: string;
  teams: string[];
};
export type RowProblem = RowRejection & {
  /** Set where a person can decide: whom the row may mean. */
  candidates?: Candidate[];
  /** The row may also be imported as another athlete. */
  separable?: boolean;
};
/** What a row would do. */
export type Decision = {
  outcome: RowOutcome;
  problems: RowProblem[];
  changes: FieldChange[];
  warnings: RowWarning[];
};

export function reject(problem: RowProblem, warnings: RowWarning[] = []): Decision {
  return { outcome: "rejected", problems: [problem], changes: [], warnings };
}

/** The writes a matcher has decided and nobody has carried out yet. Each record is in it at most once. */
export class PendingWrites {
  private readonly made = new Map<BulkTable, Set<object>>();
  private readonly changed = new Map<BulkTable, Set<object>>();

  insert<T extends BulkTable>(table: T, record: RecordsByTable[T]) {
    this.setOf(this.made, table).add(record);
  }

  /** A record that is still to be inserted goes in as it is then. */
  update<T extends BulkTable>(table: T, record: RecordsByTable[T]) {
    if (!this.setOf(this.made, table).has(record)) this.setOf(this.changed, table).add(record);
  }

  inserts<T extends BulkTable>(table: T) {
    return [...this.setOf(this.made, table)] as RecordsByTable[T][];
  }

  updates<T extends BulkTable>(table: T) {
    return [...this.setOf(this.changed, table)] as RecordsByTable[T][];
  }

  clear() {
    this.made.clear();
    this.changed.clear();
  }

  private setOf(map: Map<BulkTable, Set<object>>, table: BulkTable) {
    const set = map.get(table) ?? new Set();
    map.set(table, set);
    return set;
  }
}

/** How many records of each kind an import makes and changes. */
export type Tally = Record<string, number>;

export function count(tally: Tally, what: string) {
  tally[what] = (tally[what] ?? 0) + 1;
}
