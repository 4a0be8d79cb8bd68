import { and, asc, desc, eq, gte, inArray, isNull, lt, lte, type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import {
  athletes,
  deliveries,
  guardians,
  guardianships,
  injuries,
  injuryRevisions,
  noticeEvents,
  notices,
  organisations,
  rosterEntries,
  safeguardingHolds,
  sessions,
  venues,
} from "~db/schema";
import type { Contact, Language, Movement, Onset } from "~db/schema/codes";
import { visibleAthletes } from "../roster/visibility.server";

const org = (tx: Tx) => tx.scope.organisationId;

/** What a notice says of its organisation, and the rules it follows. */
export async function findSender(tx: Tx) {
  const [row] = await tx
    .select({
      name: organisations.name,
      phone: organisations.phone,
      phoneHours: organisations.phoneHours,
      ownDecisionAge: organisations.ownDecisionAge,
      noticeLinkDays: organisations.noticeLinkDays,
    })
    .from(organisations)
    .where(eq(organisations.organisationId, org(tx)));
  if (!row) throw new Error("A scope without its organisation.");
  return row;
}

/** How the injury came about, and the venue: what the draft of a notice says beside the facts of the injury. */
export async function findHow(tx: Tx, injuryId: string) {
  const [row] = await tx
    .select({
      onset: sql<Onset | null>`${injuryRevisions.onset}`,
      contact: sql<Contact | null>`${injuryRevisions.contact}`,
      movement: sql<Movement | null>`${injuryRevisions.movement}`,
      venue: venues.name,
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
    .leftJoin(
      sessions,
      and(eq(sessions.organisationId, injuries.organisationId), eq(sessions.id, injuryRevisions.sessionId)),
    )
    .leftJoin(
      venues,
      and(eq(venues.organisationId, sessions.organisationId), eq(venues.id, sessions.venueId)),
    )
    .where(and(eq(injuries.organisationId, org(tx)), eq(injuries.id, injuryId)));
  return row;
}

/** Whether the injury was recorded in error: perhaps of another child altogether. */
export async function isWithdrawn(tx: Tx, injuryId: string) {
  const rows = await tx
    .select({ withdrawn: injuryRevisions.withdrawn })
    .from(injuries)
    .innerJoin(
      injuryRevisions,
      and(
        eq(injuryRevisions.organisationId, injuries.organisationId),
        eq(injuryRevisions.injuryId, injuries.id),
        eq(injuryRevisions.version, injuries.version),
      ),
    )
    .where(and(eq(injuries.organisationId, org(tx)), eq(injuries.id, injuryId)));
  return rows.some(({ withdrawn }) => withdrawn);
}

/** Holds an injury for this transaction, so that its notices are written by one person at a time. */
export function lockInjury(tx: Tx, injuryId: string) {
  return tx
    .select({ id: injuries.id })
    .from(injuries)
    .where(and(eq(injuries.organisationId, org(tx)), eq(injuries.id, injuryId)))
    .for("update");
}

/** The athlete's part of who is told. */
export async function findStanding(tx: Tx, athleteId: string) {
  const [athlete] = await tx
    .select({ dateOfBirth: athletes.dateOfBirth })
    .from(athletes)
    .where(and(eq(athletes.organisationId, org(tx)), eq(athletes.id, athleteId)));
  const holds = await tx
    .select({ id: safeguardingHolds.id })
    .from(safeguardingHolds)
    .where(
      and(
        eq(safeguardingHolds.organisationId, org(tx)),
        eq(safeguardingHolds.athleteId, athleteId),
        isNull(safeguardingHolds.liftedAt),
      ),
    )
    .limit(1);
  const { ownDecisionAge } = await findSender(tx);
  return { dateOfBirth: athlete?.dateOfBirth ?? null, onHold: holds.length > 0, ownDecisionAge };
}

/** The guardians of an athlete, ended bonds included, whom to phone first on top. Legal limits stay sealed here. */
export async function findGuardians(tx: Tx, athleteId: string, guardianId?: string) {
  const rows = await tx
    .select({
      id: guardians.id,
      name: guardians.name,
      email: guardians.email,
      phone: guardians.phone,
      language: sql<Language>`${guardians.language}`,
      wantsEmail: guardians.wantsEmail,
      emailStoppedAt: guardians.emailStoppedAt,
      relation: guardianships.relation,
      mayBeTold: guardianships.mayBeTold,
      phoneOrder: guardianships.phoneOrder,
      legalLimits: guardianships.legalLimits,
      limitsReviewOn: guardianships.limitsReviewOn,
      endedAt: guardianships.endedAt,
    })
    .from(guardianships)
    .innerJoin(
      guardians,
      and(
        eq(guardians.organisationId, guardianships.organisationId),
        eq(guardians.id, guardianships.guardianId),
      ),
    )
    .where(
      and(
        eq(guardianships.organisationId, org(tx)),
        eq(guardianships.athleteId, athleteId),
        guardianId ? eq(guardianships.guardianId, guardianId) : undefined,
      ),
    )
    .orderBy(asc(guardianships.phoneOrder), asc(guardians.name));
  return rows.map(({ legalLimits, ...row }) => ({ ...row, legalLimits, limited: legalLimits !== null }));
}

export async function insertNotice(tx: Tx, row: Omit<typeof notices.$inferInsert, "organisationId">) {
  await tx.insert(notices).values({ organisationId: org(tx), ...row, createdBy: tx.scope.personId });
}

export async function insertEvent(
  tx: Tx,
  row: { id: string; noticeId: string; kind: string; detail?: Uint8Array | null },
) {
  await tx.insert(noticeEvents).values({ organisationId: org(tx), ...row, by: tx.scope.personId });
}

const ownNotices = (tx: Tx, ...conditions: (SQL | undefined)[]) =>
  and(eq(notices.organisationId, org(tx)), visibleAthletes(tx.scope, notices.athleteId), ...conditions);

function selectNotices(tx: Tx, ...conditions: (SQL | undefined)[]) {
  return tx
    .select({
      id: notices.id,
      injuryId: notices.injuryId,
      athleteId: notices.athleteId,
      guardianId: notices.guardianId,
      urgency: notices.urgency,
      createdAt: notices.createdAt,
      createdBy: notices.createdBy,
      athleteName: sql<string>`${athletes.givenName} || ' ' || ${athletes.familyName}`,
      givenName: athletes.givenName,
      guardianName: guardians.name,
      guardianPhone: guardians.phone,
      relation: guardianships.relation,
    })
    .from(notices)
    .innerJoin(
      athletes,
      and(eq(athletes.organisationId, notices.organisationId), eq(athletes.id, notices.athleteId)),
    )
    .innerJoin(
      guardians,
      and(eq(guardians.organisationId, notices.organisationId), eq(guardians.id, notices.guardianId)),
    )
    .leftJoin(
      guardianships,
      and(
        eq(guardianships.organisationId, notices.organisationId),
        eq(guardianships.athleteId, notices.athleteId),
        eq(guardianships.guardianId, notices.guardianId),
      ),
    )
    .where(ownNotices(tx, ...conditions))
    .orderBy(desc(notices.createdAt), asc(guardianships.phoneOrder));
}

export type NoticeRow = Awaited<ReturnType<typeof selectNotices>>[number];

export async function findNoticeRow(tx: Tx, id: string): Promise<NoticeRow | undefined> {
  const [row] = await selectNotices(tx, eq(notices.id, id));
  return row;
}

export const findNoticesOfInjury = (tx: Tx, injuryId: string) =>
  selectNotices(tx, eq(notices.injuryId, injuryId));

/** Notices written in a time; of athletes on these teams' rosters when the notice was written, where teams are given. */
export function findNotices(tx: Tx, filter: { since: Date; until?: Date; teamIds?: readonly string[] }) {
  const { since, until, teamIds } = filter;
  return selectNotices(
    tx,
    gte(notices.createdAt, since),
    until ? lt(notices.createdAt, until) : undefined,
    teamIds ? onRosterOf(tx, teamIds) : undefined,
  );
}

function onRosterOf(tx: Tx, teamIds: readonly string[]): SQL {
  if (teamIds.length === 0) return sql`false`;
  const entries = tx
    .select({ one: sql`1` })
    .from(rosterEntries)
    .where(
      and(
        eq(rosterEntries.organisationId, org(tx)),
        eq(rosterEntries.athleteId, notices.athleteId),
        inArray(rosterEntries.teamId, [...teamIds]),
        lte(rosterEntries.fromDay, sql`(${notices.createdAt} at time zone ${tx.scope.timeZone})::date`),
        sql`coalesce(${rosterEntries.toDay}, 'infinity'::date) >= (${notices.createdAt} at time zone ${tx.scope.timeZone})::date`,
      ),
    );
  return sql`exists (${entries})`;
}

export function findEvents(tx: Tx, noticeIds: readonly string[]) {
  if (noticeIds.length === 0) return Promise.resolve([]);
  return tx
    .select()
    .from(noticeEvents)
    .where(and(eq(noticeEvents.organisationId, org(tx)), inArray(noticeEvents.noticeId, [...noticeIds])))
    .orderBy(asc(noticeEvents.at));
}

export async function findDeliveries(tx: Tx, noticeIds: readonly string[]) {
  if (noticeIds.length === 0) return [];
  const rows = await tx
    .select({
      id: deliveries.id,
      noticeId: deliveries.noticeId,
      template: deliveries.template,
      state: deliveries.state,
      createdAt: deliveries.createdAt,
      sentAt: deliveries.sentAt,
      deliveredAt: deliveries.deliveredAt,
      failedAt: deliveries.failedAt,
      lastError: deliveries.lastError,
      attempts: deliveries.attempts,
    })
    .from(deliveries)
    .where(and(eq(deliveries.organisationId, org(tx)), inArray(deliveries.noticeId, [...noticeIds])))
    .orderBy(asc(deliveries.createdAt));
  return rows.flatMap((row) => (row.noticeId ? [{ ...row, noticeId: row.noticeId }] : []));
}

/** The whole row of a notice, sealed content included: for the door, the composers and the notice's own page. */
export async function findNotice(tx: Tx, id: string) {
  const [row] = await tx
    .select()
    .from(notices)
    .where(and(eq(notices.organisationId, org(tx)), eq(notices.id, id)));
  return row;
}

/** Sets a guardian's own wish; nothing else of theirs is touched. */
export async function stopWantingEmail(tx: Tx, guardianId: string) {
  await tx
    .update(guardians)
    .set({ wantsEmail: false, version: sql`${guardians.version} + 1` })
    .where(and(eq(guardians.organisationId, org(tx)), eq(guardians.id, guardianId)));
}

/** No more e-mail to an address that came back, until a corrected one is entered. */
export async function markEmailStopped(tx: Tx, guardianId: string, at: Date) {
  await tx
    .update(guardians)
    .set({ emailStoppedAt: at, version: sql`${guardians.version} + 1` })
    .where(
      and(
        eq(guardians.organisationId, org(tx)),
        eq(guardians.id, guardianId),
        isNull(guardians.emailStoppedAt),
      ),
    );
}

/** Injuries on record since an instant of which nobody was told yet; withdrawn ones left out. */
export function findInjuriesWithoutNotice(tx: Tx, since: Date) {
  return tx
    .select({
      injuryId: injuries.id,
      athleteId: injuries.athleteId,
      athleteName: sql<string>`${athletes.givenName} || ' ' || ${athletes.familyName}`,
      dateOfBirth: athletes.dateOfBirth,
      createdAt: injuries.createdAt,
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
    .where(
      and(
        eq(injuries.organisationId, org(tx)),
        gte(injuries.createdAt, since),
        eq(injuryRevisions.withdrawn, false),
        visibleAthletes(tx.scope, injuries.athleteId),
        sql`not exists (select 1 from notices told
          where told.organisation_id = ${injuries.organisationId} and told.injury_id = ${injuries.id})`,
      ),
    )
    .orderBy(desc(injuries.createdAt));
}
