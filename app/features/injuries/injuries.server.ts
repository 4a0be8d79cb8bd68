/**
 * What other features ask of injuries. Every function takes the transaction of a clinical scope (row-level security
 * refuses others) and shows what is visible to it; whoever shows the answer to a person audits the read.
 */
import { addDays, instantOf, timeIn } from "~/platform/clock";
import { sealer } from "~/platform/crypto/keys.server";
import type { Tx } from "~db/client.server";
import type { BodyArea, SessionKind, Side, Sign } from "~db/schema/codes";
import { type Caution, cautionsFor, suggestUrgency } from "./cautions";
import { findEncountersOn, findOpenReports } from "./coach-reports.queries.server";
import type { Gap } from "./gaps";
import { findInjuryRow, findInjuryRows, findNotes } from "./injuries.queries.server";
import { type InjuryOverview, openRevision, overviewsOf } from "./overview.server";

/** One injury as a line of a list. */
export type InjuryLine = {
  injuryId: string;
  athleteId: string;
  athlete: string;
  teams: string[];
  bodyArea: BodyArea;
  side: Side;
  onsetDay: string;
  /** What this injury allows today. */
  state: InjuryOverview["today"]["state"];
  /** Days of time loss to today, ongoing while not fully available. */
  timeLoss: InjuryOverview["timeLoss"];
  open: boolean;
  gaps: Gap[];
};

const lineOf = (row: InjuryOverview): InjuryLine => ({
  injuryId: row.id,
  athleteId: row.athleteId,
  athlete: `${row.athlete.givenName} ${row.athlete.familyName}`,
  teams: row.teams,
  bodyArea: row.revision.bodyArea,
  side: row.revision.side,
  onsetDay: row.revision.onsetDay,
  state: row.today.state,
  timeLoss: row.timeLoss,
  open: row.open,
  gaps: row.gaps,
});

/** Injuries that began today or were recorded today, newest first. */
export async function listInjuriesForToday(tx: Tx): Promise<InjuryLine[]> {
  const { today, timeZone } = tx.scope;
  const rows = await findInjuryRows(tx, {
    onsetDay: today,
    recordedSince: instantOf(timeZone, today, "00:00"),
  });
  return (await overviewsOf(tx, rows)).map(lineOf);
}

/** Injuries whose record still lacks something, newest first. */
export async function listGaps(tx: Tx): Promise<InjuryLine[]> {
  const rows = await overviewsOf(tx, await findInjuryRows(tx));
  return rows.filter(({ gaps }) => gaps.length > 0).map(lineOf);
}

export type OpenCoachReport = {
  id: string;
  athleteId: string;
  athlete: string;
  teamName: string | null;
  onsetDay: string;
  onsetTime: string | null;
  bodyArea: BodyArea;
  side: Side;
  signs: Sign[];
  suspectedConcussion: boolean;
  cautions: Caution[];
  urgency: "routine" | "urgent";
  reportedAt: Date;
  reportedBy: string | null;
};

/** Coaches' reports of which nothing has become yet, oldest first. */
export async function listOpenCoachReports(tx: Tx): Promise<OpenCoachReport[]> {
  const rows = await findOpenReports(tx);
  return rows.map((row) => ({
    id: row.id,
    athleteId: row.athleteId,
    athlete: `${row.givenName} ${row.familyName}`,
    teamName: row.teamName,
    onsetDay: row.onsetDay,
    onsetTime: row.onsetTime,
    bodyArea: row.bodyArea,
    side: row.side,
    signs: row.signs,
    suspectedConcussion: row.suspectedConcussion,
    cautions: cautionsFor(row),
    urgency: suggestUrgency(row),
    reportedAt: row.reportedAt,
    reportedBy: row.reportedBy,
  }));
}

export type InjuryForNotice = {
  injuryId: string;
  athleteId: string;
  athlete: { givenName: string; familyName: string; dateOfBirth: string | null };
  bodyArea: BodyArea;
  side: Side;
  onsetDay: string;
  /** Local clock time "HH:MM"; null when not known. */
  onsetTime: string | null;
  session: { id: string; kind: SessionKind; teamName: string; startTime: string | null } | null;
  outsideSport: boolean;
  couldContinue: boolean | null;
  suspectedConcussion: boolean;
  signs: Sign[];
  firstCare: string[];
  referredTo: string[];
  diagnosis: string | null;
  phoned: string | null;
  cautions: Caution[];
  urgency: "routine" | "urgent";
  withdrawn: boolean;
};

/** The facts of an injury in clear, from which a guardian's notice is composed; undefined when absent or not visible. */
export async function findInjuryForNotice(tx: Tx, id: string): Promise<InjuryForNotice | undefined> {
  const row = await findInjuryRow(tx, id);
  if (!row) return undefined;
  const { revision, session } = row;
  const { diagnosis, phoned } = openRevision(await sealer(tx), revision);
  return {
    injuryId: row.id,
    athleteId: row.athleteId,
    athlete: {
      givenName: row.athlete.givenName,
      familyName: row.athlete.familyName,
      dateOfBirth: row.athlete.dateOfBirth,
    },
    bodyArea: revision.bodyArea,
    side: revision.side,
    onsetDay: revision.onsetDay,
    onsetTime: revision.onsetTime?.slice(0, 5) ?? null,
    session: session && {
      id: session.id,
      kind: session.kind,
      teamName: session.teamName,
      startTime: session.startTime?.slice(0, 5) ?? null,
    },
    outsideSport: revision.outsideSport,
    couldContinue: revision.couldContinue,
    suspectedConcussion: revision.suspectedConcussion,
    signs: revision.signs,
    firstCare: revision.firstCare,
    referredTo: revision.referredTo,
    diagnosis,
    phoned,
    cautions: cautionsFor(revision),
    urgency: suggestUrgency(revision),
    withdrawn: revision.withdrawn,
  };
}

/**
 * Injuries whose time loss still runs and that nobody has touched for some days: no revision, note or availability.
 * @param days normally 14 (product.md, Safe default and time loss)
 */
export async function listUntouched(tx: Tx, days = 14): Promise<InjuryLine[]> {
  const { today, timeZone } = tx.scope;
  const since = instantOf(timeZone, addDays(today, -days), timeIn(timeZone));
  const rows = await findInjuryRows(tx);
  const running = (await overviewsOf(tx, rows)).filter(({ timeLoss, open }) => open && timeLoss.ongoing);
  if (running.length === 0) return [];
  const notes = await findNotes(
    tx,
    running.map(({ id }) => id),
  );
  return running
    .filter(
      (row) =>
        row.revision.recordedAt < since &&
        row.contributions.every(({ setAt }) => setAt < since) &&
        notes.every(({ injuryId, writtenAt }) => injuryId !== row.id || writtenAt < since),
    )
    .map(lineOf);
}

/** Encounters of a day with visible athletes, in order of entry. */
export const listEncounters = findEncountersOn;
