import { group } from "d3-array";
import { type Compliance, complianceOf } from "~/features/warm-ups/compliance";
import type { TallySession, TeamCompliance } from "~/features/warm-ups/warm-ups.server";
import { type Estimate, proportion } from "~/statistics";

/** Warm-up compliance of teams and weeks, from the day on which each team began the programme. Pure. */

export type ProgrammeTeam = {
  teamId: string;
  name: string;
  startsOn: string | null;
  sessions: TallySession[];
  compliance: Compliance;
};

/**
 * Teams with their sessions of the given kinds from their start on. A day before it is no missed warm-up; a team that
 * follows no programme has no session here.
 */
export function fromStartOn(
  teams: readonly TeamCompliance[],
  starts: ReadonlyMap<string, string>,
  kinds: readonly string[],
): ProgrammeTeam[] {
  return teams.map(({ teamId, teamName, sessions }) => {
    const startsOn = starts.get(teamId) ?? null;
    const own = sessions.filter(
      ({ day, kind }) => startsOn !== null && day >= startsOn && kinds.includes(kind),
    );
    return { teamId, name: teamName, startsOn, sessions: own, compliance: complianceOf(own) };
  });
}

/** The four measures of each week, for all these sessions together; weeks without a session have none. */
export function byWeek(sessions: readonly TallySession[], weeks: readonly string[]) {
  const keyed = group(sessions, ({ week }) => week);
  return weeks.map((week) => {
    const own = keyed.get(week);
    return { week, compliance: own ? complianceOf(own) : null };
  });
}

export type SkipShare = { teamId: string; name: string; skipped: number; recorded: number; share: Estimate };

export type Skipping = {
  /** Teams with a recorded warm-up or skip, the largest share of skipped ones first. */
  teams: SkipShare[];
  /** Those whose whole interval lies above what the other teams skip, with its limits widened for the number of teams. */
  standingOut: SkipShare[];
  /** What the other teams than the first skip together; null when there is no other. */
  others: { skipped: number; recorded: number; share: Estimate } | null;
};

/** Fewer recorded sessions than this say too little of a habit. */
const enoughSessions = 5;

/**
 * Who skips the warm-up: skipped sessions of those with a record. Sessions that nobody recorded are in neither count.
 * Each team is held against the others together; its limits are at 1 - 0.05 / teams (Bonferroni), since with many
 * teams one would stand out by luck.
 */
export function skippingOf(all: readonly ProgrammeTeam[]): Skipping {
  const teams = all
    .filter(({ compliance }) => compliance.recorded >= enoughSessions)
    .map(({ teamId, name, compliance: { skipped, recorded } }) => ({
      teamId,
      name,
      skipped,
      recorded,
      share: proportion({ successes: skipped, trials: recorded }),
    }))
    .sort((a, b) => b.share.estimate - a.share.estimate || b.recorded - a.recorded);
  const restOf = (out: readonly SkipShare[]) => {
    const rest = teams.filter((team) => !out.includes(team));
    const sum = (pick: (team: SkipShare) => number) => rest.reduce((total, team) => total + pick(team), 0);
    return { skipped: sum(({ skipped }) => skipped), recorded: sum(({ recorded }) => recorded) };
  };
  const level = 1 - 0.05 / Math.max(1, teams.length);
  const standingOut = teams.filter((team) => {
    const rest = restOf([team]);
    if (rest.recorded === 0) return false;
    const limits = proportion({ successes: team.skipped, trials: team.recorded }, { level });
    return limits.lower > rest.skipped / rest.recorded;
  });
  const others = restOf(standingOut.length > 0 ? standingOut : teams.slice(0, 1));
  return {
    teams,
    standingOut,
    others:
      others.recorded === 0
        ? null
        : { ...others, share: proportion({ successes: others.skipped, trials: others.recorded }) },
  };
}

/** The team whose warm-ups are recorded least, of those with enough sessions; null when every session is recorded. */
export function leastRecorded(teams: readonly ProgrammeTeam[]) {
  const [least] = teams
    .filter(({ compliance }) => compliance.sessions >= enoughSessions && compliance.notRecorded > 0)
    .sort(
      (a, b) =>
        b.compliance.notRecorded / b.compliance.sessions - a.compliance.notRecorded / a.compliance.sessions,
    );
  if (!least) return null;
  const { name, compliance } = least;
  return { name, notRecorded: compliance.notRecorded, sessions: compliance.sessions };
}
