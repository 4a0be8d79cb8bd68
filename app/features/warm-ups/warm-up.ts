import type { FieldValue } from "~/platform/merge-fields";
import { type Restriction, type SkipReason, type WarmUpBlock, warmUpBlocks } from "~db/schema/codes";

/** A warm-up record as it stands; `recorded` false: not recorded, which is not the same as skipped. */
export type WarmUpState = {
  recorded: boolean;
  blocks: readonly WarmUpBlock[];
  skipReason: SkipReason | null;
  skipNote: string | null;
  minutes: number | null;
  ledBy: string | null;
  /** Who took part in the warm-up. */
  athleteIds: readonly string[];
};

export type WarmUpOutcome = "full" | "part" | "skipped" | "not_recorded";

export const outcomeWords: Record<WarmUpOutcome, string> = {
  full: "done in full",
  part: "done in part",
  skipped: "skipped",
  not_recorded: "not recorded",
};

/** The blocks a restriction forbids. No weight on the leg forbids them all. Our reading of the restrictions' words. */
const forbidden: Partial<Record<Restriction, readonly WarmUpBlock[]>> = {
  no_cutting: ["cutting_planting"],
  no_jumping: ["jumping_landing"],
  straight_running_only: ["jumping_landing", "cutting_planting"],
  non_weight_bearing: warmUpBlocks,
};

/** The blocks that an athlete's restrictions do not allow, in the order of the blocks. */
export function forbiddenBlocks(restrictions: readonly string[]): WarmUpBlock[] {
  const found = new Set(restrictions.flatMap((each) => forbidden[each as Restriction] ?? []));
  return warmUpBlocks.filter((block) => found.has(block));
}

/** What an athlete is credited with: the blocks done that their restrictions allow. */
export const creditedBlocks = (blocks: readonly WarmUpBlock[], restrictions: readonly string[]) => {
  const out = forbiddenBlocks(restrictions);
  return blocks.filter((block) => !out.includes(block));
};

/** Whether an athlete is ticked unless somebody unticks them: not unavailable, and allowed at least one block. */
export const joinsByDefault = (athlete: { state: string; restrictions: readonly string[] }) =>
  athlete.state !== "unavailable" && forbiddenBlocks(athlete.restrictions).length < warmUpBlocks.length;

/** Full: all blocks. Part: some. Skipped: none and a reason. Otherwise nothing is recorded. */
export function outcomeOf(state: Pick<WarmUpState, "blocks" | "skipReason">): WarmUpOutcome {
  if (state.blocks.length === warmUpBlocks.length) return "full";
  if (state.blocks.length > 0) return "part";
  return state.skipReason ? "skipped" : "not_recorded";
}

export const blockField = (block: WarmUpBlock) => `block:${block}`;
export const athleteField = (athleteId: string) => `athlete:${athleteId}`;

/** The record as flat fields, so that two phones merge tick by tick. */
export function fieldsOf(state: WarmUpState): Record<string, FieldValue> {
  return {
    ...Object.fromEntries(
      warmUpBlocks.map((block) => [blockField(block), state.blocks.includes(block)] as const),
    ),
    skipReason: state.skipReason,
    skipNote: state.skipNote,
    minutes: state.minutes,
    ledBy: state.ledBy,
    ...Object.fromEntries(state.athleteIds.map((id) => [athleteField(id), true] as const)),
  };
}

const textOf = (value: FieldValue | undefined) => (typeof value === "string" && value !== "" ? value : null);

/** The record that flat fields describe. */
export function stateFrom(fields: Readonly<Record<string, FieldValue>>): WarmUpState {
  const blocks = warmUpBlocks.filter((block) => fields[blockField(block)] === true);
  const skipReason = textOf(fields.skipReason) as SkipReason | null;
  return {
    recorded: blocks.length > 0 || skipReason !== null,
    blocks,
    skipReason,
    skipNote: textOf(fields.skipNote),
    minutes: typeof fields.minutes === "number" ? fields.minutes : null,
    ledBy: textOf(fields.ledBy),
    athleteIds: Object.entries(fields)
      .filter(([name, value]) => name.startsWith("athlete:") && value === true)
      .map(([name]) => name.slice("athlete:".length)),
  };
}
