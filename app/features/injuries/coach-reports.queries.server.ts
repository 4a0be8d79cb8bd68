import { and, asc, eq, isNull, type SQL, sql } from "drizzle-orm";
import { ownTeams, visibleAthletes } from "~/features/roster/visibility.server";
import type { Tx } from "~db/client.server";
import {
  athletes,
  coachReportOutcomes,
  coachReports,
  encounters,
  memberships,
  sessions,
  teams,
} from "~db/schema";
import type { BodyArea, SessionKind, Side, Sign } from "~db/schema/codes";

const org = (tx: Tx) => tx.scope.organisationId;

/** Where the sealed texts of a report belong. */
export const reportPlace = (column: "phoned" | "note", reportId: string) => ({
  table: "coach_reports",
  column,
  row: reportId,
  version: 1,
});

/** Reports of athletes visible today, and those from a session of an own team. */
function visibleReports(tx: Tx): SQL {
  const { scope } = tx;
  if (scope.teams === "all") return sql`true`;
  return sql`(${visibleAthletes(scope, coachReports.athleteId)} or (${sessions.teamId} is not null and ${ownTeams(scope, sessions.teamId)}))`;
}

function selectReports(tx: Tx, ...conditions: (SQL | undefined)[]) {
  return tx
    .select({
      id: coachReports.id,
      athleteId: coachReports.athleteId,
      givenName: athletes.givenName,
      familyName: athletes.familyName,
      onsetDay: coachReports.onsetDay,
      onsetTime: coachReports.onsetTime,
      bodyArea: sql<BodyArea>`${coachReports.bodyArea}`,
      side: sql<Side>`${coachReports.side}`,
      suspectedConcussion: coachReports.suspectedConcussion,
      couldContinue: coachReports.couldContinue,
      signs: sql<Sign[]>`${coachReports.signs}`,
      phoned: coachReports.phoned,
      note: coachReports.note,
      reportedAt: coachReports.reportedAt,
      reportedBy: memberships.displayName,
      sessionId: coachReports.sessionId,
      sessionKind: sql<SessionKind | null>`${sessions.kind}`,
      teamName: teams.name,
      injuryId: coachReportOutcomes.injuryId,
      closedReason: coachReportOutcomes.reason,
      decidedAt: coachReportOutcomes.decidedAt,
    })
    .from(coachReports)
    .innerJoin(
      athletes,
      and(eq(athletes.organisationId, coachReports.organisationId), eq(athletes.id, coachReports.athleteId)),
    )
    .leftJoin(
      memberships,
      and(
        eq(memberships.organisationId, coachReports.organisationId),
        eq(memberships.personId, coachReports.reportedBy),
      ),
    )
    .leftJoin(
      sessions,
      and(eq(sessions.organisationId, coachReports.organisationId), eq(sessions.id, coachReports.sessionId)),
    )
    .leftJoin(teams, and(eq(teams.organisationId, sessions.organisationId), eq(teams.id, sessions.teamId)))
    .leftJoin(
      coachReportOutcomes,
      and(
        eq(coachReportOutcomes.organisationId, coachReports.organisationId),
        eq(coachReportOutcomes.reportId, coachReports.id),
      ),
    )
    .where(and(eq(coachReports.organisationId, org(tx)), visibleReports(tx), ...conditions))
    .orderBy(asc(coachReports.reportedAt));
}

export type ReportRow = Awaited<ReturnType<typeof selectReports>>[number];

export const findOpenReports = (tx: Tx) => selectReports(tx, isNull(coachReportOutcomes.reportId));

export async function findReport(tx: Tx, id: string): Promise<ReportRow | undefined> {
  const [row] = await selectReports(tx, eq(coachReports.id, id));
  return row;
}

/** No `returning`: a coach may send a report and may not read it. */
export async function insertReport(
  tx: Tx,
  row: Omit<typeof coachReports.$inferInsert, "organisationId" | "reportedBy" | "reportedAt">,
) {
  await tx.insert(coachReports).values({ organisationId: org(tx), ...row, reportedBy: tx.scope.personId });
}

/** @returns false when something became of the report already */
export async function insertOutcome(
  tx: Tx,
  row: { reportId: string; injuryId: string | null; reason: Uint8Array | null },
) {
  const rows = await tx
    .insert(coachReportOutcomes)
    .values({ organisationId: org(tx), ...row, decidedBy: tx.scope.personId })
    .onConflictDoNothing()
    .returning({ id: coachReportOutcomes.reportId });
  return rows.length === 1;
}

export async function insertEncounter(
  tx: Tx,
  row: {
    id: string;
    athleteId: string;
    day: string;
    kind: string;
    minutes: number | null;
    note: Uint8Array | null;
  },
) {
  await tx.insert(encounters).values({ organisationId: org(tx), ...row, recordedBy: tx.scope.personId });
}

/** Encounters of a day with visible athletes. */
export function findEncountersOn(tx: Tx, day: string) {
  return tx
    .select({
      id: encounters.id,
      athleteId: encounters.athleteId,
      givenName: athletes.givenName,
      familyName: athletes.familyName,
      kind: encounters.kind,
      minutes: encounters.minutes,
      recordedAt: encounters.recordedAt,
    })
    .from(encounters)
    .innerJoin(
      athletes,
      and(eq(athletes.organisationId, encounters.organisationId), eq(athletes.id, encounters.athleteId)),
    )
    .where(
      and(
        eq(encounters.organisationId, org(tx)),
        eq(encounters.day, day),
        visibleAthletes(tx.scope, encounters.athleteId),
      ),
    )
    .orderBy(asc(encounters.recordedAt));
}
