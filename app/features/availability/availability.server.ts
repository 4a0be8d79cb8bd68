import { randomUUID } from "node:crypto";
import { may } from "~/features/accounts/permissions";
import { audit } from "~/platform/audit.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import type { Scope, Tx } from "~db/client.server";
import type { availabilityCauses } from "~db/schema/codes";
import { type Contribution, type DayState, fullState, holdsOn, stateFromContributions } from "./availability";
import {
  findChanges,
  findContributionsOn,
  findInjuryContributions,
  findLimitedAthletes,
  findReason,
  findReasonContributions,
  findReasonOf,
  findTeamsOn,
  insertChange,
  insertReason,
  takeNextSeq,
} from "./availability.queries.server";
import type { AvailabilityChange } from "./availability.schema";

export type AvailabilityCause = (typeof availabilityCauses)[number];

/** The state of a day and the instant of the newest entry behind it; null when nothing was ever entered. */
export type AthleteDayState = DayState & { asOf: Date | null };

export type NotFullyAvailable = AthleteDayState & {
  athleteId: string;
  givenName: string;
  familyName: string;
  teams: { id: string; name: string }[];
};

/** Restrictions and the expected day are for those who act on them. */
const seesDetail = (scope: Scope) =>
  scope.actors.includes("job") || may(scope.roles, "availability.restrictions");

/**
 * The state of each athlete on a day, without any reason. Every id asked for is in the answer: "full" when nothing
 * limits them. Ask only for athletes that are visible to the scope.
 */
export async function stateOfDay(
  tx: Tx,
  athleteIds: readonly string[],
  day: string,
): Promise<Map<string, AthleteDayState>> {
  const rows = athleteIds.length > 0 ? await findContributionsOn(tx, athleteIds, day) : [];
  const detailed = seesDetail(tx.scope);
  return new Map(
    athleteIds.map((id) => {
      const parts = rows.filter(({ athleteId }) => athleteId === id);
      const state = stateFromContributions(parts, day);
      const asOf = parts.reduce<Date | null>((at, { setAt }) => (!at || setAt > at ? setAt : at), null);
      return [id, { ...(detailed ? state : { ...fullState(), state: state.state }), asOf }];
    }),
  );
}

/** Who of the visible athletes is not fully available on a day, with the teams they belong to that day. */
export async function listNotFullyAvailable(
  tx: Tx,
  _scope: Scope,
  day: string,
): Promise<NotFullyAvailable[]> {
  const limited = await findLimitedAthletes(tx, day);
  const ids = limited.map(({ athleteId }) => athleteId);
  const states = await stateOfDay(tx, ids, day);
  const teamRows = await findTeamsOn(tx, ids, day);
  return limited.map((athlete) => ({
    ...athlete,
    ...(states.get(athlete.athleteId) ?? { ...fullState(), asOf: null }),
    teams: teamRows
      .filter(({ athleteId }) => athleteId === athlete.athleteId)
      .map(({ id, name }) => ({ id, name })),
  }));
}

/**
 * Opens a reason with its first dated change. A coach may open only a coach's report's "unavailable".
 * @returns the reason's id
 */
export async function openReason(
  tx: Tx,
  input: {
    athleteId: string;
    cause: AvailabilityCause;
    injuryId?: string;
    reportId?: string;
    change: AvailabilityChange;
  },
): Promise<string> {
  const id = randomUUID();
  await insertReason(tx, {
    id,
    athleteId: input.athleteId,
    cause: input.cause,
    injuryId: input.injuryId ?? null,
    reportId: input.reportId ?? null,
  });
  await insertChange(tx, { reasonId: id, athleteId: input.athleteId, seq: 1, ...input.change });
  await audit(tx, {
    action: "availability.change",
    subjectId: id,
    athleteId: input.athleteId,
    fields: { state: input.change.state, from: input.change.fromDay },
  });
  return id;
}

/**
 * Adds a dated change to a reason. It sets aside what was entered before for that day or later; nothing is deleted.
 * Only a clinical role lifts or changes availability.
 * @throws DomainError forbidden, not_found
 */
export async function changeAvailability(
  tx: Tx,
  reasonId: string,
  change: AvailabilityChange,
): Promise<void> {
  if (!tx.scope.actors.includes("job") && !may(tx.scope.roles, "availability.write")) throw forbidden();
  const reason = await findReason(tx, reasonId);
  if (!reason) throw notFound("That reason");
  const seq = await takeNextSeq(tx, reasonId);
  await insertChange(tx, { reasonId, athleteId: reason.athleteId, seq, ...change });
  await audit(tx, {
    action: "availability.change",
    subjectId: reasonId,
    athleteId: reason.athleteId,
    fields: { state: change.state, from: change.fromDay },
  });
}

/** Contributions of each injury in order of their days, for time loss. Clinical scopes only (row-level security). */
export async function contributionsOfInjuries(
  tx: Tx,
  injuryIds: readonly string[],
): Promise<Map<string, (Contribution & { setAt: Date })[]>> {
  const rows = await findInjuryContributions(tx, injuryIds);
  return new Map(
    injuryIds.map((id) => [
      id,
      rows.filter(({ injuryId }) => injuryId === id).map(({ injuryId: _injury, ...part }) => part),
    ]),
  );
}

/**
 * Moves the first contribution of an injury with its onset. Later changes stay on their days; what the old days said is
 * set aside, not deleted. Nothing happens when no contribution begins with the onset.
 */
export async function moveOnset(tx: Tx, injuryId: string, from: string, to: string): Promise<void> {
  const reason = await findReasonOf(tx, { injuryId });
  const parts = (await findInjuryContributions(tx, [injuryId])).filter(
    ({ reasonId }) => reasonId === reason?.id,
  );
  const first = parts.find(({ fromDay }) => fromDay === from);
  if (!reason || !first || from === to) return;
  if (to > from) await changeAvailability(tx, reason.id, fullFrom(from));
  const kept = parts.filter(({ fromDay, toDay }) => fromDay >= from && (toDay === null || toDay >= to));
  for (const { state, restrictions, minutesLimit, expectedOn, ...part } of kept) {
    const fromDay = part.fromDay === from || part.fromDay < to ? to : part.fromDay;
    await changeAvailability(tx, reason.id, { state, restrictions, minutesLimit, expectedOn, fromDay });
  }
}

/**
 * An injury takes over what a coach's report had set: the same changes stand under the injury, and the report's own are
 * set aside from their first day, so that no day counts twice.
 * @returns the injury's reason; null when the report had set nothing
 */
export async function takeOverReport(
  tx: Tx,
  { reportId, injuryId, athleteId }: { reportId: string; injuryId: string; athleteId: string },
): Promise<string | null> {
  const reason = await findReasonOf(tx, { reportId });
  if (!reason) return null;
  const parts = await findReasonContributions(tx, [reason.id]);
  let taken: string | null = null;
  for (const { fromDay, state, restrictions, minutesLimit, expectedOn } of parts) {
    const change = { fromDay, state, restrictions, minutesLimit, expectedOn };
    if (taken) await changeAvailability(tx, taken, change);
    else taken = await openReason(tx, { athleteId, cause: "injury", injuryId, change });
  }
  if (parts[0]) await changeAvailability(tx, reason.id, fullFrom(parts[0].fromDay));
  return taken;
}

/** The reason that an injury or a coach's report owns; undefined while it has none. */
export const reasonOf = findReasonOf;

export const unavailableFrom = (fromDay: string): AvailabilityChange => ({
  state: "unavailable",
  restrictions: [],
  minutesLimit: null,
  fromDay,
  expectedOn: null,
});

export const fullFrom = (fromDay: string): AvailabilityChange => ({
  state: "full",
  restrictions: [],
  minutesLimit: null,
  fromDay,
  expectedOn: null,
});

/**
 * The safe default of an injury that has come to a reason for it: unavailable from the onset where nothing was entered,
 * else from today, whatever was planned before the reason was known. What already keeps the athlete out without an end
 * stays as it is, with the day expected.
 */
export async function makeUnavailable(
  tx: Tx,
  injury: { id: string; athleteId: string; onsetDay: string },
): Promise<void> {
  const { today } = tx.scope;
  const reason = await findReasonOf(tx, { injuryId: injury.id });
  if (!reason) {
    const change = unavailableFrom(injury.onsetDay);
    await openReason(tx, { athleteId: injury.athleteId, cause: "injury", injuryId: injury.id, change });
    return;
  }
  const parts = await findReasonContributions(tx, [reason.id]);
  const ahead = parts.filter(({ toDay }) => toDay === null || toDay >= today);
  const isOut =
    ahead.some((part) => holdsOn(part, today)) && ahead.every(({ state }) => state === "unavailable");
  if (!isOut) await changeAvailability(tx, reason.id, unavailableFrom(today));
}

/** A change cannot be dated before the onset of the injury it belongs to. */
export function requireFrom(change: AvailabilityChange, onsetDay: string) {
  if (change.fromDay < onsetDay)
    throw new DomainError("invalid", "", {
      fields: { fromDay: ["This day lies before the onset. Choose the day of the onset or a later one."] },
    });
}

/** Every change of these reasons in order of entry, those set aside included, with who set it. */
export const listChanges = findChanges;
