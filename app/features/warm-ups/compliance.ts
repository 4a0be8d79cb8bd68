import { type Estimate, incidenceRate, meanShare, proportion } from "~/statistics";
import { warmUpBlocks } from "~db/schema/codes";

/** A team's targets on the day of a session, from its programme assignment. */
export type Targets = { sessionShare: number; perWeek: number; minutes: number; blockShare: number };

/** Targets of a team without an assignment: all blocks, twice a week, 15 min, four sessions of five. */
export const defaultTargets: Targets = { sessionShare: 0.8, perWeek: 2, minutes: 15, blockShare: 1 };

/** One session that was held, as the measures need it. */
export type ComplianceSession = {
  sessionId: string;
  teamId: string;
  day: string;
  /** Monday of the session's week. */
  week: string;
  warmUp: { outcome: "full" | "part" | "skipped"; blocks: number; skipReason: string | null } | null;
  /** Share of the blocks from which a session counts as compliant, 0 to 1. */
  blockShare: number;
  /** Athletes who took part in the session (attendance recorded), and those of them who were warmed up. */
  participations: number;
  warmedUp: number;
};

/** A share with its interval and its n; `estimate` null when there is nothing to take a share of. */
export type Share = { successes: number; trials: number; estimate: Estimate | null };

export type Compliance = {
  /** Sessions held in the period. */
  sessions: number;
  recorded: number;
  full: number;
  part: number;
  skipped: number;
  notRecorded: number;
  ofRecorded: Share;
  ofHeld: Share;
  weeklyDose: { warmUps: number; teamWeeks: number; estimate: Estimate | null };
  completeness: { warmUps: number; estimate: Estimate | null };
  athleteDose: Share;
  skipReasons: Record<string, number>;
};

const share = (successes: number, trials: number): Share => ({
  successes,
  trials,
  estimate: trials === 0 ? null : proportion({ successes, trials }),
});

const blocksOf = ({ warmUp }: ComplianceSession) =>
  warmUp && warmUp.outcome !== "skipped" ? warmUp.blocks : 0;

/** A session is compliant when at least the target share of the five blocks was done. Skipped: no block. */
export const isCompliant = (session: ComplianceSession) =>
  blocksOf(session) > 0 && blocksOf(session) / warmUpBlocks.length >= session.blockShare - 1e-9;

/**
 * Session compliance = sessions with at least the target share of blocks done / sessions held.
 * `ofRecorded`: of the sessions with a warm-up record, done or skipped. `ofHeld`: of all sessions held, counting
 * the unrecorded as not done, the lowest it can be. Wilson intervals.
 */
export function sessionCompliance(sessions: readonly ComplianceSession[]) {
  const compliant = sessions.filter(isCompliant).length;
  const recorded = sessions.filter(({ warmUp }) => warmUp !== null).length;
  return { ofRecorded: share(compliant, recorded), ofHeld: share(compliant, sessions.length) };
}

/**
 * Weekly dose = warm-ups (at least one block done) per team-week. A team-week is a calendar week (Monday to Sunday)
 * in which the team held at least one session. Exact Poisson interval.
 */
export function weeklyDose(sessions: readonly ComplianceSession[]) {
  const warmUps = sessions.filter((session) => blocksOf(session) > 0).length;
  const teamWeeks = new Set(sessions.map(({ teamId, week }) => `${teamId} ${week}`)).size;
  const estimate =
    teamWeeks === 0 ? null : incidenceRate({ events: warmUps, exposure: teamWeeks }, { per: 1 });
  return { warmUps, teamWeeks, estimate };
}

/**
 * Completeness = mean share of the five blocks done, over the warm-ups done in full or in part (skipped ones stand
 * in session compliance). The shares of one warm-up's blocks are not independent, so the interval counts warm-ups,
 * not blocks (`meanShare`).
 */
export function completeness(sessions: readonly ComplianceSession[]) {
  const blocks = sessions.map(blocksOf).filter((count) => count > 0);
  const warmUps = blocks.length;
  if (warmUps === 0) return { warmUps, estimate: null };
  const sum = blocks.reduce((total, count) => total + count, 0) / warmUpBlocks.length;
  return { warmUps, estimate: meanShare({ sum, trials: warmUps }) };
}

/**
 * Athlete dose = warmed-up participations / participations, over the sessions whose attendance is recorded.
 * A participation in a session without a warm-up record counts as not warmed up. Wilson interval.
 */
export function athleteDose(sessions: readonly ComplianceSession[]) {
  const sum = (pick: (session: ComplianceSession) => number) =>
    sessions.reduce((total, session) => total + pick(session), 0);
  return share(
    sum((session) => (blocksOf(session) > 0 ? session.warmedUp : 0)),
    sum(({ participations }) => participations),
  );
}

/** The four measures of a set of sessions held, each with its n. */
export function complianceOf(sessions: readonly ComplianceSession[]): Compliance {
  const count = (outcome: string) => sessions.filter(({ warmUp }) => warmUp?.outcome === outcome).length;
  const [full, part, skipped] = [count("full"), count("part"), count("skipped")];
  const skipReasons: Record<string, number> = {};
  for (const { warmUp } of sessions)
    if (warmUp?.outcome === "skipped" && warmUp.skipReason)
      skipReasons[warmUp.skipReason] = (skipReasons[warmUp.skipReason] ?? 0) + 1;
  return {
    sessions: sessions.length,
    recorded: full + part + skipped,
    full,
    part,
    skipped,
    notRecorded: sessions.length - full - part - skipped,
    ...sessionCompliance(sessions),
    weeklyDose: weeklyDose(sessions),
    completeness: completeness(sessions),
    athleteDose: athleteDose(sessions),
    skipReasons,
  };
}
