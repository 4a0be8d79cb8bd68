import type { Turn } from "./attendance.ts";
import type { Random } from "./random.ts";
import type { Fixture } from "./schedule.ts";
import type { Restriction, SkipReason, WarmUp, WarmUpBlock } from "./types.ts";

export const WARM_UP_BLOCKS: readonly WarmUpBlock[] = [
  "running",
  "strength",
  "jumping_landing",
  "balance",
  "cutting_planting",
];

/**
 * Teams lose the habit as a season goes on. Invented; one study saw adherence fall 1.9 % a week (Hilska 2021), the
 * demo a little less, since its seasons are longer.
 */
const WEEKLY_LOSS = 0.013;
const KEEPS_FROM_WARM_UP: readonly Restriction[] = [
  "no_cutting",
  "no_jumping",
  "non_weight_bearing",
  "straight_running_only",
];

export type WarmUpHeld = {
  record: WarmUp | null;
  /** Who did the full warm-up, whether it was written down or not: what protects in the truth of the demo. */
  warmedUp: ReadonlySet<string>;
  /** Who did the warm-up in full or in part: what the injury's own record says, as the application proposes it. */
  tookPart: ReadonlySet<string>;
};

/** What the team did before a session, and whether anybody wrote it down. */
export function holdWarmUp(
  random: Random,
  fixture: Fixture,
  turns: readonly Turn[],
  coach: string,
): WarmUpHeld {
  const { plan } = fixture;
  const likely = Math.min(
    0.97,
    plan.warmUpHabit * (1 - WEEKLY_LOSS) ** fixture.week * (fixture.kind === "match" ? 1.05 : 1),
  );
  const outcome = random.chance(likely) ? "full" : random.chance(0.55) ? "part" : "skipped";
  const left = new Set(random.shuffle(WARM_UP_BLOCKS).slice(0, random.int(1, 3)));
  const blocks = WARM_UP_BLOCKS.filter(
    (block) => outcome === "full" || (outcome === "part" && !left.has(block)),
  );
  const skipReason = drawSkipReason(random, plan.sport === "soccer");
  const minutes = outcome === "full" ? random.int(13, 20) : 2 * blocks.length + random.int(1, 4);
  const ledBy = random.chance(0.85) ? coach : null;
  const isRecorded = random.chance(plan.warmUpRecording);

  const taking = turns.filter((turn) => turn.presence === "took_part");
  const misses = taking.filter(
    (turn) => turn.isLate || turn.availability.restrictions.some((each) => KEEPS_FROM_WARM_UP.includes(each)),
  );
  const notWarmedUp = outcome === "skipped" ? [] : misses.map((turn) => turn.member.athlete.key);
  const tookPart = outcome === "skipped" ? [] : taking.filter((turn) => !misses.includes(turn));
  const warmedUp = outcome === "full" ? tookPart : [];
  const record: WarmUp = {
    organisation: plan.organisation,
    session: fixture.key,
    outcome,
    blocks,
    skipReason: outcome === "skipped" ? skipReason : null,
    minutes: outcome === "skipped" ? 0 : minutes,
    ledBy: outcome === "skipped" ? null : ledBy,
    notWarmedUp,
  };
  const keysOf = (list: readonly Turn[]) => new Set(list.map((turn) => turn.member.athlete.key));
  return { record: isRecorded ? record : null, warmedUp: keysOf(warmedUp), tookPart: keysOf(tookPart) };
}

function drawSkipReason(random: Random, isOutdoor: boolean): SkipReason {
  return random.weighted<SkipReason>([
    ["no_time", 47],
    ["weather", isOutdoor ? 18 : 0],
    ["no_space", isOutdoor ? 4 : 14],
    ["leader_absent", 16],
    ["forgot", 12],
    ["other", 3],
  ]);
}
