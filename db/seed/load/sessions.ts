import { noInjuryWeeks, participations, sessions } from "~db/schema";
import { addDays, momentAfter } from "../scenario/days";
import { staffOf } from "../scenario/organisations";
import type { Session } from "../scenario/types";
import { byKey, find, insertRows, type Loading } from "./loading";

/** When a session of the scenario was over, its local moment. */
export const endOf = ({ day, start, plannedMinutes, actualMinutes }: Session) =>
  momentAfter(day, start, actualMinutes ?? plannedMinutes);

/** Sessions are entered by season's plan, a fortnight before their day. */
const plannedAhead = 14;

const isOutdoor = ({ surface }: Session) => surface === "natural_grass" || surface === "artificial_turf";

function cancelReasonOf(session: Session) {
  if (session.status !== "cancelled") return null;
  const month = session.day.slice(5, 7);
  const isWinter = month === "12" || month === "01" || month === "02";
  return isOutdoor(session) && isWinter ? "The ground was not fit to play on" : "Too few players";
}

/** Sessions, who took part in them, and the weeks in which nobody was newly hurt. */
export async function loadSessions({ tx, own, organisationId, id, person, at, on }: Loading) {
  const coachOf = (team: string) => person(staffOf(own.memberships, own.organisation.key, team).coach);
  await insertRows(
    tx,
    sessions,
    own.sessions.map((session) => ({
      organisationId,
      id: id("session", session.key),
      teamId: id("team", session.team),
      day: session.day,
      startTime: session.start,
      kind: session.kind,
      state: session.status,
      plannedMinutes: session.plannedMinutes,
      actualMinutes: session.status === "abandoned" ? null : session.actualMinutes,
      abandonedAfter: session.status === "abandoned" ? session.actualMinutes : null,
      cancelReason: cancelReasonOf(session),
      surface: session.surface,
      venueId: session.venue && id("venue", session.venue),
      exposureGrade: session.grade,
      headcount: session.headcount,
      headcountMinutes: session.headcount === null ? null : session.actualMinutes,
      createdBy: coachOf(session.team),
      createdAt: on(addDays(session.day, -plannedAhead), "18:00"),
      updatedAt:
        session.status === "planned" ? on(addDays(session.day, -plannedAhead), "18:00") : at(endOf(session)),
    })),
  );
  const sessionsByKey = byKey(own.sessions);
  await insertRows(
    tx,
    participations,
    own.participations.map(({ session: key, athlete, presence, minutes }) => {
      const session = find(sessionsByKey, key);
      return {
        organisationId,
        sessionId: id("session", key),
        athleteId: id("athlete", athlete),
        presence,
        minutes,
        recordedBy: coachOf(session.team),
        recordedAt: at(endOf(session)),
      };
    }),
  );
  await insertRows(
    tx,
    noInjuryWeeks,
    own.confirmedWeeks.map(({ team, monday, by }) => ({
      organisationId,
      teamId: id("team", team),
      weekStart: monday,
      confirmedBy: person(by),
      confirmedAt: on(addDays(monday, 7), "09:00"),
    })),
  );
}
