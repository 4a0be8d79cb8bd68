import { randomUUID } from "node:crypto";
import { and, asc, eq, gte, inArray, isNull, lte, ne, or, sql } from "drizzle-orm";
import { date, integer, pgView, text, uuid } from "drizzle-orm/pg-core";
import { ownTeams, visibleAthletes } from "~/features/roster/visibility.server";
import type { Tx } from "~db/client.server";
import {
  athletes,
  availabilityChanges,
  availabilityReasons,
  memberships,
  rosterEntries,
  teams,
} from "~db/schema";
import type { AvailabilityState, Restriction } from "~db/schema/codes";
import { instant } from "~db/schema/columns";

/** The reading view of the migrations: what of each reason holds, from a day to a day. */
const contributions = pgView("availability_contributions", {
  organisationId: uuid("organisation_id").notNull(),
  id: uuid("id").notNull(),
  reasonId: uuid("reason_id").notNull(),
  athleteId: uuid("athlete_id").notNull(),
  state: text("state").$type<AvailabilityState>().notNull(),
  restrictions: text("restrictions").array().$type<Restriction[]>().notNull(),
  minutesLimit: integer("minutes_limit"),
  expectedOn: date("expected_on", { mode: "string" }),
  setBy: uuid("set_by"),
  setAt: instant("set_at").notNull(),
  seq: integer("seq").notNull(),
  fromDay: date("from_day", { mode: "string" }).notNull(),
  toDay: date("to_day", { mode: "string" }),
}).existing();

const org = (tx: Tx) => tx.scope.organisationId;

/** Contributions of these athletes that hold on a day, full ones included. */
export function findContributionsOn(tx: Tx, athleteIds: readonly string[], day: string) {
  return tx
    .select()
    .from(contributions)
    .where(
      and(
        eq(contributions.organisationId, org(tx)),
        inArray(contributions.athleteId, [...athleteIds]),
        lte(contributions.fromDay, day),
        or(isNull(contributions.toDay), gte(contributions.toDay, day)),
      ),
    );
}

/** Visible athletes with a contribution that is not full on a day. */
export function findLimitedAthletes(tx: Tx, day: string) {
  const { scope } = tx;
  return tx
    .selectDistinct({
      athleteId: athletes.id,
      givenName: athletes.givenName,
      familyName: athletes.familyName,
    })
    .from(contributions)
    .innerJoin(
      athletes,
      and(
        eq(athletes.organisationId, contributions.organisationId),
        eq(athletes.id, contributions.athleteId),
      ),
    )
    .where(
      and(
        eq(contributions.organisationId, org(tx)),
        ne(contributions.state, "full"),
        lte(contributions.fromDay, day),
        or(isNull(contributions.toDay), gte(contributions.toDay, day)),
        isNull(athletes.archivedAt),
        visibleAthletes(scope, contributions.athleteId, day),
      ),
    )
    .orderBy(asc(athletes.familyName), asc(athletes.givenName));
}

/** The own teams on whose roster each athlete stands on a day. */
export async function findTeamsOn(tx: Tx, athleteIds: readonly string[], day: string) {
  if (athleteIds.length === 0) return [];
  return tx
    .select({ athleteId: rosterEntries.athleteId, id: teams.id, name: teams.name })
    .from(rosterEntries)
    .innerJoin(
      teams,
      and(eq(teams.organisationId, rosterEntries.organisationId), eq(teams.id, rosterEntries.teamId)),
    )
    .where(
      and(
        eq(rosterEntries.organisationId, org(tx)),
        inArray(rosterEntries.athleteId, [...athleteIds]),
        lte(rosterEntries.fromDay, day),
        or(isNull(rosterEntries.toDay), gte(rosterEntries.toDay, day)),
        ownTeams(tx.scope, rosterEntries.teamId),
      ),
    )
    .orderBy(asc(teams.name));
}

export async function findVisibleAthlete(tx: Tx, athleteId: string) {
  const [row] = await tx
    .select({ id: athletes.id, givenName: athletes.givenName, familyName: athletes.familyName })
    .from(athletes)
    .where(
      and(
        eq(athletes.organisationId, org(tx)),
        eq(athletes.id, athleteId),
        visibleAthletes(tx.scope, athletes.id),
      ),
    );
  return row;
}

/** The contributions of the injuries, by injury. Clinical: it tells which injury. */
export async function findInjuryContributions(tx: Tx, injuryIds: readonly string[]) {
  if (injuryIds.length === 0) return [];
  return tx
    .select({
      injuryId: availabilityReasons.injuryId,
      reasonId: contributions.reasonId,
      fromDay: contributions.fromDay,
      toDay: contributions.toDay,
      state: contributions.state,
      restrictions: contributions.restrictions,
      minutesLimit: contributions.minutesLimit,
      expectedOn: contributions.expectedOn,
      setAt: contributions.setAt,
    })
    .from(contributions)
    .innerJoin(
      availabilityReasons,
      and(
        eq(availabilityReasons.organisationId, contributions.organisationId),
        eq(availabilityReasons.id, contributions.reasonId),
      ),
    )
    .where(
      and(eq(contributions.organisationId, org(tx)), inArray(availabilityReasons.injuryId, [...injuryIds])),
    )
    .orderBy(asc(contributions.fromDay));
}

/** What a reason says, in order of its days. */
export function findReasonContributions(tx: Tx, reasonIds: readonly string[]) {
  return tx
    .select()
    .from(contributions)
    .where(and(eq(contributions.organisationId, org(tx)), inArray(contributions.reasonId, [...reasonIds])))
    .orderBy(asc(contributions.fromDay));
}

/** Reasons of an athlete, each with its cause; newest first. */
export function findReasons(tx: Tx, athleteId: string) {
  return tx
    .select()
    .from(availabilityReasons)
    .where(and(eq(availabilityReasons.organisationId, org(tx)), eq(availabilityReasons.athleteId, athleteId)))
    .orderBy(sql`${availabilityReasons.recordedAt} desc`);
}

export async function findReason(tx: Tx, reasonId: string) {
  const [row] = await tx
    .select()
    .from(availabilityReasons)
    .where(and(eq(availabilityReasons.organisationId, org(tx)), eq(availabilityReasons.id, reasonId)));
  return row;
}

export async function findReasonOf(tx: Tx, by: { injuryId: string } | { reportId: string }) {
  const [row] = await tx
    .select()
    .from(availabilityReasons)
    .where(
      and(
        eq(availabilityReasons.organisationId, org(tx)),
        "injuryId" in by
          ? eq(availabilityReasons.injuryId, by.injuryId)
          : eq(availabilityReasons.reportId, by.reportId),
      ),
    )
    .orderBy(asc(availabilityReasons.recordedAt))
    .limit(1);
  return row;
}

/** Every change of these reasons in order of entry, those set aside included, with who set it. */
export async function findChanges(tx: Tx, reasonIds: readonly string[]) {
  if (reasonIds.length === 0) return [];
  return tx
    .select({
      id: availabilityChanges.id,
      reasonId: availabilityChanges.reasonId,
      fromDay: availabilityChanges.fromDay,
      state: sql<AvailabilityState>`${availabilityChanges.state}`,
      restrictions: sql<Restriction[]>`${availabilityChanges.restrictions}`,
      minutesLimit: availabilityChanges.minutesLimit,
      expectedOn: availabilityChanges.expectedOn,
      setAt: availabilityChanges.setAt,
      setBy: memberships.displayName,
      seq: availabilityChanges.seq,
    })
    .from(availabilityChanges)
    .leftJoin(
      memberships,
      and(
        eq(memberships.organisationId, availabilityChanges.organisationId),
        eq(memberships.personId, availabilityChanges.setBy),
      ),
    )
    .where(
      and(
        eq(availabilityChanges.organisationId, org(tx)),
        inArray(availabilityChanges.reasonId, [...reasonIds]),
      ),
    )
    .orderBy(asc(availabilityChanges.seq));
}

/** No `returning`: a coach may add a reason and may not read it. */
export async function insertReason(
  tx: Tx,
  row: { id: string; athleteId: string; cause: string; injuryId: string | null; reportId: string | null },
) {
  await tx
    .insert(availabilityReasons)
    .values({ organisationId: org(tx), ...row, recordedBy: tx.scope.personId });
}

export async function insertChange(
  tx: Tx,
  row: {
    reasonId: string;
    athleteId: string;
    seq: number;
    fromDay: string;
    state: AvailabilityState;
    restrictions: readonly Restriction[];
    minutesLimit: number | null;
    expectedOn: string | null;
  },
) {
  await tx.insert(availabilityChanges).values({
    organisationId: org(tx),
    id: randomUUID(),
    ...row,
    restrictions: [...row.restrictions],
    setBy: tx.scope.personId,
  });
}

/** The next place in a reason's order; concurrent writers of one reason wait for each other. */
export async function takeNextSeq(tx: Tx, reasonId: string) {
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`availability:${reasonId}`}, 0))`);
  const [row] = await tx
    .select({ last: sql<number>`coalesce(max(${availabilityChanges.seq}), 0)::int` })
    .from(availabilityChanges)
    .where(and(eq(availabilityChanges.organisationId, org(tx)), eq(availabilityChanges.reasonId, reasonId)));
  return (row?.last ?? 0) + 1;
}
