import { and, asc, count, desc, eq, isNotNull, isNull, not, type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { qualified } from "~db/qualified";
import { actionAlerts, athletes, rosterEntries, teams } from "~db/schema";
import type { rosterViews } from "./roster.schema";
import { visibleAthletes } from "./visibility.server";

const org = (tx: Tx) => tx.scope.organisationId;

/** A search as typed, and its folded words. Numbers must not be found out by trying where they are not shown. */
export type SearchText = { words: readonly string[]; raw: string; numbers: boolean };

/** Words of a search, each found anywhere in the normalised name, or the start of the number. */
function matches({ words, raw, numbers }: SearchText): SQL | undefined {
  if (words.length === 0 && !raw) return undefined;
  const byName = words.map((word) => sql`${athletes.nameKey} like ${`%${word.replace(/[%_\\]/g, "\\$&")}%`}`);
  const byNumber = numbers
    ? sql`${athletes.number} ilike ${`${raw.replace(/[%_\\]/g, "\\$&")}%`}`
    : sql`false`;
  return words.length > 0 ? sql`((${sql.join(byName, sql` and `)}) or ${byNumber})` : byNumber;
}

const currentTeams = (tx: Tx, day: string) => sql<string | null>`(
  select string_agg(t.name, ', ' order by t.name)
  from roster_entries r join teams t on t.organisation_id = r.organisation_id and t.id = r.team_id
  where r.organisation_id = ${org(tx)}::uuid and r.athlete_id = ${qualified(athletes.id)}
    and r.from_day <= ${day}::date and coalesce(r.to_day, 'infinity'::date) >= ${day}::date)`;

/** @param teamId null: any team */
const onTeam = (tx: Tx, teamId: string | null, day: string) => sql`exists (
  select 1 from roster_entries r
  where r.organisation_id = ${org(tx)}::uuid and r.athlete_id = ${qualified(athletes.id)}
    and (${teamId}::uuid is null or r.team_id = ${teamId}::uuid)
    and r.from_day <= ${day}::date and coalesce(r.to_day, 'infinity'::date) >= ${day}::date)`;

/** Athletes for a search-as-you-type field, visible ones only. */
export function searchAthletes(tx: Tx, text: SearchText, limit: number) {
  return tx
    .select({
      id: athletes.id,
      givenName: athletes.givenName,
      familyName: athletes.familyName,
      number: athletes.number,
      visitor: athletes.visitor,
      teams: currentTeams(tx, tx.scope.today),
    })
    .from(athletes)
    .where(
      and(
        eq(athletes.organisationId, org(tx)),
        isNull(athletes.archivedAt),
        matches(text),
        visibleAthletes(tx.scope, athletes.id),
      ),
    )
    .orderBy(asc(athletes.familyName), asc(athletes.givenName))
    .limit(limit);
}

export type RosterFilter = SearchText & {
  show: (typeof rosterViews)[number];
  teamId: string | null;
};

export async function listAthletes(tx: Tx, filter: RosterFilter, page: number, pageSize: number) {
  const where = and(
    eq(athletes.organisationId, org(tx)),
    filter.show === "archived" ? isNotNull(athletes.archivedAt) : isNull(athletes.archivedAt),
    filter.show === "visitors" ? eq(athletes.visitor, true) : undefined,
    filter.show === "current" ? onTeam(tx, filter.teamId, tx.scope.today) : undefined,
    filter.show === "no-team" ? not(onTeam(tx, null, tx.scope.today)) : undefined,
    filter.show === "no-team" ? eq(athletes.visitor, false) : undefined,
    matches(filter),
    visibleAthletes(tx.scope, athletes.id),
  );
  const rows = await tx
    .select({
      id: athletes.id,
      givenName: athletes.givenName,
      familyName: athletes.familyName,
      number: athletes.number,
      dateOfBirth: athletes.dateOfBirth,
      sex: athletes.sex,
      visitor: athletes.visitor,
      teams: currentTeams(tx, tx.scope.today),
    })
    .from(athletes)
    .where(where)
    .orderBy(asc(athletes.familyName), asc(athletes.givenName))
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  const [total] = await tx.select({ n: count() }).from(athletes).where(where);
  return { rows, total: total?.n ?? 0 };
}

/** One athlete, if visible to the scope today. */
export async function findAthlete(tx: Tx, id: string) {
  const [row] = await tx
    .select()
    .from(athletes)
    .where(
      and(eq(athletes.organisationId, org(tx)), eq(athletes.id, id), visibleAthletes(tx.scope, athletes.id)),
    );
  return row;
}

export async function findAthleteByNumber(tx: Tx, number: string) {
  const [row] = await tx
    .select({ id: athletes.id, givenName: athletes.givenName, familyName: athletes.familyName })
    .from(athletes)
    .where(and(eq(athletes.organisationId, org(tx)), eq(athletes.number, number)));
  return row;
}

export function insertAthlete(tx: Tx, row: Omit<typeof athletes.$inferInsert, "organisationId">) {
  return tx.insert(athletes).values({ organisationId: org(tx), ...row });
}

/** Updates an athlete whose version is still the one the person saw. @returns false when somebody was faster */
export async function updateAthlete(
  tx: Tx,
  id: string,
  version: number,
  set: Partial<typeof athletes.$inferInsert>,
) {
  const rows = await tx
    .update(athletes)
    .set({ ...set, version: sql`${athletes.version} + 1` })
    .where(and(eq(athletes.organisationId, org(tx)), eq(athletes.id, id), eq(athletes.version, version)))
    .returning({ id: athletes.id });
  return rows.length === 1;
}

export function listEntries(tx: Tx, athleteId: string) {
  return tx
    .select({
      id: rosterEntries.id,
      teamId: rosterEntries.teamId,
      team: teams.name,
      fromDay: rosterEntries.fromDay,
      toDay: rosterEntries.toDay,
    })
    .from(rosterEntries)
    .innerJoin(
      teams,
      and(eq(teams.organisationId, rosterEntries.organisationId), eq(teams.id, rosterEntries.teamId)),
    )
    .where(and(eq(rosterEntries.organisationId, org(tx)), eq(rosterEntries.athleteId, athleteId)))
    .orderBy(desc(rosterEntries.fromDay));
}

export function insertEntry(tx: Tx, row: Omit<typeof rosterEntries.$inferInsert, "organisationId">) {
  return tx.insert(rosterEntries).values({ organisationId: org(tx), ...row });
}

export async function findEntry(tx: Tx, athleteId: string, id: string) {
  const [row] = await tx
    .select()
    .from(rosterEntries)
    .where(
      and(
        eq(rosterEntries.organisationId, org(tx)),
        eq(rosterEntries.athleteId, athleteId),
        eq(rosterEntries.id, id),
      ),
    );
  return row;
}

export function closeEntry(tx: Tx, id: string, toDay: string) {
  return tx
    .update(rosterEntries)
    .set({ toDay, version: sql`${rosterEntries.version} + 1` })
    .where(and(eq(rosterEntries.organisationId, org(tx)), eq(rosterEntries.id, id)));
}

/** Action alerts in force: what a family lets coaches see. */
export function listAlerts(tx: Tx, athleteId: string) {
  return tx
    .select()
    .from(actionAlerts)
    .where(
      and(
        eq(actionAlerts.organisationId, org(tx)),
        eq(actionAlerts.athleteId, athleteId),
        isNull(actionAlerts.endedAt),
      ),
    );
}

export function insertAlert(tx: Tx, row: Omit<typeof actionAlerts.$inferInsert, "organisationId">) {
  return tx.insert(actionAlerts).values({ organisationId: org(tx), ...row });
}

export function endAlert(tx: Tx, athleteId: string, id: string) {
  return tx
    .update(actionAlerts)
    .set({ endedAt: new Date() })
    .where(
      and(
        eq(actionAlerts.organisationId, org(tx)),
        eq(actionAlerts.athleteId, athleteId),
        eq(actionAlerts.id, id),
      ),
    );
}

/** Exposure of one athlete: sessions, AEs and hours in a period. */
export async function sumExposure(tx: Tx, athleteId: string, from: string, to: string) {
  const [row] = await tx.execute<{ exposures: number; minutes: number }>(sql`
    select count(*) filter (where p.presence = 'took_part' and p.minutes > 0)::int as exposures,
      coalesce(sum(p.minutes) filter (where p.presence = 'took_part'), 0)::float8 as minutes
    from participations p
    join sessions s on s.organisation_id = p.organisation_id and s.id = p.session_id
    where p.organisation_id = ${org(tx)}::uuid and p.athlete_id = ${athleteId}::uuid
      and s.state in ('held', 'abandoned') and s.day between ${from}::date and ${to}::date`);
  return { exposures: row?.exposures ?? 0, hours: (row?.minutes ?? 0) / 60 };
}
