import type { ExposureGrade } from "~db/schema/codes";
import { tookPlace } from "./session-state";

/** Players on the field and regulation minutes of a sport from an age on. */
export type SportRule = { fromAge: number; playersOnField: number; regulationMinutes: number };

export type ExposureSession = {
  state: string;
  kind: string;
  exposureGrade: ExposureGrade | string;
  headcount: number | null;
  headcountMinutes: number | null;
  /** Minutes after which an abandoned session stopped. */
  abandonedAfter: number | null;
};

export type ExposureParts = {
  participations: readonly { athleteId: string; presence: string; minutes: number }[];
  /** The team's roster of the session's day. */
  roster: readonly string[];
  /** Those of the roster who were unavailable on that day. */
  unavailable: ReadonlySet<string>;
  /** The rule of the team's sport and age; null when the organisation has none. */
  rule: SportRule | null;
};

export type Amount = { aes: number; hours: number };

export type Exposure = Amount & {
  grade: ExposureGrade;
  /** What each athlete is known or reckoned to have had. */
  athletes: ({ athleteId: string } & Amount)[];
  /** What belongs to no athlete: a headcount's excess over the roster, and all of an estimate. */
  unknown: Amount;
};

const nothing = (grade: ExposureGrade): Exposure => ({
  grade,
  aes: 0,
  hours: 0,
  athletes: [],
  unknown: { aes: 0, hours: 0 },
});

/**
 * The rule that counts for a team: the one from the highest age that its athletes, all under `underAge`, can have.
 * An under-16 team plays by the rule from 14, not by that from 16. A senior team (null) takes the highest.
 */
export function ruleFor(rules: readonly SportRule[], underAge: number | null): SportRule | null {
  const fitting = rules.filter(({ fromAge }) => underAge === null || fromAge < underAge);
  return fitting.reduce<SportRule | null>(
    (best, rule) => (best && best.fromAge >= rule.fromAge ? best : rule),
    null,
  );
}

/** One participation's exposure. Only "took part" with minutes above zero is an athlete-exposure. */
export const exposureOfParticipation = (part: { presence: string; minutes: number }): Amount =>
  part.presence === "took_part" && part.minutes > 0
    ? { aes: 1, hours: part.minutes / 60 }
    : { aes: 0, hours: 0 };

function recorded(parts: ExposureParts): Exposure {
  const athletes = parts.participations
    .map((part) => ({ athleteId: part.athleteId, ...exposureOfParticipation(part) }))
    .filter(({ aes }) => aes > 0);
  return {
    grade: "recorded",
    aes: athletes.length,
    hours: athletes.reduce((sum, { hours }) => sum + hours, 0),
    athletes,
    unknown: { aes: 0, hours: 0 },
  };
}

/**
 * A number of athletes and the minutes, spread equally over that day's roster less the unavailable. Each athlete
 * carries at most one athlete-exposure; what exceeds the roster is of unknown athletes. The total is always
 * the headcount.
 */
function headcount(count: number, minutes: number, parts: ExposureParts): Exposure {
  if (count <= 0 || minutes <= 0) return nothing("headcount");
  const available = parts.roster.filter((athleteId) => !parts.unavailable.has(athleteId));
  const placed = Math.min(count, available.length);
  const share = available.length === 0 ? 0 : placed / available.length;
  const excess = count - placed;
  const hoursEach = minutes / 60;
  return {
    grade: "headcount",
    aes: count,
    hours: count * hoursEach,
    athletes: available.map((athleteId) => ({ athleteId, aes: share, hours: share * hoursEach })),
    unknown: { aes: excess, hours: excess * hoursEach },
  };
}

/**
 * A match with neither attendance nor headcount: players on the field x regulation minutes (football of adults:
 * 11 x 90 min = 16.5 h a team; common practice). It gives hours, never athlete-exposures. An abandoned match counts
 * the minutes until it stopped.
 */
function estimated(session: ExposureSession, rule: SportRule): Exposure {
  const minutes =
    session.state === "abandoned" && session.abandonedAfter !== null
      ? Math.min(session.abandonedAfter, rule.regulationMinutes)
      : rule.regulationMinutes;
  const hours = (rule.playersOnField * minutes) / 60;
  return { grade: "estimated", aes: 0, hours, athletes: [], unknown: { aes: 0, hours } };
}

/**
 * The exposure of one session in athlete-exposures (AEs) and hours, by its one grade. A session that is planned
 * or cancelled has none; nor has one of grade "none", or an estimate without a rule for its sport.
 */
export function exposureOfSession(session: ExposureSession, parts: ExposureParts): Exposure {
  if (!tookPlace(session.state)) return nothing("none");
  switch (session.exposureGrade) {
    case "recorded":
      return recorded(parts);
    case "headcount":
      return headcount(session.headcount ?? 0, session.headcountMinutes ?? 0, parts);
    case "estimated":
      return session.kind === "match" && parts.rule ? estimated(session, parts.rule) : nothing("none");
    default:
      return nothing("none");
  }
}
