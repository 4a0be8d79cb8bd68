import { and, asc, desc, eq, inArray, lte, sql } from "drizzle-orm";
import { ownTeams } from "~/features/roster/visibility.server";
import type { Tx } from "~db/client.server";
import {
  exercises,
  memberships,
  programmeAssignments,
  programmes,
  sessions,
  warmUpAthletes,
  warmUps,
} from "~db/schema";
import type { SkipReason, WarmUpBlock } from "~db/schema/codes";

const org = (tx: Tx) => tx.scope.organisationId;

export async function findWarmUp(tx: Tx, sessionId: string) {
  const [row] = await tx
    .select({
      outcome: warmUps.outcome,
      blocks: sql<WarmUpBlock[]>`${warmUps.blocks}`,
      skipReason: sql<SkipReason | null>`${warmUps.skipReason}`,
      skipNote: warmUps.skipNote,
      minutes: warmUps.minutes,
      ledBy: warmUps.ledBy,
      programmeId: warmUps.programmeId,
      programmeVersion: warmUps.programmeVersion,
      recordedAt: warmUps.recordedAt,
      recordedBy: memberships.displayName,
    })
    .from(warmUps)
    .leftJoin(
      memberships,
      and(
        eq(memberships.organisationId, warmUps.organisationId),
        eq(memberships.personId, warmUps.recordedBy),
      ),
    )
    .where(and(eq(warmUps.organisationId, org(tx)), eq(warmUps.sessionId, sessionId)));
  return row;
}

export async function findWarmedUp(tx: Tx, sessionId: string) {
  const rows = await tx
    .select({ athleteId: warmUpAthletes.athleteId })
    .from(warmUpAthletes)
    .where(and(eq(warmUpAthletes.organisationId, org(tx)), eq(warmUpAthletes.sessionId, sessionId)));
  return rows.map(({ athleteId }) => athleteId);
}

export type WarmUpRow = Pick<
  typeof warmUps.$inferInsert,
  | "sessionId"
  | "outcome"
  | "blocks"
  | "skipReason"
  | "skipNote"
  | "minutes"
  | "ledBy"
  | "programmeId"
  | "programmeVersion"
>;

/** Writes the record. The programme's version is that of the first writing: the record keeps what was done. */
export async function upsertWarmUp(tx: Tx, row: WarmUpRow) {
  const { sessionId: _session, programmeId: _programme, programmeVersion: _version, ...changed } = row;
  const entered = { recordedBy: tx.scope.personId, recordedAt: new Date() };
  await tx
    .insert(warmUps)
    .values({ organisationId: org(tx), ...row, ...entered })
    .onConflictDoUpdate({
      target: [warmUps.organisationId, warmUps.sessionId],
      set: { ...changed, ...entered, version: sql`${warmUps.version} + 1` },
    });
}

export async function replaceWarmedUp(
  tx: Tx,
  sessionId: string,
  { add, remove }: { add: readonly string[]; remove: readonly string[] },
) {
  if (remove.length > 0)
    await tx
      .delete(warmUpAthletes)
      .where(
        and(
          eq(warmUpAthletes.organisationId, org(tx)),
          eq(warmUpAthletes.sessionId, sessionId),
          inArray(warmUpAthletes.athleteId, [...remove]),
        ),
      );
  if (add.length > 0)
    await tx
      .insert(warmUpAthletes)
      .values(add.map((athleteId) => ({ organisationId: org(tx), sessionId, athleteId })))
      .onConflictDoNothing();
}

/** Nothing is recorded any more. */
export async function deleteWarmUp(tx: Tx, sessionId: string) {
  await tx
    .delete(warmUpAthletes)
    .where(and(eq(warmUpAthletes.organisationId, org(tx)), eq(warmUpAthletes.sessionId, sessionId)));
  await tx.delete(warmUps).where(and(eq(warmUps.organisationId, org(tx)), eq(warmUps.sessionId, sessionId)));
}

/** The programme and targets a team follows on a day. */
export async function findAssignment(tx: Tx, teamId: string, day: string) {
  const [row] = await tx
    .select()
    .from(programmeAssignments)
    .where(
      and(
        eq(programmeAssignments.organisationId, org(tx)),
        eq(programmeAssignments.teamId, teamId),
        lte(programmeAssignments.startsOn, day),
      ),
    )
    .orderBy(desc(programmeAssignments.startsOn))
    .limit(1);
  return row;
}

/** All assignments of some teams, oldest first. */
export async function findAssignments(tx: Tx, teamIds: readonly string[]) {
  if (teamIds.length === 0) return [];
  return tx
    .select()
    .from(programmeAssignments)
    .where(
      and(
        eq(programmeAssignments.organisationId, org(tx)),
        inArray(programmeAssignments.teamId, [...teamIds]),
        ownTeams(tx.scope, programmeAssignments.teamId),
      ),
    )
    .orderBy(asc(programmeAssignments.startsOn));
}

/** One version of a programme with its exercises in order. */
export async function findProgramme(tx: Tx, id: string, version: number) {
  const [programme] = await tx
    .select({ id: programmes.id, name: programmes.name })
    .from(programmes)
    .where(and(eq(programmes.organisationId, org(tx)), eq(programmes.id, id)));
  if (!programme) return undefined;
  const rows = await tx
    .select({
      position: exercises.position,
      block: sql<WarmUpBlock>`${exercises.block}`,
      name: exercises.name,
      dose: exercises.dose,
      cue: exercises.cue,
      progressions: exercises.progressions,
    })
    .from(exercises)
    .where(
      and(
        eq(exercises.organisationId, org(tx)),
        eq(exercises.programmeId, id),
        eq(exercises.programmeVersion, version),
      ),
    )
    .orderBy(asc(exercises.position));
  return { ...programme, version, exercises: rows };
}

/**
 * Sessions that were held, with their warm-up and their participations. Held: confirmed as held or abandoned, or
 * planned for a day that has come and with a warm-up record. Whether it was done or skipped, somebody was there to say so;
 * to count the done ones alone would raise the share of a team that confirms nothing.
 */
export async function findHeldSessions(
  tx: Tx,
  { from, to, teamIds }: { from: string; to: string; teamIds: readonly string[] },
) {
  if (teamIds.length === 0) return [];
  const until = to < tx.scope.today ? to : tx.scope.today;
  return tx
    .select({
      sessionId: sessions.id,
      teamId: sessions.teamId,
      day: sessions.day,
      startTime: sql<string | null>`to_char(${sessions.startTime}, 'HH24:MI')`,
      kind: sessions.kind,
      outcome: sql<"full" | "part" | "skipped" | null>`${warmUps.outcome}`,
      blocks: sql<WarmUpBlock[] | null>`${warmUps.blocks}`,
      skipReason: sql<SkipReason | null>`${warmUps.skipReason}`,
      participations: sql<number>`(select count(*)::int from participations part
        where part.organisation_id = ${sessions.organisationId} and part.session_id = ${sessions.id}
          and part.presence = 'took_part' and part.minutes > 0)`,
      warmedUp: sql<number>`(select count(*)::int from participations part
        join warm_up_athletes warmed on warmed.organisation_id = part.organisation_id
          and warmed.session_id = part.session_id and warmed.athlete_id = part.athlete_id
        where part.organisation_id = ${sessions.organisationId} and part.session_id = ${sessions.id}
          and part.presence = 'took_part' and part.minutes > 0)`,
    })
    .from(sessions)
    .leftJoin(
      warmUps,
      and(eq(warmUps.organisationId, sessions.organisationId), eq(warmUps.sessionId, sessions.id)),
    )
    .where(
      and(
        eq(sessions.organisationId, org(tx)),
        ownTeams(tx.scope, sessions.teamId),
        inArray(sessions.teamId, [...teamIds]),
        sql`${sessions.day} between ${from}::date and ${until}::date`,
        sql`(${sessions.state} in ('held', 'abandoned')
          or ${sessions.state} = 'planned' and ${warmUps.outcome} is not null)`,
      ),
    )
    .orderBy(asc(sessions.day), asc(sessions.startTime));
}
