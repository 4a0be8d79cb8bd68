import type { OperationAnswer } from "~/features/sessions/sync";
import { equalValues, type FieldChange, type FieldConflict, type FieldValue } from "~/platform/merge-fields";
import { fieldsOf, type WarmUpState } from "./warm-up";

export type Fields = Readonly<Record<string, FieldValue>>;
export type QueuedOperation = {
  id: string;
  kind: "warm-up";
  sessionId: string;
  fields: Record<string, FieldChange>;
};

/** The record as the page holds it: what the server has, what waits, and what cannot be sent before a block is ticked. */
export type Queue = {
  saved: Fields;
  waiting: readonly QueuedOperation[];
  /** Choices made before anything is recorded; they go along with the first block or reason. */
  drafts: Fields;
  conflicts: readonly FieldConflict[];
  refusal: string | null;
};

export const openQueue = (state: WarmUpState): Queue => ({
  saved: fieldsOf(state),
  waiting: [],
  drafts: {},
  conflicts: [],
  refusal: null,
});

/** What the person sees: the stored fields under everything that waits. */
export function shownFields({ saved, waiting, drafts }: Queue): Fields {
  const shown: Record<string, FieldValue> = { ...saved };
  for (const { fields } of waiting)
    for (const [name, { value }] of Object.entries(fields)) shown[name] = value;
  return { ...shown, ...drafts };
}

const isOff = (value: FieldValue | undefined) => value === undefined || value === false || value === null;
const same = (a: FieldValue | undefined, b: FieldValue | undefined) =>
  (isOff(a) && isOff(b)) || equalValues(a ?? null, b ?? null);

/** Whether these fields record anything: a block, or why it was not done. */
export const isRecorded = (fields: Fields) =>
  !isOff(fields.skipReason) ||
  Object.entries(fields).some(([name, on]) => name.startsWith("block:") && on === true);

const baseOf = (name: string, value: FieldValue | undefined): FieldValue =>
  value ?? (name.includes(":") ? false : null);

/**
 * Takes a person's choice. Blocks and the reason travel together, since one excludes the other; before anything is
 * recorded other choices wait as drafts.
 */
export function choose(queue: Queue, sessionId: string, id: string, chosen: Fields): Queue {
  const shown = shownFields(queue);
  const next = { ...shown, ...chosen };
  if (!isRecorded(next) && !isRecorded(shown)) return { ...queue, drafts: { ...queue.drafts, ...chosen } };
  const told = { ...queue.drafts, ...chosen };
  const settled = shownFields({ ...queue, drafts: {} });
  const fields: Record<string, FieldChange> = {};
  for (const [name, value] of Object.entries(told))
    if (!same(settled[name], value)) fields[name] = { base: baseOf(name, settled[name]), value };
  const ofBlocks = Object.keys(chosen).some((name) => name.startsWith("block:"));
  if (ofBlocks && !fields.skipReason) {
    const reason = settled.skipReason ?? null;
    fields.skipReason = { base: reason, value: told.skipReason ?? null };
  }
  if (Object.keys(fields).length === 0) return queue;
  const operation: QueuedOperation = { id, kind: "warm-up", sessionId, fields };
  return { ...queue, waiting: [...queue.waiting, operation], drafts: {}, refusal: null };
}

/** What undoes a choice, from what was shown before it. */
export const inverseOf = (before: Fields, chosen: Fields): Fields =>
  Object.fromEntries(Object.keys(chosen).map((name) => [name, baseOf(name, before[name])]));

const isState = (value: unknown): value is WarmUpState =>
  typeof value === "object" && value !== null && "blocks" in value && "athleteIds" in value;

/** Takes the server's answers. What was refused or in conflict leaves the queue and is shown, never silently lost. */
export function settle(queue: Queue, answers: readonly OperationAnswer[]): Queue {
  let current = queue;
  for (const answer of answers) current = settleOne(current, answer);
  return current;
}

function settleOne(queue: Queue, answer: OperationAnswer): Queue {
  if (!queue.waiting.some(({ id }) => id === answer.id)) return queue;
  const rest: Queue = { ...queue, waiting: queue.waiting.filter(({ id }) => id !== answer.id) };
  if (answer.status === "conflict" && answer.conflicts) {
    const stored = Object.fromEntries(answer.conflicts.map(({ field, stored: now }) => [field, now]));
    return {
      ...rest,
      saved: { ...rest.saved, ...stored },
      conflicts: [...rest.conflicts, ...answer.conflicts],
    };
  }
  if (answer.status === "refused" || answer.status === "conflict")
    return { ...rest, refusal: answer.message ?? "This entry was refused." };
  const state = answer.result?.state;
  return isState(state) ? { ...rest, saved: fieldsOf(state) } : rest;
}
