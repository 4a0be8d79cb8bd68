import { may } from "~/features/accounts/permissions";
import type { ExpectedAthlete } from "~/features/sessions/attendance";
import { expectedAthletes } from "~/features/sessions/attendance.server";
import { conflictOf } from "~/features/sessions/conflict";
import { hasBegun } from "~/features/sessions/session-state";
import {
  emergencyCardOf,
  getSession,
  holdSession,
  type ListedSession,
  localNow,
  needs,
} from "~/features/sessions/sessions.server";
import { audit } from "~/platform/audit.server";
import { DomainError, notFound } from "~/platform/errors";
import { type FieldChange, mergeFields } from "~/platform/merge-fields";
import { once } from "~/platform/operations.server";
import { type Scope, type Tx, write } from "~db/client.server";
import { defaultTargets } from "./compliance";
import { fieldsOf, joinsByDefault, outcomeOf, stateFrom, type WarmUpState } from "./warm-up";
import {
  deleteWarmUp,
  findAssignment,
  findProgramme,
  findWarmedUp,
  findWarmUp,
  replaceWarmedUp,
  upsertWarmUp,
} from "./warm-ups.queries.server";
import { valueSchemaOf } from "./warm-ups.schema";

export {
  complianceByTeam,
  complianceTogether,
  programmesOf,
  type TallySession,
  type TeamCompliance,
} from "./compliance.server";

/** Whom the record takes as warmed up until somebody says otherwise: who takes part, as far as restrictions allow. */
export function defaultParticipants(athletes: readonly ExpectedAthlete[]): string[] {
  const attendanceKnown = athletes.some(({ part }) => part?.presence === "took_part");
  return athletes
    .filter((athlete) => (attendanceKnown ? athlete.part?.presence === "took_part" : !athlete.guest))
    .filter(joinsByDefault)
    .map(({ id }) => id);
}

const blank = (athletes: readonly ExpectedAthlete[]): WarmUpState => ({
  recorded: false,
  blocks: [],
  skipReason: null,
  skipNote: null,
  minutes: null,
  ledBy: null,
  athleteIds: defaultParticipants(athletes),
});

async function stateOf(
  tx: Tx,
  sessionId: string,
  athletes: readonly ExpectedAthlete[],
): Promise<WarmUpState> {
  const row = await findWarmUp(tx, sessionId);
  if (!row) return blank(athletes);
  const { blocks, skipReason, skipNote, minutes, ledBy } = row;
  const athleteIds = await findWarmedUp(tx, sessionId);
  return { recorded: true, blocks, skipReason, skipNote, minutes, ledBy, athleteIds };
}

/** The warm-up page of a session: the session, the record, who is expected, the programme and the emergency card. */
export async function openWarmUp(tx: Tx, scope: Scope, sessionId: string) {
  needs(scope, "warm-ups.read");
  const session = await getSession(tx, sessionId);
  const athletes = await expectedAthletes(tx, session);
  const assignment = await findAssignment(tx, session.teamId, session.day);
  const row = await findWarmUp(tx, sessionId);
  return {
    session,
    athletes,
    state: await stateOf(tx, sessionId, athletes),
    lastSaved: row ? { at: row.recordedAt, by: row.recordedBy } : null,
    begun: hasBegun(session, localNow(scope)),
    mayWrite:
      may(scope.roles, "warm-ups.write") && session.state !== "cancelled" && session.day <= scope.today,
    programme: assignment
      ? ((await findProgramme(tx, assignment.programmeId, assignment.programmeVersion)) ?? null)
      : null,
    targetMinutes: assignment?.targetMinutes ?? defaultTargets.minutes,
    card: await emergencyCardOf(tx, session),
  };
}

export type SavedWarmUp = {
  /** Fields that somebody else had set to the same value. */
  agreed: string[];
  state: WarmUpState;
};

function checkFields(changes: Readonly<Record<string, FieldChange>>) {
  for (const [field, { value }] of Object.entries(changes)) {
    const schema = valueSchemaOf(field);
    if (!schema) throw new DomainError("invalid", `"${field}" is not a field of a warm-up.`);
    schema.parse(value);
  }
}

/**
 * Changes the warm-up record of a session inside a transaction, field by field. The first change makes the record,
 * with the default participants and the team's programme version; when no block and no reason is left, nothing is
 * recorded any more.
 * @throws DomainError conflict with both values; not_found for a foreign session or athlete
 */
export async function mergeWarmUp(
  tx: Tx,
  sessionId: string,
  changes: Readonly<Record<string, FieldChange>>,
): Promise<SavedWarmUp> {
  needs(tx.scope, "warm-ups.write");
  checkFields(changes);
  const session = await holdSession(tx, sessionId);
  requireOpen(session, tx.scope.today);
  const athletes = await expectedAthletes(tx, session);
  const before = await stateOf(tx, sessionId, athletes);
  const stored = fieldsOf(before);
  const named = Object.fromEntries(
    Object.entries(changes).map(([field, change]) => [field, normalise(field, change)]),
  );
  // An athlete without an entry is one who is not ticked.
  const complete = { ...Object.fromEntries(athleteFieldsIn(named)), ...stored };
  const merge = mergeFields(complete, named);
  if (merge.conflicts.length > 0) throw conflictOf(merge.conflicts);
  const after = stateFrom({ ...complete, ...merge.write });
  await requireExpected(athletes, before, after);
  checkWhole(after, named);
  await store(tx, session, before, after);
  return { agreed: merge.agreed, state: after.recorded ? after : blank(athletes) };
}

const athleteFieldsIn = (changes: Record<string, FieldChange>) =>
  Object.keys(changes)
    .filter((field) => field.startsWith("athlete:"))
    .map((field) => [field, false] as const);

/** An empty text is nothing. */
const normalise = (_field: string, { base, value }: FieldChange): FieldChange => ({
  base: base === "" ? null : base,
  value: typeof value === "string" ? value.trim() || null : value,
});

function requireOpen(session: ListedSession, today: string) {
  if (session.day > today)
    throw new DomainError("conflict", "This session has not come yet. The warm-up is ticked off on its day.");
  if (session.state === "cancelled")
    throw new DomainError("conflict", "This session is cancelled, so there is no warm-up to record.");
}

async function requireExpected(
  athletes: readonly ExpectedAthlete[],
  before: WarmUpState,
  after: WarmUpState,
) {
  const strange = after.athleteIds.find(
    (id) => !before.athleteIds.includes(id) && !athletes.some((athlete) => athlete.id === id),
  );
  if (strange) throw notFound("That athlete");
}

function checkWhole(after: WarmUpState, changes: Readonly<Record<string, FieldChange>>) {
  if (after.skipReason && after.blocks.length > 0)
    throw new DomainError(
      "conflict",
      "Somebody ticked a block and somebody entered that the warm-up was not done. Nothing was changed: open the page again and choose which is right.",
    );
  const others = Object.values(changes).some(({ value }) => value !== null && value !== false);
  if (!after.recorded && others)
    throw new DomainError(
      "invalid",
      "Tick the blocks that were done, or say why the warm-up was not done; then the rest can be saved.",
    );
}

async function store(tx: Tx, session: ListedSession, before: WarmUpState, after: WarmUpState) {
  if (!after.recorded) {
    if (before.recorded) {
      await deleteWarmUp(tx, session.id);
      await audit(tx, { action: "warm-up.clear", subjectId: session.id });
    }
    return;
  }
  const assignment = await findAssignment(tx, session.teamId, session.day);
  const outcome = outcomeOf(after);
  const skipped = outcome === "skipped";
  await upsertWarmUp(tx, {
    sessionId: session.id,
    outcome,
    blocks: [...after.blocks],
    skipReason: after.skipReason,
    skipNote: skipped ? after.skipNote : null,
    minutes: skipped ? null : after.minutes,
    ledBy: skipped ? null : after.ledBy,
    programmeId: assignment?.programmeId ?? null,
    programmeVersion: assignment?.programmeVersion ?? null,
  });
  const was = before.recorded ? before.athleteIds : [];
  const is = after.athleteIds;
  await replaceWarmedUp(tx, session.id, {
    add: is.filter((id) => !was.includes(id)),
    remove: was.filter((id) => !is.includes(id)),
  });
  await audit(tx, {
    action: "warm-up.record",
    subjectId: session.id,
    fields: { outcome, blocks: after.blocks.length, athletes: is.length },
  });
}

/**
 * Changes the warm-up record once under the operation's id: a replay returns the first result.
 * @throws DomainError conflict, not_found, operation_mismatch
 */
export const recordWarmUp = (
  scope: Scope,
  sessionId: string,
  operationId: string,
  changes: Readonly<Record<string, FieldChange>>,
) =>
  write(scope, (tx) =>
    once(tx, operationId, { kind: "warm-up", sessionId, fields: changes }, () =>
      mergeWarmUp(tx, sessionId, changes),
    ),
  );
