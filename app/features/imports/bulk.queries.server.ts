import { sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import {
  type AthleteRecord,
  type BulkTable,
  bulkTables,
  type EntryRecord,
  type GuardianRecord,
  type GuardianshipRecord,
  type ParticipationRecord,
  type PendingWrites,
  type RecordsByTable,
  type SessionRecord,
  type TeamRecord,
} from "./matching/records";

/**
 * The bulk reads and writes of the roster's and the sessions' tables: imports own them, since they are set-based and
 * keep a change list. Single records are written by the features themselves.
 */

const org = (tx: Tx) => sql`${tx.scope.organisationId}::uuid`;
const uuids = (ids: readonly string[]) => sql`${`{${ids.join(",")}}`}::uuid[]`;

async function rowsOf<T>(tx: Tx, query: ReturnType<typeof sql>): Promise<T[]> {
  return [...(await tx.execute(query))] as T[];
}

/** SQL: a team id is one of the person's own. */
function covered(tx: Tx, teamId: ReturnType<typeof sql>) {
  const { teams } = tx.scope;
  return teams === "all" ? sql`true` : sql`${teamId} = any(${uuids(teams)})`;
}

/** Ever on the roster of one of the person's own teams, now, before, or from a day to come. */
function everOwn(tx: Tx, athleteId: ReturnType<typeof sql>, since: string | null) {
  if (tx.scope.teams === "all") return sql`true`;
  return sql`exists (
    select 1 from roster_entries own where own.organisation_id = ${org(tx)} and own.athlete_id = ${athleteId}
      and ${covered(tx, sql`own.team_id`)}
      and (${since}::date is null or own.to_day is null or own.to_day >= ${since}::date))`;
}

export function loadTeams(tx: Tx) {
  return rowsOf<TeamRecord>(
    tx,
    sql`select id, name, name_key as "nameKey", sport, sex, under_age as "underAge",
      archived_at is not null as archived, ${covered(tx, sql`id`)} as covered, version
    from teams where organisation_id = ${org(tx)}`,
  );
}

/** @param since the day from which a listed-team person's athletes count; null: at any time */
export function loadAthletes(tx: Tx, since: string | null) {
  return rowsOf<AthleteRecord>(
    tx,
    sql`select id, given_name as "givenName", family_name as "familyName", name_key as "nameKey", number,
      date_of_birth::text as "dateOfBirth", sex, dominant_leg as "dominantLeg", archived_at is not null as archived,
      ${everOwn(tx, sql`athletes.id`, since)} as visible, version
    from athletes where organisation_id = ${org(tx)}`,
  );
}

export function loadEntries(tx: Tx) {
  return rowsOf<EntryRecord>(
    tx,
    sql`select id, athlete_id as "athleteId", team_id as "teamId", from_day::text as "fromDay",
      to_day::text as "toDay", version
    from roster_entries where organisation_id = ${org(tx)} order by from_day, id`,
  );
}

export function loadGuardians(tx: Tx) {
  return rowsOf<GuardianRecord>(
    tx,
    sql`select id, name, email, phone, language, email_stopped_at is not null as "emailStopped", version
    from guardians where organisation_id = ${org(tx)} order by created_at, id`,
  );
}

export function loadGuardianships(tx: Tx) {
  return rowsOf<GuardianshipRecord>(
    tx,
    sql`select athlete_id as "athleteId", guardian_id as "guardianId", relation, phone_order as "phoneOrder",
      legal_limits is not null as keep, ended_at is not null as ended, version
    from guardianships where organisation_id = ${org(tx)} order by phone_order, guardian_id`,
  );
}

export function loadSessions(tx: Tx, teamIds: readonly string[], from: string, to: string) {
  return rowsOf<SessionRecord>(
    tx,
    sql`select id, team_id as "teamId", day::text as day, to_char(start_time, 'HH24:MI') as "startTime", kind, state,
      actual_minutes as "actualMinutes", cancel_reason as "cancelReason", surface,
      exposure_grade as "exposureGrade", headcount, headcount_minutes::float8 as "headcountMinutes", version
    from sessions where organisation_id = ${org(tx)} and team_id = any(${uuids(teamIds)})
      and day between ${from}::date and ${to}::date
    order by day, start_time nulls first, id`,
  );
}

export function loadParticipations(tx: Tx, sessionIds: readonly string[]) {
  return rowsOf<ParticipationRecord>(
    tx,
    sql`select session_id as "sessionId", athlete_id as "athleteId", presence, minutes::float8 as minutes, version
    from participations where organisation_id = ${org(tx)} and session_id = any(${uuids(sessionIds)})`,
  );
}

/** How a record is written: its key, the columns of an insert, and those an update may change. */
type Shape = {
  keys: string[];
  columns: Record<string, string>;
  updates: string[];
  extra?: Record<string, string>;
};

const shapes: Record<BulkTable, Shape> = {
  teams: {
    keys: ["id"],
    columns: { id: "uuid", name: "text", nameKey: "text", sport: "text", sex: "text", underAge: "int" },
    updates: [],
  },
  athletes: {
    keys: ["id"],
    columns: {
      id: "uuid",
      givenName: "text",
      familyName: "text",
      nameKey: "text",
      number: "text",
      dateOfBirth: "date",
      sex: "text",
      dominantLeg: "text",
    },
    updates: ["givenName", "familyName", "nameKey", "number", "dateOfBirth", "sex", "dominantLeg"],
  },
  guardians: {
    keys: ["id"],
    columns: {
      id: "uuid",
      name: "text",
      email: "text",
      phone: "text",
      language: "text",
      emailStopped: "boolean",
    },
    updates: ["name", "email", "phone", "language"],
    extra: { email_stopped_at: `case when r."emailStopped" then t.email_stopped_at end` },
  },
  guardianships: {
    keys: ["athleteId", "guardianId"],
    columns: { athleteId: "uuid", guardianId: "uuid", relation: "text", phoneOrder: "int" },
    updates: ["relation"],
  },
  roster_entries: {
    keys: ["id"],
    columns: { id: "uuid", athleteId: "uuid", teamId: "uuid", fromDay: "date", toDay: "date" },
    updates: [],
  },
  sessions: {
    keys: ["id"],
    columns: {
      id: "uuid",
      teamId: "uuid",
      day: "date",
      startTime: "time",
      kind: "text",
      state: "text",
      actualMinutes: "int",
      cancelReason: "text",
      surface: "text",
      exposureGrade: "text",
      headcount: "int",
      headcountMinutes: "numeric",
    },
    updates: [
      "startTime",
      "state",
      "actualMinutes",
      "cancelReason",
      "surface",
      "exposureGrade",
      "headcount",
      "headcountMinutes",
    ],
    extra: { updated_at: "now()" },
  },
  participations: {
    keys: ["sessionId", "athleteId"],
    columns: { sessionId: "uuid", athleteId: "uuid", presence: "text", minutes: "numeric" },
    updates: ["presence", "minutes"],
    extra: { recorded_at: "now()" },
  },
};

const snake = (name: string) => name.replace(/[A-Z]/gu, (letter) => `_${letter.toLowerCase()}`);
const actorColumn: Partial<Record<BulkTable, string>> = {
  sessions: "created_by",
  participations: "recorded_by",
};
/** Columns of a record that the table does not have. */
const notStored = new Set(["emailStopped"]);

/** Thrown when a record is no longer as it was read: somebody changed it at the same moment. */
export class RecordsMoved extends Error {
  constructor() {
    super("Records changed between reading and writing.");
    this.name = "RecordsMoved";
  }
}

/**
 * Carries out the pending writes, a few statements per table, and notes each in the import's change list.
 * @param position the place of the first note in the change list
 * @returns the place after the last
 */
export async function carryOut(tx: Tx, importId: string, writes: PendingWrites, position: number) {
  let next = position;
  for (const table of bulkTables) {
    const made = writes.inserts(table);
    if (made.length > 0) next = await insertAll(tx, importId, table, made, next);
    const changed = writes.updates(table);
    if (changed.length > 0) next = await updateAll(tx, importId, table, changed, next);
  }
  writes.clear();
  return next;
}

/** The rows as one array per column: `unnest($1::uuid[], $2::text[], …)`. */
function unnest(records: readonly object[], columns: Record<string, string>) {
  const arrays = Object.entries(columns).map(
    ([name, type]) =>
      sql`${arrayText(records.map((record) => (record as Record<string, unknown>)[name]))}::${sql.raw(type)}[]`,
  );
  const names = sql.raw(
    Object.keys(columns)
      .map((name) => `"${name}"`)
      .join(", "),
  );
  return sql`unnest(${sql.join(arrays, sql`, `)}) as r(${names})`;
}

/** An array in PostgreSQL's own notation, which needs no knowledge of its element's type on the way. */
function arrayText(values: readonly unknown[]) {
  const elements = values.map((value) => {
    if (value === null || value === undefined) return "NULL";
    return `"${String(value).replace(/["\\]/gu, "\\$&")}"`;
  });
  return `{${elements.join(",")}}`;
}

const keyObject = (table: BulkTable, row: string) =>
  sql.raw(
    `jsonb_build_object(${shapes[table].keys.map((key) => `'${snake(key)}', ${row}.${row === "r" ? `"${key}"` : snake(key)}::text`).join(", ")})`,
  );

async function insertAll<T extends BulkTable>(
  tx: Tx,
  importId: string,
  table: T,
  records: readonly RecordsByTable[T][],
  position: number,
) {
  const { columns } = shapes[table];
  const stored = Object.keys(columns).filter((name) => !notStored.has(name));
  const actor = actorColumn[table];
  const names = ["organisation_id", ...stored.map(snake), ...(actor ? [actor] : [])];
  const values = sql`${org(tx)}, ${sql.raw(stored.map((name) => `r."${name}"`).join(", "))}${
    actor ? sql`, ${tx.scope.personId}::uuid` : sql``
  }`;
  await tx.execute(
    sql`insert into ${sql.identifier(table)} (${sql.raw(names.join(", "))}) select ${values} from ${unnest(records, columns)}`,
  );
  const keys = Object.fromEntries(shapes[table].keys.map((key) => [key, "uuid"]));
  await tx.execute(sql`
    insert into import_changes (organisation_id, import_id, position, record_table, record_key, before, result_version)
    select ${org(tx)}, ${importId}::uuid, ${position}::int + row_number() over () - 1, ${table}, ${keyObject(table, "r")}, null, 1
    from ${unnest(records, keys)}`);
  return position + records.length;
}

async function updateAll<T extends BulkTable>(
  tx: Tx,
  importId: string,
  table: T,
  records: readonly RecordsByTable[T][],
  position: number,
) {
  const { keys, columns, updates, extra } = shapes[table];
  const source = unnest(records, { ...columns, version: "int" });
  const joined = sql.raw(keys.map((key) => `t.${snake(key)} = r."${key}"`).join(" and "));
  const noted = await tx.execute(sql`
    insert into import_changes (organisation_id, import_id, position, record_table, record_key, before, result_version)
    select ${org(tx)}, ${importId}::uuid, ${position}::int + row_number() over () - 1, ${table}, ${keyObject(table, "t")}, to_jsonb(t),
      t.version + 1
    from ${sql.identifier(table)} t join ${source} on ${joined} and t.version = r.version
    where t.organisation_id = ${org(tx)} returning position`);
  if (noted.length !== records.length) throw new RecordsMoved();
  const actor = table === "participations" ? sql`, recorded_by = ${tx.scope.personId}::uuid` : sql``;
  const set = [
    ...updates.map((name) => `${snake(name)} = r."${name}"`),
    ...Object.entries(extra ?? {}).map(([column, value]) => `${column} = ${value}`),
    "version = t.version + 1",
  ];
  const done = await tx.execute(sql`
    update ${sql.identifier(table)} t set ${sql.raw(set.join(", "))}${actor}
    from ${source} where t.organisation_id = ${org(tx)} and ${joined} and t.version = r.version returning 1`);
  if (done.length !== records.length) throw new RecordsMoved();
  for (const record of records) record.version += 1;
  return position + records.length;
}
