import { addDays } from "~/platform/clock";
import { formatDay } from "~/platform/days";
import { read, type Tx } from "~db/client.server";
import { listPeople } from "../accounts/people.server";
import { clinicalRoles, may, roleNames } from "../accounts/permissions";
import type { MemberScope } from "../accounts/scope.server";
import { resolveViewing, viewedTeamIds } from "../accounts/viewing.server";
import { listNotFullyAvailable } from "../availability/availability.server";
import { listImportsWithRejectedRows } from "../imports/imports.server";
import { listGaps, listOpenCoachReports, listUntouched } from "../injuries/injuries.server";
import { listInjuriesWithoutNotice, listNoticesNeedingAction } from "../notices/notices.server";
import {
  emergencyCardOf,
  listSessionsOfDay,
  listUnconfirmed,
  nextSessionForCoach,
} from "../sessions/sessions.server";
import { bodyAreaWords, sentenceCase, sessionKindWords, sideWords } from "../vocabulary";
import { complianceByTeam, complianceTogether } from "../warm-ups/warm-ups.server";
import { groupOf, type Task, type TaskGroup } from "./tasks";

/** Today for everybody: the day's sessions and who is not fully available, of the teams in the address. */
export function readToday(scope: MemberScope, url: URL) {
  return read(scope, async (tx) => {
    const viewing = await resolveViewing(tx, url);
    const teamIds = viewedTeamIds(viewing);
    const sessions = (await listSessionsOfDay(tx, scope, scope.today)).filter(({ teamId }) =>
      teamIds.includes(teamId),
    );
    const limited = (await listNotFullyAvailable(tx, scope, scope.today)).filter(
      ({ teams }) => teams.length === 0 || teams.some(({ id }) => teamIds.includes(id)),
    );
    const since = viewing.season?.startsOn ?? scope.today;
    return { sessions, limited, tasks: await listTasks(tx, scope, teamIds, since) };
  });
}

/**
 * What waits for this person, by what their roles may do.
 * @param since the season's first day: what was left open in earlier seasons stands in the lists, not here
 */
async function listTasks(
  tx: Tx,
  scope: MemberScope,
  teamIds: readonly string[],
  since: string,
): Promise<TaskGroup[]> {
  const base = `/${scope.slug}`;
  const clinical = may(scope.roles, "injuries.read");
  return [
    ...(clinical ? await clinicalTasks(tx, base, since) : []),
    ...(may(scope.roles, "attendance.write") ? await sessionTasks(tx, scope, teamIds, since) : []),
    ...(may(scope.roles, "imports") ? await importTasks(tx, base) : []),
  ];
}

async function clinicalTasks(tx: Tx, base: string, since: string): Promise<TaskGroup[]> {
  const reports = await listOpenCoachReports(tx);
  const notices = await listNoticesNeedingAction(tx);
  const gaps = (await listGaps(tx)).filter(({ onsetDay }) => onsetDay >= since);
  const untouched = await listUntouched(tx);
  const lineOf = (row: (typeof gaps)[number]) =>
    `${sentenceCase(bodyAreaWords[row.bodyArea])}${row.side === "left" || row.side === "right" ? `, ${sideWords[row.side]}` : ""}, ${formatDay(row.onsetDay)}`;
  return [
    ...groupOf(
      "reports",
      "Coaches' reports to take over",
      reports.map((report) => ({
        key: report.id,
        words: `${report.athlete}: ${bodyAreaWords[report.bodyArea]}`,
        detail: [
          report.teamName,
          formatDay(report.onsetDay),
          report.reportedBy ? `from ${report.reportedBy}` : null,
        ]
          .filter(Boolean)
          .join(", "),
        to: `${base}/coach-reports/${report.id}`,
        step: "Take over",
        urgent: report.urgency === "urgent",
      })),
      `${base}/coach-reports`,
    ),
    ...groupOf(
      "notices",
      "Families to tell",
      noticeTasks(notices, await listInjuriesWithoutNotice(tx), base),
      `${base}/notices`,
    ),
    ...groupOf(
      "untouched",
      "Injuries untouched for 14 days",
      untouched.map((row) => ({
        key: row.injuryId,
        words: row.athlete,
        detail: `${lineOf(row)}, ${row.timeLoss.days} days so far`,
        to: `${base}/injuries/${row.injuryId}`,
        step: "Update",
      })),
      `${base}/injuries?state=open`,
    ),
    ...groupOf(
      "gaps",
      "Injuries with gaps",
      gaps.map((row) => ({
        key: row.injuryId,
        words: row.athlete,
        detail: `${lineOf(row)}, ${row.gaps.length === 1 ? "one detail missing" : `${row.gaps.length} details missing`}`,
        to: `${base}/injuries/${row.injuryId}/edit`,
        step: "Complete",
      })),
      `${base}/injuries`,
    ),
  ];
}

function noticeTasks(
  notices: Awaited<ReturnType<typeof listNoticesNeedingAction>>,
  untold: Awaited<ReturnType<typeof listInjuriesWithoutNotice>>,
  base: string,
): Task[] {
  return [
    ...notices.map((notice) => ({
      key: notice.id,
      words: `${notice.guardianName}, about ${notice.athleteName}`,
      detail: notice.state.phoneTask ?? notice.state.line,
      to: `${base}/notices/${notice.id}`,
      step: "Open",
      urgent: notice.urgent,
      ...(notice.guardianPhone ? { phone: notice.guardianPhone } : {}),
    })),
    ...untold.map((row) => ({
      key: row.injuryId,
      words: row.athleteName,
      detail: "No guardian has been told of the injury yet",
      to: `${base}/injuries/${row.injuryId}/notice`,
      step: "Tell the family",
    })),
  ];
}

async function sessionTasks(
  tx: Tx,
  scope: MemberScope,
  teamIds: readonly string[],
  since: string,
): Promise<TaskGroup[]> {
  const base = `/${scope.slug}`;
  const rows = (await listUnconfirmed(tx, scope, teamIds)).filter(({ day }) => day >= since);
  return groupOf(
    "sessions",
    "Sessions to confirm",
    rows.reverse().map((session) => ({
      key: session.id,
      words: `${session.teamName}: ${sessionKindWords[session.kind]}`,
      detail: `${formatDay(session.day, "weekday")}${session.startTime ? `, ${session.startTime}` : ""}. Did it take place?`,
      to: `${base}/sessions/${session.id}/attendance`,
      step: "Enter who took part",
    })),
    `${base}/sessions`,
  );
}

async function importTasks(tx: Tx, base: string): Promise<TaskGroup[]> {
  const rows = await listImportsWithRejectedRows(tx);
  return groupOf(
    "imports",
    "Imports with rejected rows",
    rows.map((row) => ({
      key: row.id,
      words: row.fileName,
      detail: `${row.rejected === 1 ? "one row was" : `${row.rejected} rows were`} not imported`,
      to: `${base}/imports/${row.id}`,
      step: "See why",
    })),
    `${base}/imports`,
  );
}

/** The coach's one session: the current or the next, with its venue's emergency card. */
export function readCoachToday(scope: MemberScope) {
  return read(scope, async (tx) => {
    const session = await nextSessionForCoach(tx, scope);
    return { session: session ?? null, card: session ? await emergencyCardOf(tx, session) : null };
  });
}

/** The last seven days' warm-ups of the own teams, for one sentence. */
export function readWarmUpWeek(scope: MemberScope) {
  return read(scope, async (tx) => {
    const { teams } = await resolveViewing(tx, new URL("http://local/"));
    const compliance = complianceTogether(
      await complianceByTeam(tx, {
        from: addDays(scope.today, -6),
        to: scope.today,
        teamIds: teams.map(({ id }) => id),
      }),
    );
    return compliance;
  });
}

/** Roles that wait for a lead, and invitations that wait for their people: for those who may do something about it. */
export async function readPeopleTasks(scope: MemberScope): Promise<TaskGroup[]> {
  if (!may(scope.roles, "people.read")) return [];
  const { members, invitations } = await listPeople(scope);
  const to = `/${scope.slug}/settings/people`;
  const waiting = members.flatMap((member) =>
    member.endedAt
      ? []
      : member.roles
          .filter(({ role, confirmedAt }) => clinicalRoles.some((name) => name === role) && !confirmedAt)
          .map(({ role }) => ({
            key: `${member.personId} ${role}`,
            words: `${member.displayName}, ${roleNames[role as keyof typeof roleNames]}`,
            detail: may(scope.roles, "people.confirm")
              ? "Waits for your confirmation"
              : "Waits for a medical lead's confirmation",
            to,
            step: may(scope.roles, "people.confirm") ? "Confirm" : "See",
          })),
  );
  const open = invitations.map((invitation) => ({
    key: invitation.id,
    words: invitation.name,
    detail: "Invited, not yet accepted",
    to,
    step: "See",
  }));
  return [
    ...groupOf("roles", "Roles to confirm", waiting, to),
    ...(may(scope.roles, "people.manage") ? groupOf("invitations", "Open invitations", open, to) : []),
  ];
}
