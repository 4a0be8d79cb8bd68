import { findOwnTeams } from "~/features/accounts/viewing.server";
import { weekStart } from "~/platform/clock";
import type { Tx } from "~db/client.server";
import { warmUpBlocks } from "~db/schema/codes";
import {
  type Compliance,
  type ComplianceSession,
  complianceOf,
  defaultTargets,
  type Targets,
} from "./compliance";
import { findAssignments, findHeldSessions, findProgramme } from "./warm-ups.queries.server";

type Assignment = Awaited<ReturnType<typeof findAssignments>>[number];

const targetsOf = (row: Assignment | undefined): Targets =>
  row
    ? {
        sessionShare: row.targetSessionShare,
        perWeek: row.targetPerWeek,
        minutes: row.targetMinutes,
        blockShare: row.targetBlockShare,
      }
    : defaultTargets;

function earlierDay(a: string, b: string) {
  if (a < b) return a;
  return b;
}

/** The assignment that holds on a day: the last that began by then. */
const assignmentOn = (rows: readonly Assignment[], teamId: string, day: string) =>
  rows.filter((row) => row.teamId === teamId && row.startsOn <= day).at(-1);

/** One session on a team's line of tallies. */
export type TallySession = ComplianceSession & { startTime: string | null; kind: string; done: boolean[] };

export type TeamCompliance = {
  teamId: string;
  teamName: string;
  sport: string;
  sex: string;
  targets: Targets;
  /** Whether the team follows a programme at the end of the period. */
  assigned: boolean;
  compliance: Compliance;
  /** The held sessions in order of their days. */
  sessions: TallySession[];
};

/**
 * The four measures by team over some days, for own teams only. Each session is judged by the targets of its day.
 * @param range days inclusive; sessions after today are never counted. Teams null: every own team, and archived ones
 *   that had a session then
 */
export async function complianceByTeam(
  tx: Tx,
  range: { from: string; to: string; teamIds: readonly string[] | null },
): Promise<TeamCompliance[]> {
  const { teamIds: wanted } = range;
  const current = new Set((await findOwnTeams(tx, tx.scope)).map(({ id }) => id));
  const own = await findOwnTeams(tx, tx.scope, { archived: wanted === null });
  const asked = own.filter(({ id }) => wanted === null || wanted.includes(id));
  const rows = await findHeldSessions(tx, { ...range, teamIds: asked.map(({ id }) => id) });
  const teams = asked.filter(({ id }) => current.has(id) || rows.some(({ teamId }) => teamId === id));
  const teamIds = teams.map(({ id }) => id);
  const assignments = await findAssignments(tx, teamIds);
  const lastDay = earlierDay(range.to, tx.scope.today);
  return teams.map(({ id, name, sport, sex }) => {
    const sessions = rows.filter(({ teamId }) => teamId === id).map((row) => tallyOf(row, assignments));
    const assignment = assignmentOn(assignments, id, lastDay);
    return {
      teamId: id,
      teamName: name,
      sport,
      sex,
      targets: targetsOf(assignment),
      assigned: assignment !== undefined,
      compliance: complianceOf(sessions),
      sessions,
    };
  });
}

function tallyOf(
  row: Awaited<ReturnType<typeof findHeldSessions>>[number],
  assignments: readonly Assignment[],
): TallySession {
  const { outcome, blocks, skipReason, ...session } = row;
  const targets = targetsOf(assignmentOn(assignments, row.teamId, row.day));
  return {
    ...session,
    week: weekStart(row.day),
    warmUp: outcome ? { outcome, blocks: blocks?.length ?? 0, skipReason } : null,
    blockShare: targets.blockShare,
    done: warmUpBlocks.map((block) => blocks?.includes(block) ?? false),
  };
}

/** The measures over all teams of a list together. */
export const complianceTogether = (teams: readonly TeamCompliance[]): Compliance =>
  complianceOf(teams.flatMap(({ sessions }) => sessions));

/** The programmes that these teams follow today, each with the teams. */
export async function programmesOf(tx: Tx, teamIds: readonly string[]) {
  const rows = await findAssignments(tx, teamIds);
  const current = teamIds
    .map((teamId) => assignmentOn(rows, teamId, tx.scope.today))
    .filter((row) => row !== undefined);
  const keys = [...new Set(current.map((row) => `${row.programmeId} ${row.programmeVersion}`))];
  const found = [];
  for (const key of keys) {
    const users = current.filter((row) => `${row.programmeId} ${row.programmeVersion}` === key);
    const [first] = users;
    if (!first) continue;
    const programme = await findProgramme(tx, first.programmeId, first.programmeVersion);
    if (programme) found.push({ ...programme, teamIds: users.map(({ teamId }) => teamId) });
  }
  return found;
}
