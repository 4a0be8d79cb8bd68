import { timeIn } from "~/platform/clock";
import { DomainError } from "~/platform/errors";
import type { Tx } from "~db/client.server";
import { findSessionsOf } from "./injuries.queries.server";

/** When and where an injury happened, as the record keeps it. */
export type Onset = {
  onsetDay: string;
  /** "HH:MM" of the organisation's clock; null when not known. */
  onsetTime: string | null;
  sessionId: string | null;
  outsideSport: boolean;
};

export type WhenInput = { when: string; day: string | null; time: string | null };

type SessionOfDay = Awaited<ReturnType<typeof findSessionsOf>>[number];

const refuse = (field: string, message: string) =>
  new DomainError("invalid", "", { fields: { [field]: [message] } });

const minutesOf = (time: string) => Number(time.slice(0, 2)) * 60 + Number(time.slice(3, 5));
/** Minutes after its planned end in which something is still counted to a session. */
const grace = 30;

/** Whether a clock time falls into a session, its planned minutes (90 when not planned) and a grace. */
export function fallsInto(session: Pick<SessionOfDay, "startTime" | "plannedMinutes">, time: string) {
  if (!session.startTime) return false;
  const start = minutesOf(session.startTime);
  const at = minutesOf(time);
  return at >= start && at <= start + (session.plannedMinutes ?? 90) + grace;
}

/** The session of a day that is meant: the only one, or the only one running at the time. */
function pickSession(sessions: readonly SessionOfDay[], time: string | null) {
  if (sessions.length === 1) return sessions[0];
  const running = time === null ? [] : sessions.filter((session) => fallsInto(session, time));
  return running.length === 1 ? running[0] : undefined;
}

/**
 * Turns the form's answer into the record's day, time and session.
 * @param day the day on which a chosen session is looked for; today unless a coach's report says another
 * @throws DomainError invalid, with the field and the mend
 */
export async function resolveOnset(
  tx: Tx,
  athleteId: string,
  input: WhenInput,
  day = tx.scope.today,
): Promise<Onset> {
  const { today, timeZone } = tx.scope;
  const now = timeIn(timeZone);
  if (input.day !== null && input.day > today)
    throw refuse("day", "This day has not come yet. Enter the day on which it happened.");
  if (input.when === "outside" || input.when === "earlier") {
    const onsetDay = input.day ?? today;
    if (onsetDay === today && input.time !== null && input.time > now)
      throw refuse("time", "This time has not come yet.");
    if (input.when === "outside")
      return { onsetDay, onsetTime: input.time, sessionId: null, outsideSport: true };
    const session = pickSession(await findSessionsOf(tx, athleteId, onsetDay), input.time);
    return { onsetDay, onsetTime: input.time, sessionId: session?.id ?? null, outsideSport: false };
  }
  const sessions = await findSessionsOf(tx, athleteId, day);
  const wanted = input.when.startsWith("session:") ? input.when.slice("session:".length) : null;
  const session = wanted
    ? sessions.find(({ id }) => id === wanted)
    : pickSession(sessions, day === today ? now : input.time);
  if (!session && sessions.length > 1)
    throw refuse(
      "when",
      "Their teams have more than one session that day. Choose Earlier and give the time.",
    );
  if (!session)
    throw refuse("when", "Their team has no session then. Choose Earlier and give the day and the time.");
  const isNow = day === today && fallsInto(session, now);
  return {
    onsetDay: day,
    onsetTime: input.time ?? (isNow ? now : null),
    sessionId: session.id,
    outsideSport: false,
  };
}
