import type { CurrentAvailability } from "./availability.ts";
import { sportRuleOf, type TeamPlan } from "./plan.ts";
import type { Random } from "./random.ts";
import type { Member } from "./rosters.ts";
import type { Fixture } from "./schedule.ts";
import type { Presence, SessionKind, Sport } from "./types.ts";

/** One athlete in one session as it happened, recorded or not. */
export type Turn = {
  member: Member;
  presence: Presence;
  minutes: number;
  /** Minute of the session at which the athlete came on. */
  cameOnAt: number;
  isLate: boolean;
  availability: CurrentAvailability;
};

export type Candidate = {
  member: Member;
  availability: CurrentAvailability;
  /** Chance of turning up when able to. */
  reliability: number;
  /** Already took part in another session that day. */
  isBusy: boolean;
};

const MATCH_SQUAD: Record<Sport, number> = { soccer: 16, basketball: 12, handball: 14, volleyball: 12 };
const ATTENDANCE: Record<SessionKind, number> = { training: 1, match: 1.03, strength: 0.88, other: 0.92 };

/** Decides who took part and for how long; unavailable athletes never do, modified ones play no match. */
export function playSession(
  random: Random,
  fixture: Fixture,
  actualMinutes: number,
  candidates: readonly Candidate[],
): Turn[] {
  const turns = candidates.map((candidate): Turn => {
    const { state } = candidate.availability;
    const comes = random.chance(candidate.reliability * ATTENDANCE[fixture.kind]);
    const watches = random.chance(0.35);
    const able = state === "full" || (state === "modified" && fixture.kind !== "match");
    const stays = comes && !candidate.isBusy;
    const presence = able && stays ? "took_part" : !able && stays && watches ? "present_only" : "absent";
    return {
      member: candidate.member,
      presence,
      minutes: presence === "took_part" ? actualMinutes : 0,
      cameOnAt: 0,
      isLate: false,
      availability: candidate.availability,
    };
  });
  const playing = turns.filter((turn) => turn.presence === "took_part");
  if (fixture.kind === "match") playMatch(random, fixture.plan, actualMinutes, playing);
  else trainTogether(random, actualMinutes, playing);
  return turns;
}

function trainTogether(random: Random, actualMinutes: number, playing: readonly Turn[]): void {
  for (const turn of playing) {
    if (random.chance(0.07)) {
      turn.isLate = random.chance(0.6);
      turn.minutes = Math.max(10, actualMinutes - 5 * random.int(2, 6));
    }
    if (turn.availability.state === "modified") {
      const limit = turn.availability.minutesLimit ?? Math.round(actualMinutes * 0.6);
      turn.minutes = Math.min(turn.minutes, limit);
    }
  }
}

function playMatch(random: Random, plan: TeamPlan, actualMinutes: number, playing: readonly Turn[]): void {
  const order = random.shuffle(playing);
  const squad = order.slice(0, MATCH_SQUAD[plan.sport]);
  for (const turn of order.slice(squad.length)) leaveOut(turn, "absent");
  const { playersOnField } = sportRuleOf(plan.sport, plan.ageGroup.label);
  if (plan.sport === "soccer") substitute(random, plan, actualMinutes, squad, playersOnField);
  else rotate(random, actualMinutes, squad, playersOnField);
}

function leaveOut(turn: Turn, presence: Presence): void {
  turn.presence = presence;
  turn.minutes = 0;
}

/** Soccer: pairs swap once; the young use the whole bench, seniors five at most, the rest only watch. */
function substitute(
  random: Random,
  plan: TeamPlan,
  minutes: number,
  squad: readonly Turn[],
  onField: number,
): void {
  const starters = squad.slice(0, onField);
  const bench = squad.slice(onField);
  const swaps = plan.ageGroup.label === "senior" ? 5 : bench.length;
  for (const [index, substituteTurn] of bench.entries()) {
    const starter = starters[index];
    const at = Math.round(minutes * (0.4 + 0.5 * random.next()));
    if (!starter || index >= swaps || at < 1 || at >= minutes) {
      leaveOut(substituteTurn, "present_only");
      continue;
    }
    starter.minutes = at;
    substituteTurn.minutes = minutes - at;
    substituteTurn.cameOnAt = at;
  }
}

/** Rolling substitutions: the team's minutes are shared out unevenly, nobody beyond the length of the match. */
function rotate(random: Random, minutes: number, squad: readonly Turn[], onField: number): void {
  const shares = squad.map(() => 0.35 + random.next());
  const total = shares.reduce((sum, share) => sum + share, 0);
  for (const [index, turn] of squad.entries()) {
    const fair = (onField * minutes * (shares[index] ?? 0)) / total;
    turn.minutes = Math.max(1, Math.min(minutes, Math.round(fair)));
    turn.cameOnAt = Math.min(minutes - turn.minutes, index < onField ? 0 : Math.round(minutes * 0.2));
  }
}
