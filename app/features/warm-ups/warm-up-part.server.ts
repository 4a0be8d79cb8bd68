import type { Tx } from "~db/client.server";
import { findWarmedUp, findWarmUp } from "./warm-ups.queries.server";

/** Minutes that a warm-up is taken to last when nobody said. */
const usualMinutes = 15;

const minutesOf = (time: string) => Number(time.slice(0, 2)) * 60 + Number(time.slice(3, 5));

type Moment = { athleteId: string; onsetTime: string | null };
type Session = { id: string; startTime: string | null };

/**
 * What the session's record proposes for one athlete at the moment of an onset; a clinician confirms it. Hurt before the
 * warm-up can have been over: not warmed up.
 * @returns null when the warm-up of the session is not recorded
 */
export async function proposeWarmedUp(tx: Tx, session: Session, { athleteId, onsetTime }: Moment) {
  const record = await findWarmUp(tx, session.id);
  if (!record) return null;
  if (record.outcome === "skipped") return false;
  if (onsetTime && session.startTime) {
    const over = minutesOf(session.startTime) + (record.minutes ?? usualMinutes);
    if (minutesOf(onsetTime) < over) return false;
  }
  return (await findWarmedUp(tx, session.id)).includes(athleteId);
}
