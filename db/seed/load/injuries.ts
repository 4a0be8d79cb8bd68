import { diagnosisPlace } from "~/features/injuries/diagnoses.server";
import { revisionPlace } from "~/features/injuries/overview.server";
import { type EarlierInjury, suggestSubsequence } from "~/features/injuries/subsequence";
import { injuries, injuryDiagnoses, injuryNotes, injuryRevisions } from "~db/schema";
import type { firstCare, referrals } from "~db/schema/codes";
import { momentAfter } from "../scenario/days";
import type { Injury } from "../scenario/types";
import { byKey, find, groupBy, insertRows, type Loading } from "./loading";

/** Minutes after the onset at which the athletic trainer wrote the record. */
const writtenAfter = 30;

export const writtenAt = ({ at }: Injury) => momentAfter(at.slice(0, 10), at.slice(11), writtenAfter);

/** How each injury relates to the athlete's earlier ones, as the feature suggests and the athletic trainer confirmed. */
export function relationsOf({ own, id }: Loading) {
  const athletes = byKey(own.athletes);
  const lostTime = new Set(own.availability.map(({ injury }) => injury));
  const kindOf = ({ area, side, diagnoses }: Injury) => ({
    bodyArea: area,
    side,
    pathology: diagnoses[0]?.pathology ?? null,
    // Decides a warning about the other knee, never the relation.
    acl: false,
  });
  const relations = new Map<string, { subsequence: string | null; to: string | null }>();
  for (const [athlete, list] of groupBy(own.injuries, (injury) => injury.athlete)) {
    const before = find(athletes, athlete).earlierInjuries.map(
      ({ area, side, pathology, year }): EarlierInjury => ({
        id: null,
        bodyArea: area,
        side,
        pathology,
        acl: false,
        onsetDay: null,
        returnDay: null,
        year,
      }),
    );
    const inHaleside = list.map((injury) => ({
      ...kindOf(injury),
      id: id("injury", injury.key),
      onsetDay: injury.at.slice(0, 10),
      returnDay: lostTime.has(injury.key) ? injury.fullOn : injury.closedOn,
      year: null,
    }));
    for (const injury of list) {
      const onsetDay = injury.at.slice(0, 10);
      const earlier = [...before, ...inHaleside.filter((other) => other.onsetDay < onsetDay)];
      relations.set(injury.key, suggestSubsequence({ ...kindOf(injury), onsetDay }, earlier));
    }
  }
  return relations;
}

type Version = { at: string; surgeryOn: string | null; closedOn: string | null };

/** A record is written after the onset and revised when the athlete is operated on and when it closes. */
export function versionsOf(injury: Injury): Version[] {
  const { surgeryOn, closedOn } = injury;
  const versions: Version[] = [{ at: writtenAt(injury), surgeryOn: null, closedOn: null }];
  if (surgeryOn) versions.push({ at: `${surgeryOn}T17:00`, surgeryOn, closedOn: null });
  if (closedOn) versions.push({ at: `${closedOn}T17:30`, surgeryOn, closedOn });
  return versions;
}

function firstCareOf({ couldContinue, suspectedConcussion, signs }: Injury): (typeof firstCare)[number][] {
  if (couldContinue) return [];
  return !suspectedConcussion && signs.includes("swelling")
    ? ["stopped_play", "ice", "compression"]
    : ["stopped_play"];
}

const emergencySigns: readonly string[] = ["deformity", "cold_pale_foot", "open_wound"];

function referredTo(injury: Injury, version: Version): (typeof referrals)[number][] {
  if (version.surgeryOn) return ["orthopaedics"];
  if (injury.signs.some((sign) => emergencySigns.includes(sign))) return ["emergency_department"];
  const isImaged = injury.diagnoses.some(({ certainty }) => certainty === "imaging");
  return injury.suspectedConcussion || isImaged ? ["physician"] : [];
}

/** Injuries with every revision of their records and the follow-up notes. */
export async function loadInjuries(loading: Loading) {
  const { tx, own, organisationId, id, person, at, on, seals } = loading;
  const relations = relationsOf(loading);
  const calls = new Map(
    own.notices.flatMap(({ injury, call }) => (call ? [[injury, call.words] as const] : [])),
  );
  await insertRows(
    tx,
    injuries,
    own.injuries.map((injury) => ({
      organisationId,
      id: id("injury", injury.key),
      athleteId: id("athlete", injury.athlete),
      createdBy: person(injury.loggedBy),
      createdAt: at(writtenAt(injury)),
      version: versionsOf(injury).length,
    })),
  );
  const revisions = own.injuries.flatMap((injury) =>
    versionsOf(injury).map((known, index) => ({ injury, known, version: index + 1 })),
  );
  await insertRows(
    tx,
    injuryRevisions,
    revisions.map(({ injury, known, version }) => {
      const injuryId = id("injury", injury.key);
      const [principal] = injury.diagnoses;
      const relation = relations.get(injury.key);
      return {
        organisationId,
        injuryId,
        version,
        recordedBy: person(injury.loggedBy),
        recordedAt: at(known.at),
        onsetDay: injury.at.slice(0, 10),
        onsetTime: injury.at.slice(11),
        sessionId: injury.session && id("session", injury.session),
        outsideSport: injury.outsideOrganisedSport,
        bodyArea: injury.area,
        side: injury.side,
        suspectedConcussion: injury.suspectedConcussion,
        couldContinue: injury.couldContinue,
        onset: injury.onset,
        contact: injury.contact,
        movement: injury.movement,
        minuteOfPlay: injury.minuteOfPlay,
        surface: injury.surface,
        warmedUp: injury.warmedUp === "unknown" ? null : injury.warmedUp === "yes",
        signs: injury.signs,
        firstCare: firstCareOf(injury),
        referredTo: referredTo(injury, known),
        phoned: seals.seal(revisionPlace("phoned", injuryId, version), calls.get(injury.key)),
        tissue: principal?.tissue ?? null,
        pathology: principal?.pathology ?? null,
        diagnosis: seals.seal(revisionPlace("diagnosis", injuryId, version), principal?.words),
        certainty: principal?.certainty ?? null,
        surgery: known.surgeryOn ? true : known.closedOn ? false : null,
        surgeryDay: known.surgeryOn,
        subsequence: relation?.subsequence ?? null,
        subsequentTo: relation?.to ?? null,
        closedOn: known.closedOn,
      };
    }),
  );
  await insertRows(
    tx,
    injuryDiagnoses,
    revisions.flatMap(({ injury, version }) =>
      injury.diagnoses.slice(1).map(({ tissue, pathology, words, certainty }, index) => {
        const injuryId = id("injury", injury.key);
        return {
          organisationId,
          injuryId,
          version,
          position: index + 1,
          tissue,
          pathology,
          diagnosis: seals.seal(diagnosisPlace(injuryId, version, index + 1), words),
          certainty,
        };
      }),
    ),
  );
  await insertRows(
    tx,
    injuryNotes,
    own.injuries.flatMap((injury) =>
      injury.followUps.map(({ on: day, by, note }, index) => {
        const row = id("injury note", `${injury.key} ${index}`);
        return {
          organisationId,
          id: row,
          injuryId: id("injury", injury.key),
          text: seals.sealRequired({ table: "injury_notes", column: "text", row, version: 1 }, note),
          writtenBy: person(by),
          writtenAt: on(day, "16:30"),
        };
      }),
    ),
  );
}
