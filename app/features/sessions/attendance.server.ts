import { stateOfDay } from "~/features/availability/availability.server";
import { audit } from "~/platform/audit.server";
import { dayIn, timeIn } from "~/platform/clock";
import { formatDay } from "~/platform/days";
import { DomainError, notFound } from "~/platform/errors";
import { foldText } from "~/platform/fold-text";
import { type FieldChange, mergeFields } from "~/platform/merge-fields";
import { once } from "~/platform/operations.server";
import { type Scope, type Tx, write } from "~db/client.server";
import { stateWords } from "../availability/state-words";
import { type ExpectedAthlete, type Part, partField, partValue } from "./attendance";
import {
  deleteParticipation,
  findActionAlerts,
  findAthletesByName,
  findKnownAthletes,
  findParticipations,
  findRosterOfDay,
  upsertParticipation,
} from "./attendance.queries.server";
import { conflictOf } from "./conflict";
import { fullTimeOf, gradeOf } from "./session-state";
import { countParticipations, updateSession } from "./sessions.queries.server";
import { participationSchema } from "./sessions.schema";
import { holdSession, type ListedSession, needs } from "./sessions.server";

/** Who is expected at a session: the roster of its day and whoever else has an entry, with the state of that day. */
export async function expectedAthletes(
  tx: Tx,
  session: { id: string; teamId: string; day: string },
): Promise<ExpectedAthlete[]> {
  const roster = await findRosterOfDay(tx, session.teamId, session.day);
  const parts = await findParticipations(tx, session.id);
  const guests = parts.filter(({ id }) => !roster.some((athlete) => athlete.id === id));
  const people = [...roster, ...guests];
  const ids = people.map(({ id }) => id);
  const states = await stateOfDay(tx, ids, session.day);
  const alerts = await findActionAlerts(tx, ids);
  return people.map(({ id, givenName, familyName }) => {
    const part = parts.find((each) => each.id === id);
    const state = states.get(id);
    if (!state) throw new Error("stateOfDay answers for every athlete asked for");
    return {
      id,
      givenName,
      familyName,
      guest: !roster.some((athlete) => athlete.id === id),
      ...state,
      alerts: alerts.filter(({ athleteId }) => athleteId === id).map(({ text }) => text),
      part: part ? { presence: part.presence, minutes: part.minutes } : null,
    };
  });
}

export type ShownAthlete = Omit<ExpectedAthlete, "asOf"> & {
  /** The state in words; empty for full availability. */
  words: string;
};

/** Expected athletes with their state in words; instants become the organisation's local time. */
export function showAthletes(scope: Scope, athletes: readonly ExpectedAthlete[]): ShownAthlete[] {
  return athletes.map(({ asOf, ...athlete }) => ({
    ...athlete,
    words: stateWords(athlete, asOf && localMoment(scope, asOf)),
  }));
}

/** "15:10" today, "27 Nov, 15:10" on another day. */
export function localMoment(scope: Scope, instant: Date): string {
  const day = dayIn(scope.timeZone, instant);
  const time = timeIn(scope.timeZone, instant);
  return day === scope.today ? time : `${formatDay(day, "day-month")}, ${time}`;
}

/** Athletes by name who are not expected yet: visitors, try-outs, players of another team. Names only. */
export async function searchGuests(tx: Tx, text: string, expected: readonly ExpectedAthlete[]) {
  const key = foldText(text);
  if (key.length < 3) return [];
  const found = await findAthletesByName(tx, key);
  return found.filter(({ id }) => !expected.some((athlete) => athlete.id === id));
}

function requireOpen(session: ListedSession, today: string) {
  if (session.day > today)
    throw new DomainError("conflict", "This session has not come yet. Attendance is recorded on its day.");
  if (session.state === "cancelled")
    throw new DomainError(
      "conflict",
      "This session is cancelled. Confirm it as held first if it took place after all.",
    );
}

export type SavedAttendance = { agreed: string[]; tookPart: number };

/**
 * Records parts of a session inside a transaction, field by field (`athlete:<id>`, a part or null). What becomes
 * recorded replaces a headcount, and shows that a planned session was held.
 * @param lasted how long the session lasted in minutes, when the person said
 * @throws DomainError conflict with both values; invalid for an unknown athlete or bad minutes
 */
export async function mergeAttendance(
  tx: Tx,
  sessionId: string,
  changes: Readonly<Record<string, FieldChange>>,
  lasted: number | null = null,
): Promise<SavedAttendance> {
  needs(tx.scope, "attendance.write");
  const session = await holdSession(tx, sessionId);
  requireOpen(session, tx.scope.today);
  const before = await findParticipations(tx, sessionId);
  const stored = Object.fromEntries(before.map((row) => [partField(row.id), partValue(row)]));
  const merge = mergeFields(stored, changes);
  if (merge.conflicts.length > 0) throw conflictOf(merge.conflicts);

  const writes = Object.entries(merge.write).map(([field, value]) => ({
    athleteId: field.slice("athlete:".length),
    part: value === null ? null : readPart(value),
  }));
  await requireKnown(tx, session, writes);
  for (const { athleteId, part } of writes) {
    if (part) await upsertParticipation(tx, { sessionId, athleteId, ...part });
    else await deleteParticipation(tx, sessionId, athleteId);
  }
  const tookPart = await settleAfterAttendance(tx, session, lasted);
  if (writes.length > 0)
    await audit(tx, {
      action: "attendance.record",
      subjectId: sessionId,
      fields: { changed: writes.length },
    });
  return { agreed: merge.agreed, tookPart };
}

function readPart(value: FieldChange["value"]): Part {
  return participationSchema.parse(value);
}

/** Athletes from outside the day's roster are recorded by name in the audit's ids, since they become visible. */
async function requireKnown(
  tx: Tx,
  session: ListedSession,
  writes: readonly { athleteId: string; part: Part | null }[],
) {
  const expected = await expectedAthletes(tx, session);
  const strange = writes
    .map(({ athleteId }) => athleteId)
    .filter((id) => !expected.some((athlete) => athlete.id === id));
  if (strange.length === 0) return;
  const known = await findKnownAthletes(tx, strange);
  if (known.length !== new Set(strange).size) throw notFound("That athlete");
  for (const athleteId of known)
    await audit(tx, { action: "attendance.guest", subjectId: session.id, athleteId });
}

async function settleAfterAttendance(tx: Tx, session: ListedSession, lasted: number | null) {
  const rows = await findParticipations(tx, session.id);
  const tookPart = rows.filter(({ presence, minutes }) => presence === "took_part" && minutes > 0).length;
  const state = session.state === "planned" && tookPart > 0 ? "held" : session.state;
  const recorded = rows.length > 0;
  const headcount = recorded ? null : session.headcount;
  const saysLength = lasted !== null && session.state !== "abandoned" && lasted !== fullTimeOf(session);
  await updateSession(tx, session.id, {
    state,
    ...(saysLength ? { actualMinutes: lasted } : {}),
    headcount,
    headcountMinutes: recorded ? null : session.headcountMinutes,
    exposureGrade: gradeOf({ ...session, state, participations: rows.length, headcount }),
  });
  return tookPart;
}

/** A headcount as two flat fields. */
export const headcountFields = (session: Pick<ListedSession, "headcount" | "headcountMinutes">) => ({
  headcount: session.headcount,
  minutes: session.headcountMinutes,
});

/**
 * Records the number of athletes and the minutes, when nothing better is known.
 * @throws DomainError conflict when attendance by athlete is recorded, or somebody else entered another number
 */
export async function mergeHeadcount(
  tx: Tx,
  sessionId: string,
  changes: Readonly<Record<"headcount" | "minutes", FieldChange>>,
) {
  needs(tx.scope, "attendance.write");
  const session = await holdSession(tx, sessionId);
  requireOpen(session, tx.scope.today);
  if ((await countParticipations(tx, sessionId)) > 0)
    throw new DomainError(
      "conflict",
      "Attendance by athlete is recorded for this session, which is better than a headcount. Correct it there.",
    );
  const stored = headcountFields(session);
  const merge = mergeFields(stored, changes);
  if (merge.conflicts.length > 0) throw conflictOf(merge.conflicts);
  const next = { ...stored, ...merge.write };
  const headcount = typeof next.headcount === "number" ? next.headcount : null;
  const minutes = typeof next.minutes === "number" ? next.minutes : null;
  if ((headcount === null) !== (minutes === null))
    throw new DomainError("invalid", "A headcount needs the number of athletes and the minutes.");
  const state = session.state === "planned" && headcount !== null ? "held" : session.state;
  await updateSession(tx, sessionId, {
    state,
    headcount,
    headcountMinutes: minutes,
    exposureGrade: gradeOf({ ...session, state, headcount }),
  });
  await audit(tx, { action: "attendance.headcount", subjectId: sessionId });
  return { agreed: merge.agreed };
}

/** Records attendance once under the form's or the client's operation id. */
export const recordAttendance = (
  scope: Scope,
  sessionId: string,
  operationId: string,
  changes: Readonly<Record<string, FieldChange>>,
  lasted: number | null = null,
) =>
  write(scope, (tx) =>
    once(tx, operationId, { kind: "attendance", sessionId, fields: changes, lasted }, () =>
      mergeAttendance(tx, sessionId, changes, lasted),
    ),
  );

export const recordHeadcount = (
  scope: Scope,
  sessionId: string,
  operationId: string,
  changes: Readonly<Record<"headcount" | "minutes", FieldChange>>,
) =>
  write(scope, (tx) =>
    once(tx, operationId, { kind: "headcount", sessionId, fields: changes }, () =>
      mergeHeadcount(tx, sessionId, changes),
    ),
  );
