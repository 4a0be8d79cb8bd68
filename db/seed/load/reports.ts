import { reportPlace } from "~/features/injuries/coach-reports.queries.server";
import { bodyAreaWords } from "~/features/vocabulary";
import { coachReportOutcomes, coachReports, encounters } from "~db/schema";
import { addDays } from "../scenario/days";
import { byKey, find, insertRows, type Loading } from "./loading";

/** What coaches sent from the touchline and what became of it; who was seen without a new injury. */
export async function loadReports({ tx, own, organisationId, id, person, at, on, seals }: Loading) {
  const injuries = byKey(own.injuries);
  const guardians = byKey(own.guardians);
  await insertRows(
    tx,
    coachReports,
    own.coachReports.map((report) => {
      const row = id("coach report", report.key);
      const injury = report.injury === null ? undefined : find(injuries, report.injury);
      const guardian = report.phoned === null ? undefined : find(guardians, report.phoned);
      return {
        organisationId,
        id: row,
        athleteId: id("athlete", report.athlete),
        sessionId: id("session", report.session),
        onsetDay: report.at.slice(0, 10),
        onsetTime: (injury?.at ?? report.at).slice(11),
        bodyArea: report.area,
        side: injury?.side ?? "unknown",
        suspectedConcussion: injury?.suspectedConcussion ?? false,
        // A report that still waits changed nobody's availability, so play went on.
        couldContinue: injury?.couldContinue ?? true,
        signs: report.signs,
        phoned: seals.seal(
          reportPlace("phoned", row),
          guardian && `${guardian.givenName} ${guardian.familyName}`,
        ),
        reportedBy: person(report.by),
        reportedAt: at(report.at),
      };
    }),
  );
  await insertRows(
    tx,
    coachReportOutcomes,
    own.coachReports.flatMap((report) => {
      if (report.injury === null) return [];
      return [
        {
          organisationId,
          reportId: id("coach report", report.key),
          injuryId: id("injury", report.injury),
          decidedBy: person(find(injuries, report.injury).loggedBy),
          decidedAt: on(addDays(report.at.slice(0, 10), 1), "08:30"),
        },
      ];
    }),
  );
  await insertRows(
    tx,
    encounters,
    own.encounters.map(({ athlete, by, at: moment, kind, area }) => {
      const row = id("encounter", `${athlete} ${moment} ${kind}`);
      const place = { table: "encounters", column: "note", row, version: 1 };
      return {
        organisationId,
        id: row,
        athleteId: id("athlete", athlete),
        day: moment.slice(0, 10),
        kind,
        note: seals.seal(place, `${bodyAreaWords[area]}.`),
        recordedBy: person(by),
        recordedAt: at(moment),
      };
    }),
  );
}
