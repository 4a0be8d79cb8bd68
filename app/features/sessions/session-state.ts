import type { ExposureGrade, SessionKind, SessionState } from "~db/schema/codes";

/** What a person reads: the stored state, or "unconfirmed" for a planned session whose time has passed. */
export type SessionStatus = SessionState | "unconfirmed";

export const sessionStatusWords: Record<SessionStatus, string> = {
  planned: "planned",
  unconfirmed: "unconfirmed",
  held: "held",
  abandoned: "abandoned",
  cancelled: "cancelled",
};

/** Where the clock of the organisation stands: its calendar date, and "HH:MM". */
export type LocalNow = { day: string; time: string };

type Timed = { day: string; startTime: string | null; plannedMinutes: number | null };

/** Minutes a session is taken to last when nobody said; only decides from when it reads "unconfirmed". */
const assumedMinutes = 90;

const minutesOf = (time: string) => Number(time.slice(0, 2)) * 60 + Number(time.slice(3, 5));

/** Whether the session's start has come. One without a start time begins with its day. */
export function hasBegun({ day, startTime }: Timed, now: LocalNow): boolean {
  if (day !== now.day) return day < now.day;
  return startTime === null || minutesOf(startTime) <= minutesOf(now.time);
}

/** Whether the session's time has passed. One without a start time passes with its day. */
export function hasPassed({ day, startTime, plannedMinutes }: Timed, now: LocalNow): boolean {
  if (day !== now.day) return day < now.day;
  if (startTime === null) return false;
  return minutesOf(startTime) + (plannedMinutes ?? assumedMinutes) <= minutesOf(now.time);
}

/** The state a person reads. */
export function statusOf(session: Timed & { state: string }, now: LocalNow): SessionStatus {
  if (session.state === "planned" && hasPassed(session, now)) return "unconfirmed";
  return session.state as SessionState;
}

/** A session that took place, at least for a while: the states whose exposure counts. */
export const tookPlace = (state: string) => state === "held" || state === "abandoned";

/**
 * The one grade of a session: the best that is known. A match that took place with neither attendance nor a
 * headcount is estimated; anything else without entries has no exposure.
 */
export function gradeOf(session: {
  kind: SessionKind | string;
  state: SessionState | string;
  /** Participations entered, whatever their presence. */
  participations: number;
  headcount: number | null;
}): ExposureGrade {
  if (session.participations > 0) return "recorded";
  if (session.headcount !== null) return "headcount";
  if (session.kind === "match" && tookPlace(session.state)) return "estimated";
  return "none";
}

/** Full time of a session in minutes: what was played of an abandoned one, else actual, else planned. */
export function fullTimeOf(session: {
  state: string;
  plannedMinutes: number | null;
  actualMinutes: number | null;
  abandonedAfter: number | null;
}): number | null {
  if (session.state === "abandoned" && session.abandonedAfter !== null) return session.abandonedAfter;
  return session.actualMinutes ?? session.plannedMinutes;
}
