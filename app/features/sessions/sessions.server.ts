import { randomUUID } from "node:crypto";
import { may, type Permission } from "~/features/accounts/permissions";
import { findOwnTeams } from "~/features/accounts/viewing.server";
import { coversTeam } from "~/features/roster/visibility.server";
import { audit } from "~/platform/audit.server";
import { timeIn } from "~/platform/clock";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { type FieldConflict, mergeFields } from "~/platform/merge-fields";
import { type Scope, type Tx, write } from "~db/client.server";
import { gradeOf, type LocalNow, type SessionStatus, statusOf, tookPlace } from "./session-state";
import {
  countSessions,
  findNextSessions,
  findPlannedUntil,
  findSameSession,
  findSession,
  findSessions,
  findSessionsOfDay,
  findUsual,
  findVenue,
  findVenues,
  insertSession,
  lockSession,
  type SessionChange,
  type SessionRow,
  takeTurnToAdd,
  updateSession,
} from "./sessions.queries.server";
import type { NewSessionInput } from "./sessions.schema";

/** A session as lists show it. No injury stands in it: coaches read it too. */
export type ListedSession = SessionRow & { status: SessionStatus };

export function needs(scope: Scope, permission: Permission) {
  if (!may(scope.roles, permission)) throw forbidden();
}

/** The organisation's calendar date and clock at this moment. */
export const localNow = (scope: Scope, instant = new Date()): LocalNow => ({
  day: scope.today,
  time: timeIn(scope.timeZone, instant),
});

const withStatus = (scope: Scope) => {
  const now = localNow(scope);
  return (row: SessionRow): ListedSession => ({ ...row, status: statusOf(row, now) });
};

/** Own sessions of a day, in the order of their start. */
export async function listSessionsOfDay(tx: Tx, scope: Scope, day: string): Promise<ListedSession[]> {
  return (await findSessionsOfDay(tx, day)).map(withStatus(scope));
}

/** Own sessions whose time has passed and that nobody confirmed, oldest first. */
export async function listUnconfirmed(
  tx: Tx,
  scope: Scope,
  teamIds?: readonly string[],
): Promise<ListedSession[]> {
  const rows = (await findPlannedUntil(tx, scope.today, teamIds)).map(withStatus(scope));
  return rows.filter(({ status }) => status === "unconfirmed");
}

/**
 * The one session a coach should see now: today's that has not passed yet, else today's last, else the next one
 * of a later day; undefined when nothing is planned.
 */
export async function nextSessionForCoach(tx: Tx, scope: Scope): Promise<ListedSession | undefined> {
  const today = await listSessionsOfDay(tx, scope, scope.today);
  const open = today.filter(({ status }) => status === "planned" || status === "held");
  const now = localNow(scope);
  const current = open.find(({ startTime, plannedMinutes }) => {
    const end = startTime === null ? 24 * 60 : toMinutes(startTime) + (plannedMinutes ?? 90) + 30;
    return end >= toMinutes(now.time);
  });
  if (current) return current;
  const last = today.filter(({ status }) => status !== "cancelled").at(-1);
  if (last) return last;
  const [next] = await findNextSessions(tx, scope.today, 1);
  return next ? withStatus(scope)(next) : undefined;
}

const toMinutes = (time: string) => Number(time.slice(0, 2)) * 60 + Number(time.slice(3, 5));

/** Own sessions of some teams between two days (inclusive). */
export async function listSessions(
  tx: Tx,
  range: { from: string; to: string; teamIds: readonly string[] },
  options: { newestFirst?: boolean; limit?: number; offset?: number } = {},
) {
  return {
    sessions: (await findSessions(tx, range, options)).map(withStatus(tx.scope)),
    total: await countSessions(tx, range),
  };
}

/**
 * One own session.
 * @throws DomainError not_found
 */
export async function getSession(tx: Tx, id: string): Promise<ListedSession> {
  const row = await findSession(tx, id);
  if (!row) throw notFound("That session");
  return withStatus(tx.scope)(row);
}

/** Locks and reads an own session for a write about it. */
export async function holdSession(tx: Tx, id: string): Promise<ListedSession> {
  if (!(await lockSession(tx, id))) throw notFound("That session");
  return getSession(tx, id);
}

/** The venue's emergency card; null when the session names no venue. */
export async function emergencyCardOf(tx: Tx, session: { venueId: string | null }) {
  return session.venueId ? ((await findVenue(tx, session.venueId)) ?? null) : null;
}

/** What the form of a new session offers: own teams, venues, and what the team usually does. */
export async function offerNewSession(tx: Tx, teamId: string | null) {
  const teams = await findOwnTeams(tx, tx.scope);
  const chosen = teams.find(({ id }) => id === teamId) ?? (teams.length === 1 ? teams[0] : undefined);
  return {
    teams,
    venues: await findVenues(tx),
    teamId: chosen?.id ?? null,
    usual: (chosen && (await findUsual(tx, chosen.id))) ?? null,
  };
}

export const listVenues = findVenues;

/**
 * Adds a session inside a transaction, under a client-made id. Two people who add one session meet here: a session
 * of the same team, day and kind is proposed unless `another` says that it is a second one.
 * @throws DomainError not_found, conflict (details.existing)
 */
export async function insertNewSession(
  tx: Tx,
  id: string,
  input: NewSessionInput,
  { another = false }: { another?: boolean } = {},
): Promise<ListedSession> {
  needs(tx.scope, "attendance.write");
  if (!coversTeam(tx.scope, input.teamId)) throw notFound("That team");
  const teams = await findOwnTeams(tx, tx.scope);
  if (!teams.some((team) => team.id === input.teamId)) throw notFound("That team");
  await requireVenue(tx, input.venueId);
  await takeTurnToAdd(tx, input);
  const same = another ? undefined : await findSameSession(tx, input);
  if (same)
    throw new DomainError(
      "conflict",
      `${same.teamName} already has a ${same.kind} on this day${same.startTime ? ` at ${same.startTime}` : ""}. Use that one, or say that this is another.`,
      { details: { existing: same.id } },
    );
  await insertSession(tx, { ...input, id, state: "planned" });
  await audit(tx, { action: "session.add", subjectId: id, fields: { kind: input.kind, day: input.day } });
  return getSession(tx, id);
}

async function requireVenue(tx: Tx, venueId: string | null) {
  if (venueId && !(await findVenue(tx, venueId))) throw notFound("That venue");
}

export const addSession = (scope: Scope, input: NewSessionInput, options: { another?: boolean } = {}) =>
  write(scope, (tx) => insertNewSession(tx, randomUUID(), input, options));

/** What may be said about a session that took place or did not. */
export type Outcome =
  | { state: "held"; actualMinutes: number | null }
  | { state: "abandoned"; abandonedAfter: number }
  | { state: "cancelled"; cancelReason: string };

/**
 * Confirms a session as held, abandoned or cancelled inside a transaction, its row locked. The grade follows.
 * @throws DomainError conflict when it has not come yet, or attendance speaks against cancelling
 */
export async function settleSession(tx: Tx, session: ListedSession, outcome: Outcome) {
  needs(tx.scope, "attendance.write");
  if (outcome.state !== "cancelled" && session.day > tx.scope.today)
    throw new DomainError("conflict", "This session has not come yet. Confirm it on its day.");
  if (outcome.state === "cancelled" && (session.tookPart > 0 || session.headcount !== null))
    throw new DomainError(
      "conflict",
      `${session.tookPart || session.headcount} athletes are recorded as taking part, so it took place. If it stopped early, enter it as abandoned; if the attendance is wrong, correct it first.`,
    );
  const change: SessionChange = {
    state: outcome.state,
    actualMinutes:
      outcome.state === "held" ? (outcome.actualMinutes ?? session.actualMinutes) : session.actualMinutes,
    abandonedAfter: outcome.state === "abandoned" ? outcome.abandonedAfter : null,
    cancelReason: outcome.state === "cancelled" ? outcome.cancelReason : null,
  };
  await updateSession(tx, session.id, { ...change, exposureGrade: gradeOf({ ...session, ...outcome }) });
  await audit(tx, {
    action: "session.settle",
    subjectId: session.id,
    fields: { state: outcome.state, before: session.state },
  });
}

/**
 * @param seen the state the person saw when they chose
 * @throws DomainError not_found, conflict (somebody else settled it otherwise meanwhile)
 */
export const settle = (scope: Scope, id: string, outcome: Outcome, seen: string) =>
  write(scope, async (tx) => {
    const session = await holdSession(tx, id);
    if (session.state !== seen && session.state !== outcome.state)
      throw new DomainError(
        "conflict",
        `Somebody else changed this session meanwhile: it is ${session.state} now, and you chose ${outcome.state}. Choose again if yours is right.`,
        { details: { stored: session.state, value: outcome.state } },
      );
    await settleSession(tx, session, outcome);
  });

const editable = ["day", "startTime", "kind", "plannedMinutes", "surface", "venueId"] as const;
export type EditInput = Omit<NewSessionInput, "teamId">;
export type EditBase = Partial<Record<keyof EditInput, string | number | null>>;

/** The values a form for editing is opened with. */
export const editBaseOf = (session: ListedSession): EditBase =>
  Object.fromEntries(editable.map((field) => [field, session[field]]));

/**
 * Edits what was planned, field by field. Staff only: a coach's word is attendance and whether it took place.
 * @param base the values the form was opened with
 * @throws DomainError conflict with both values of each field that somebody else changed otherwise meanwhile
 */
export function editSession(scope: Scope, id: string, input: EditInput, base: EditBase) {
  needs(scope, "sessions.write");
  return write(scope, async (tx) => {
    const session = await holdSession(tx, id);
    const stored = Object.fromEntries(editable.map((field) => [field, session[field]]));
    // A field the person left alone is not theirs to decide.
    const touched = editable.filter((field) => (base[field] ?? null) !== input[field]);
    const changes = Object.fromEntries(
      touched.map((field) => [field, { base: base[field] ?? null, value: input[field] }]),
    );
    const { write: change, conflicts } = mergeFields(stored, changes);
    if (conflicts.length > 0) throw conflictOfEdit(session, conflicts);
    await checkEdit(tx, session, { ...session, ...change });
    await updateSession(tx, id, { ...change, exposureGrade: gradeOf({ ...session, ...change }) });
    await audit(tx, { action: "session.edit", subjectId: id, fields: { changed: Object.keys(change) } });
  });
}

async function checkEdit(tx: Tx, session: ListedSession, next: ListedSession) {
  await requireVenue(tx, next.venueId);
  if (next.day > tx.scope.today && tookPlace(session.state))
    throw new DomainError("invalid", "", {
      fields: { day: ["This session took place, so its day cannot lie in the future."] },
    });
  if (next.day !== session.day && session.participations > 0)
    throw new DomainError("conflict", "", {
      fields: {
        day: ["Attendance is recorded for the roster of this day. Clear the attendance before moving it."],
      },
    });
}

function conflictOfEdit(session: ListedSession, conflicts: readonly FieldConflict[]) {
  const fields = Object.fromEntries(
    conflicts.map(({ field, stored }) => {
      const now = field === "venueId" ? session.venueName : stored;
      return [
        field,
        [
          `Somebody else changed this meanwhile to "${now ?? "nothing"}". Save again to replace it with yours.`,
        ],
      ];
    }),
  );
  return new DomainError("conflict", "Somebody else changed this session meanwhile.", { fields });
}
