import { exercises, programmeAssignments, programmes, warmUpAthletes, warmUps } from "~db/schema";
import { staffOf } from "../scenario/organisations";
import { PROGRAMME } from "../scenario/programme";
import { byKey, find, groupBy, insertRows, type Loading } from "./loading";
import { endOf } from "./sessions";

const programmeVersion = 1;

/** The warm-up programme, which teams follow it from when, and what was recorded of each session's warm-up. */
export async function loadWarmUps(loading: Loading) {
  const { tx, own, organisationId, id, on } = loading;
  const programmeId = id("programme", PROGRAMME.key);
  const firstDay = own.teams.map(({ programmeFrom }) => programmeFrom).sort()[0] ?? own.today;
  await insertRows(tx, programmes, [
    { organisationId, id: programmeId, name: PROGRAMME.name, createdAt: on(firstDay, "09:00") },
  ]);
  await insertRows(
    tx,
    exercises,
    PROGRAMME.blocks
      .flatMap(({ block, exercises: list }) => list.map((exercise) => ({ ...exercise, block })))
      .map(({ block, name, dose, cue, progressions }, index) => ({
        organisationId,
        programmeId,
        programmeVersion,
        position: index + 1,
        block,
        name,
        dose,
        cue,
        progressions,
      })),
  );
  await insertRows(
    tx,
    programmeAssignments,
    own.teams.map(({ key, programmeFrom, weeklyTarget }) => ({
      organisationId,
      teamId: id("team", key),
      startsOn: programmeFrom,
      programmeId,
      programmeVersion,
      targetPerWeek: weeklyTarget,
      targetMinutes: PROGRAMME.targetMinutes,
    })),
  );
  await loadRecords(loading, programmeId);
}

async function loadRecords({ tx, own, organisationId, id, person, at }: Loading, programmeId: string) {
  const sessionsByKey = byKey(own.sessions);
  const peopleByKey = byKey(own.people);
  const nameOf = (key: string) => {
    const { givenName, familyName } = find(peopleByKey, key);
    return `${givenName} ${familyName}`;
  };
  await insertRows(
    tx,
    warmUps,
    own.warmUps.map((record) => {
      const session = find(sessionsByKey, record.session);
      const skipped = record.outcome === "skipped";
      return {
        organisationId,
        sessionId: id("session", record.session),
        outcome: record.outcome,
        blocks: record.blocks,
        skipReason: record.skipReason,
        minutes: skipped ? null : record.minutes,
        ledBy: record.ledBy && nameOf(record.ledBy),
        programmeId,
        programmeVersion,
        recordedBy: person(staffOf(own.memberships, own.organisation.key, session.team).coach),
        recordedAt: at(endOf(session)),
      };
    }),
  );
  const tookPart = groupBy(
    own.participations.filter(({ presence }) => presence === "took_part"),
    ({ session }) => session,
  );
  await insertRows(
    tx,
    warmUpAthletes,
    own.warmUps
      .filter(({ outcome }) => outcome !== "skipped")
      .flatMap(({ session, notWarmedUp }) =>
        (tookPart.get(session) ?? [])
          .filter(({ athlete }) => !notWarmedUp.includes(athlete))
          .map(({ athlete }) => ({
            organisationId,
            sessionId: id("session", session),
            athleteId: id("athlete", athlete),
          })),
      ),
  );
}
