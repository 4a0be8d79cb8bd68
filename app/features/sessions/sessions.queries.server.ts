import { and, asc, count, desc, eq, gte, inArray, isNull, lte, ne, type SQL, sql } from "drizzle-orm";
import { ownTeams } from "~/features/roster/visibility.server";
import type { Tx } from "~db/client.server";
import { participations, sessions, sportRules, teams, venues, warmUps } from "~db/schema";
import type { ExposureGrade, SessionKind, SessionState, Surface } from "~db/schema/codes";

const org = (tx: Tx) => tx.scope.organisationId;

const partsOf = (condition: SQL) => sql<number>`(select count(*)::int from participations part
  where part.organisation_id = ${sessions.organisationId} and part.session_id = ${sessions.id} and ${condition})`;

const columns = {
  id: sessions.id,
  teamId: sessions.teamId,
  teamName: teams.name,
  sport: teams.sport,
  underAge: teams.underAge,
  day: sessions.day,
  startTime: sql<string | null>`to_char(${sessions.startTime}, 'HH24:MI')`,
  kind: sql<SessionKind>`${sessions.kind}`,
  state: sql<SessionState>`${sessions.state}`,
  plannedMinutes: sessions.plannedMinutes,
  actualMinutes: sessions.actualMinutes,
  abandonedAfter: sessions.abandonedAfter,
  cancelReason: sessions.cancelReason,
  surface: sql<Surface | null>`${sessions.surface}`,
  venueId: sessions.venueId,
  venueName: venues.name,
  exposureGrade: sql<ExposureGrade>`${sessions.exposureGrade}`,
  headcount: sessions.headcount,
  headcountMinutes: sessions.headcountMinutes,
  version: sessions.version,
  participations: partsOf(sql`true`),
  tookPart: partsOf(sql`part.presence = 'took_part' and part.minutes > 0`),
  warmUpOutcome: warmUps.outcome,
  warmUpBlocks: warmUps.blocks,
};

function selectSessions(tx: Tx) {
  return tx
    .select(columns)
    .from(sessions)
    .innerJoin(teams, and(eq(teams.organisationId, sessions.organisationId), eq(teams.id, sessions.teamId)))
    .leftJoin(
      venues,
      and(eq(venues.organisationId, sessions.organisationId), eq(venues.id, sessions.venueId)),
    )
    .leftJoin(
      warmUps,
      and(eq(warmUps.organisationId, sessions.organisationId), eq(warmUps.sessionId, sessions.id)),
    );
}

export type SessionRow = Awaited<ReturnType<typeof selectSessions>>[number];

/** Own sessions only: a foreign id answers like an absent one. */
const own = (tx: Tx) => and(eq(sessions.organisationId, org(tx)), ownTeams(tx.scope, sessions.teamId));

export async function findSession(tx: Tx, id: string): Promise<SessionRow | undefined> {
  const [row] = await selectSessions(tx).where(and(own(tx), eq(sessions.id, id)));
  return row;
}

/** Takes the session's row for this transaction, so that two writes about one session follow each other. */
export async function lockSession(tx: Tx, id: string) {
  const [row] = await tx
    .select({ id: sessions.id })
    .from(sessions)
    .where(and(own(tx), eq(sessions.id, id)))
    .for("update");
  return row !== undefined;
}

type Range = { from: string; to: string; teamIds: readonly string[] };

const inRange = (tx: Tx, { from, to, teamIds }: Range) =>
  and(own(tx), inArray(sessions.teamId, [...teamIds]), gte(sessions.day, from), lte(sessions.day, to));

export async function findSessions(
  tx: Tx,
  range: Range,
  { newestFirst = false, limit, offset = 0 }: { newestFirst?: boolean; limit?: number; offset?: number } = {},
) {
  if (range.teamIds.length === 0) return [];
  const order = newestFirst ? desc : asc;
  const query = selectSessions(tx)
    .where(inRange(tx, range))
    .orderBy(order(sessions.day), asc(sessions.startTime), asc(teams.name))
    .offset(offset);
  return limit === undefined ? query : query.limit(limit);
}

export async function countSessions(tx: Tx, range: Range) {
  if (range.teamIds.length === 0) return 0;
  const [row] = await tx.select({ found: count() }).from(sessions).where(inRange(tx, range));
  return row?.found ?? 0;
}

export function findSessionsOfDay(tx: Tx, day: string) {
  return selectSessions(tx)
    .where(and(own(tx), eq(sessions.day, day), isNull(teams.archivedAt)))
    .orderBy(asc(sessions.startTime), asc(teams.name));
}

/** Planned sessions up to today: those whose time has passed are unconfirmed. */
export function findPlannedUntil(tx: Tx, day: string, teamIds?: readonly string[]) {
  return selectSessions(tx)
    .where(
      and(
        own(tx),
        eq(sessions.state, "planned"),
        lte(sessions.day, day),
        isNull(teams.archivedAt),
        teamIds ? inArray(sessions.teamId, [...teamIds]) : undefined,
      ),
    )
    .orderBy(asc(sessions.day), asc(sessions.startTime), asc(teams.name));
}

/** The next sessions that are neither cancelled nor of an earlier day. */
export function findNextSessions(tx: Tx, day: string, limit: number) {
  return selectSessions(tx)
    .where(and(own(tx), gte(sessions.day, day), ne(sessions.state, "cancelled"), isNull(teams.archivedAt)))
    .orderBy(asc(sessions.day), asc(sessions.startTime), asc(teams.name))
    .limit(limit);
}

/** Lets the people who add a session of one team, day and kind go one after the other, until their transactions end. */
export async function takeTurnToAdd(tx: Tx, like: { teamId: string; day: string; kind: string }) {
  const place = `session:${like.teamId}:${like.day}:${like.kind}`;
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${place}, 0))`);
}

/** A session of the same team, day and kind that is not cancelled: perhaps the one another phone added. */
export async function findSameSession(tx: Tx, like: { teamId: string; day: string; kind: string }) {
  const [row] = await selectSessions(tx)
    .where(
      and(
        own(tx),
        eq(sessions.teamId, like.teamId),
        eq(sessions.day, like.day),
        eq(sessions.kind, like.kind),
        ne(sessions.state, "cancelled"),
      ),
    )
    .orderBy(asc(sessions.startTime))
    .limit(1);
  return row;
}

export type NewSession = {
  id: string;
  teamId: string;
  day: string;
  startTime: string | null;
  kind: SessionKind;
  state: SessionState;
  plannedMinutes: number | null;
  surface: Surface | null;
  venueId: string | null;
};

export async function insertSession(tx: Tx, row: NewSession) {
  await tx.insert(sessions).values({ organisationId: org(tx), ...row, createdBy: tx.scope.personId });
}

export type SessionChange = Partial<
  Pick<
    typeof sessions.$inferInsert,
    | "day"
    | "startTime"
    | "kind"
    | "state"
    | "plannedMinutes"
    | "actualMinutes"
    | "abandonedAfter"
    | "cancelReason"
    | "surface"
    | "venueId"
    | "exposureGrade"
    | "headcount"
    | "headcountMinutes"
  >
>;

export async function updateSession(tx: Tx, id: string, change: SessionChange) {
  await tx
    .update(sessions)
    .set({ ...change, updatedAt: new Date(), version: sql`${sessions.version} + 1` })
    .where(and(own(tx), eq(sessions.id, id)));
}

export function findVenues(tx: Tx) {
  return tx
    .select({ id: venues.id, name: venues.name, surface: sql<Surface | null>`${venues.surface}` })
    .from(venues)
    .where(eq(venues.organisationId, org(tx)))
    .orderBy(asc(venues.name));
}

export async function findVenue(tx: Tx, id: string) {
  const [row] = await tx
    .select()
    .from(venues)
    .where(and(eq(venues.organisationId, org(tx)), eq(venues.id, id)));
  return row;
}

export function findSportRules(tx: Tx, sport: string) {
  return tx
    .select({
      fromAge: sportRules.fromAge,
      playersOnField: sportRules.playersOnField,
      regulationMinutes: sportRules.regulationMinutes,
    })
    .from(sportRules)
    .where(and(eq(sportRules.organisationId, org(tx)), eq(sportRules.sport, sport)));
}

/** The usual start, length, surface and venue: those of the team's last session of the kind. */
export async function findUsual(tx: Tx, teamId: string) {
  const [row] = await tx
    .select({
      startTime: sql<string | null>`to_char(${sessions.startTime}, 'HH24:MI')`,
      plannedMinutes: sessions.plannedMinutes,
      surface: sessions.surface,
      venueId: sessions.venueId,
    })
    .from(sessions)
    .where(and(own(tx), eq(sessions.teamId, teamId), eq(sessions.kind, "training")))
    .orderBy(desc(sessions.day))
    .limit(1);
  return row;
}

/** How many participations of a session there are. */
export async function countParticipations(tx: Tx, sessionId: string) {
  const [row] = await tx
    .select({ found: count() })
    .from(participations)
    .where(and(eq(participations.organisationId, org(tx)), eq(participations.sessionId, sessionId)));
  return row?.found ?? 0;
}
