import { and, asc, desc, eq, gte, inArray, isNull, lte, ne, or, type SQL, sql } from "drizzle-orm";
import { ownTeams, visibleAthletes } from "~/features/roster/visibility.server";
import type { Tx } from "~db/client.server";
import {
  athletes,
  earlierInjuries,
  injuries,
  injuryDiagnoses,
  injuryNotes,
  injuryRevisions,
  memberships,
  rosterEntries,
  sessions,
  teams,
} from "~db/schema";
import type {
  BodyArea,
  Contact,
  certainties,
  firstCare,
  Movement,
  Onset,
  pathologies,
  referrals,
  SessionKind,
  Side,
  Sign,
  Surface,
  subsequences,
  tissues,
} from "~db/schema/codes";

const org = (tx: Tx) => tx.scope.organisationId;

type StoredRevision = typeof injuryRevisions.$inferSelect;
type Coded = {
  bodyArea: BodyArea;
  side: Side;
  onset: Onset | null;
  contact: Contact | null;
  movement: Movement | null;
  surface: Surface | null;
  signs: Sign[];
  firstCare: (typeof firstCare)[number][];
  referredTo: (typeof referrals)[number][];
  tissue: (typeof tissues)[number] | null;
  pathology: (typeof pathologies)[number] | null;
  certainty: (typeof certainties)[number] | null;
  subsequence: (typeof subsequences)[number] | null;
};
/** A revision as stored, its codes typed: the checks of the table hold them to the lists of db/schema/codes.ts. */
export type Revision = Omit<StoredRevision, keyof Coded> & Coded;

const typed = (row: StoredRevision) => row as Revision;

/** Injuries of athletes visible today, and those from a session of an own team. */
function visibleInjuries(tx: Tx): SQL {
  const { scope } = tx;
  if (scope.teams === "all") return sql`true`;
  return sql`(${visibleAthletes(scope, injuries.athleteId)} or (${sessions.teamId} is not null and ${ownTeams(scope, sessions.teamId)}))`;
}

function selectCurrent(tx: Tx, ...conditions: (SQL | undefined)[]) {
  return tx
    .select({
      id: injuries.id,
      athleteId: injuries.athleteId,
      createdAt: injuries.createdAt,
      createdBy: injuries.createdBy,
      revision: injuryRevisions,
      athlete: {
        givenName: athletes.givenName,
        familyName: athletes.familyName,
        number: athletes.number,
        dateOfBirth: athletes.dateOfBirth,
        sex: athletes.sex,
        /** Set when the athlete left the organisation. */
        archivedAt: athletes.archivedAt,
      },
      session: {
        id: sessions.id,
        day: sessions.day,
        startTime: sessions.startTime,
        kind: sql<SessionKind>`${sessions.kind}`,
        surface: sql<Surface | null>`${sessions.surface}`,
        teamId: sessions.teamId,
        teamName: teams.name,
      },
    })
    .from(injuries)
    .innerJoin(
      injuryRevisions,
      and(
        eq(injuryRevisions.organisationId, injuries.organisationId),
        eq(injuryRevisions.injuryId, injuries.id),
        eq(injuryRevisions.version, injuries.version),
      ),
    )
    .innerJoin(
      athletes,
      and(eq(athletes.organisationId, injuries.organisationId), eq(athletes.id, injuries.athleteId)),
    )
    .leftJoin(
      sessions,
      and(
        eq(sessions.organisationId, injuryRevisions.organisationId),
        eq(sessions.id, injuryRevisions.sessionId),
      ),
    )
    .leftJoin(teams, and(eq(teams.organisationId, sessions.organisationId), eq(teams.id, sessions.teamId)))
    .where(and(eq(injuries.organisationId, org(tx)), visibleInjuries(tx), ...conditions))
    .orderBy(desc(injuryRevisions.onsetDay), desc(injuries.createdAt));
}

type Selected = Awaited<ReturnType<typeof selectCurrent>>[number];
export type InjuryRow = Omit<Selected, "revision" | "session"> & {
  revision: Revision;
  session: {
    id: string;
    day: string;
    startTime: string | null;
    kind: SessionKind;
    surface: Surface | null;
    teamId: string;
    teamName: string;
  } | null;
};

function shaped(row: Selected): InjuryRow {
  const { session } = row;
  const { id, day, teamId, teamName } = session ?? {};
  return {
    ...row,
    revision: typed(row.revision),
    session:
      session && id && day && teamId ? { ...session, id, day, teamId, teamName: teamName ?? "" } : null,
  };
}

/** Holds an injury for this transaction, so that two writes about one injury follow each other. */
export async function lockInjury(tx: Tx, id: string) {
  await tx
    .select({ id: injuries.id })
    .from(injuries)
    .where(and(eq(injuries.organisationId, org(tx)), eq(injuries.id, id)))
    .for("update");
}

export async function findInjuryRow(tx: Tx, id: string): Promise<InjuryRow | undefined> {
  const [row] = await selectCurrent(tx, eq(injuries.id, id));
  return row && shaped(row);
}

export type InjuryFilter = {
  from?: string;
  to?: string;
  /** Injuries of a session of these teams, or of athletes on their roster on the day of the onset. */
  teamIds?: readonly string[];
  athleteId?: string;
  /** Recorded at this instant or later. */
  recordedSince?: Date;
  onsetDay?: string;
  withdrawn?: boolean;
};

export async function findInjuryRows(tx: Tx, filter: InjuryFilter = {}): Promise<InjuryRow[]> {
  const { from, to, teamIds, athleteId, recordedSince, onsetDay, withdrawn = false } = filter;
  const recent =
    recordedSince || onsetDay
      ? or(
          recordedSince ? gte(injuries.createdAt, recordedSince) : undefined,
          onsetDay ? eq(injuryRevisions.onsetDay, onsetDay) : undefined,
        )
      : undefined;
  const rows = await selectCurrent(
    tx,
    eq(injuryRevisions.withdrawn, withdrawn),
    from ? gte(injuryRevisions.onsetDay, from) : undefined,
    to ? lte(injuryRevisions.onsetDay, to) : undefined,
    athleteId ? eq(injuries.athleteId, athleteId) : undefined,
    recent,
    teamIds ? ofTeams(tx, teamIds) : undefined,
  );
  return rows.map(shaped);
}

function ofTeams(tx: Tx, teamIds: readonly string[]): SQL {
  if (teamIds.length === 0) return sql`false`;
  const onRoster = tx
    .select({ one: sql`1` })
    .from(rosterEntries)
    .where(
      and(
        eq(rosterEntries.organisationId, org(tx)),
        eq(rosterEntries.athleteId, injuries.athleteId),
        inArray(rosterEntries.teamId, [...teamIds]),
        lte(rosterEntries.fromDay, injuryRevisions.onsetDay),
        or(isNull(rosterEntries.toDay), gte(rosterEntries.toDay, injuryRevisions.onsetDay)),
      ),
    );
  return sql`(${inArray(sessions.teamId, [...teamIds])} or exists (${onRoster}))`;
}

/** Team names of an injury without a session: the own teams of the athlete on the day of the onset. */
export async function findTeamsAtOnset(tx: Tx, injuryIds: readonly string[]) {
  if (injuryIds.length === 0) return [];
  return tx
    .select({ injuryId: injuries.id, teamId: teams.id, teamName: teams.name })
    .from(injuries)
    .innerJoin(
      injuryRevisions,
      and(
        eq(injuryRevisions.organisationId, injuries.organisationId),
        eq(injuryRevisions.injuryId, injuries.id),
        eq(injuryRevisions.version, injuries.version),
      ),
    )
    .innerJoin(
      rosterEntries,
      and(
        eq(rosterEntries.organisationId, injuries.organisationId),
        eq(rosterEntries.athleteId, injuries.athleteId),
        lte(rosterEntries.fromDay, injuryRevisions.onsetDay),
        or(isNull(rosterEntries.toDay), gte(rosterEntries.toDay, injuryRevisions.onsetDay)),
      ),
    )
    .innerJoin(
      teams,
      and(eq(teams.organisationId, rosterEntries.organisationId), eq(teams.id, rosterEntries.teamId)),
    )
    .where(and(eq(injuries.organisationId, org(tx)), inArray(injuries.id, [...injuryIds])))
    .orderBy(asc(teams.name));
}

/** Every revision of an injury with who made it, oldest first. */
export async function findRevisions(tx: Tx, injuryId: string) {
  const rows = await tx
    .select({ revision: injuryRevisions, by: memberships.displayName })
    .from(injuryRevisions)
    .leftJoin(
      memberships,
      and(
        eq(memberships.organisationId, injuryRevisions.organisationId),
        eq(memberships.personId, injuryRevisions.recordedBy),
      ),
    )
    .where(and(eq(injuryRevisions.organisationId, org(tx)), eq(injuryRevisions.injuryId, injuryId)))
    .orderBy(asc(injuryRevisions.version));
  return rows.map(({ revision, by }) => ({ revision: typed(revision), by }));
}

export function findDiagnoses(tx: Tx, injuryId: string) {
  return tx
    .select()
    .from(injuryDiagnoses)
    .where(and(eq(injuryDiagnoses.organisationId, org(tx)), eq(injuryDiagnoses.injuryId, injuryId)))
    .orderBy(asc(injuryDiagnoses.version), asc(injuryDiagnoses.position));
}

export function findNotes(tx: Tx, injuryIds: readonly string[]) {
  return tx
    .select({
      id: injuryNotes.id,
      injuryId: injuryNotes.injuryId,
      text: injuryNotes.text,
      writtenAt: injuryNotes.writtenAt,
      by: memberships.displayName,
    })
    .from(injuryNotes)
    .leftJoin(
      memberships,
      and(
        eq(memberships.organisationId, injuryNotes.organisationId),
        eq(memberships.personId, injuryNotes.writtenBy),
      ),
    )
    .where(and(eq(injuryNotes.organisationId, org(tx)), inArray(injuryNotes.injuryId, [...injuryIds])))
    .orderBy(asc(injuryNotes.writtenAt));
}

/** Injuries of these athletes in Haleside, visible or not: whether there was an earlier one is part of the record. */
export async function findInjuriesOf(tx: Tx, athleteIds: readonly string[]) {
  if (athleteIds.length === 0) return [];
  const rows = await tx
    .select({ id: injuries.id, athleteId: injuries.athleteId, revision: injuryRevisions })
    .from(injuries)
    .innerJoin(
      injuryRevisions,
      and(
        eq(injuryRevisions.organisationId, injuries.organisationId),
        eq(injuryRevisions.injuryId, injuries.id),
        eq(injuryRevisions.version, injuries.version),
      ),
    )
    .where(
      and(
        eq(injuries.organisationId, org(tx)),
        inArray(injuries.athleteId, [...athleteIds]),
        eq(injuryRevisions.withdrawn, false),
      ),
    );
  return rows.map((row) => ({ ...row, revision: typed(row.revision) }));
}

/** Injuries from before Haleside. */
export async function findInjuriesBefore(tx: Tx, athleteIds: readonly string[]) {
  if (athleteIds.length === 0) return [];
  return tx
    .select()
    .from(earlierInjuries)
    .where(
      and(eq(earlierInjuries.organisationId, org(tx)), inArray(earlierInjuries.athleteId, [...athleteIds])),
    );
}

export async function findAthlete(tx: Tx, id: string) {
  const [row] = await tx
    .select({
      id: athletes.id,
      givenName: athletes.givenName,
      familyName: athletes.familyName,
      number: athletes.number,
    })
    .from(athletes)
    .where(
      and(eq(athletes.organisationId, org(tx)), eq(athletes.id, id), visibleAthletes(tx.scope, athletes.id)),
    );
  return row;
}

/** Sessions of a day of the teams on whose roster the athlete stands, and those the athlete is entered in. */
export function findSessionsOf(tx: Tx, athleteId: string, day: string) {
  return tx
    .select({
      id: sessions.id,
      teamId: sessions.teamId,
      teamName: teams.name,
      kind: sql<SessionKind>`${sessions.kind}`,
      startTime: sessions.startTime,
      plannedMinutes: sessions.plannedMinutes,
      surface: sql<Surface | null>`${sessions.surface}`,
    })
    .from(sessions)
    .innerJoin(teams, and(eq(teams.organisationId, sessions.organisationId), eq(teams.id, sessions.teamId)))
    .where(
      and(
        eq(sessions.organisationId, org(tx)),
        eq(sessions.day, day),
        ne(sessions.state, "cancelled"),
        sql`(exists (
            select 1 from roster_entries entry
            where entry.organisation_id = ${sessions.organisationId} and entry.team_id = ${sessions.teamId}
              and entry.athlete_id = ${athleteId}::uuid and entry.from_day <= ${day}::date
              and coalesce(entry.to_day, 'infinity'::date) >= ${day}::date
          ) or exists (
            select 1 from participations part
            where part.organisation_id = ${sessions.organisationId} and part.session_id = ${sessions.id}
              and part.athlete_id = ${athleteId}::uuid
          ))`,
      ),
    )
    .orderBy(asc(sessions.startTime), asc(teams.name));
}
