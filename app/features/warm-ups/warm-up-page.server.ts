import { randomUUID } from "node:crypto";
import { z } from "zod";
import { localMoment, showAthletes } from "~/features/sessions/attendance.server";
import { conflictsIn } from "~/features/sessions/conflict";
import { DomainError } from "~/platform/errors";
import { equalValues, type FieldChange, type FieldConflict, type FieldValue } from "~/platform/merge-fields";
import type { Scope, Tx } from "~db/client.server";
import { warmUpBlocks } from "~db/schema/codes";
import { athleteField, blockField, fieldsOf, forbiddenBlocks, joinsByDefault } from "./warm-up";
import { skipFormSchema, warmUpFormSchema } from "./warm-ups.schema";
import { openWarmUp, recordWarmUp } from "./warm-ups.server";

/** What the warm-up page shows. */
export async function openWarmUpPage(tx: Tx, scope: Scope, sessionId: string) {
  const { athletes, lastSaved, ...opened } = await openWarmUp(tx, scope, sessionId);
  return {
    ...opened,
    athletes: showAthletes(scope, athletes).map((athlete) => ({
      ...athlete,
      leavesOut: forbiddenBlocks(athlete.restrictions),
      joins: joinsByDefault(athlete) && !athlete.guest,
    })),
    lastSaved: lastSaved && { at: localMoment(scope, lastSaved.at), by: lastSaved.by },
    base: fieldsOf(opened.state),
    operationId: randomUUID(),
    syncAddress: `/api/${scope.slug}/sessions/sync`,
    reportAddress: `/${scope.slug}/report-injury?session=${sessionId}`,
  };
}

export type WarmUpPage = Awaited<ReturnType<typeof openWarmUpPage>>;

export type WarmUpAnswer =
  | { saved: true; undo: Record<string, FieldValue> | null }
  | { conflicts: FieldConflict[] };

const fieldValue = z.union([z.null(), z.boolean(), z.number(), z.string()]);
const fieldsSchema = z.record(z.string(), fieldValue);

function readFields(text: FormDataEntryValue | null) {
  try {
    return fieldsSchema.parse(JSON.parse(String(text)));
  } catch {
    throw new DomainError("invalid", "This form is not complete. Open the page again.");
  }
}

/**
 * What the page's form sends without script: `intent` save, all, skip, unskip or undo, everything at once, compared
 * with what the form was opened with.
 */
export async function submitWarmUp(
  scope: Scope,
  sessionId: string,
  form: Record<string, unknown>,
): Promise<WarmUpAnswer> {
  const base = readFields(String(form.base));
  const { operationId, wanted } = wantedFrom(form, base);
  const changes: Record<string, FieldChange> = {};
  for (const [name, value] of Object.entries(wanted)) {
    const seen = base[name] ?? (name.includes(":") ? false : null);
    // The reason travels with the blocks even when unchanged, since one excludes the other.
    if (!equalValues(seen, value) || name === "skipReason") changes[name] = { base: seen, value };
  }
  try {
    await recordWarmUp(scope, sessionId, operationId, changes);
  } catch (error) {
    const conflicts = conflictsIn(error);
    if (conflicts) return { conflicts };
    throw error;
  }
  const undo =
    form.intent === "all"
      ? Object.fromEntries(Object.entries(changes).map(([name, { base: was }]) => [name, was]))
      : null;
  return { saved: true, undo };
}

type Wanted = { operationId: string; wanted: Record<string, FieldValue> };

const blocksAs = (on: (block: (typeof warmUpBlocks)[number]) => boolean) =>
  Object.fromEntries(warmUpBlocks.map((block) => [blockField(block), on(block)]));

function wantedFrom(form: Record<string, unknown>, base: Record<string, FieldValue>): Wanted {
  const { operationId } = z.object({ operationId: z.uuid() }).parse(form);
  if (form.intent === "undo") return { operationId, wanted: readFields(String(form.undo)) };
  if (form.intent === "unskip") return { operationId, wanted: { skipReason: null, skipNote: null } };
  if (form.intent === "skip") {
    const { skipReason, skipNote } = skipFormSchema.parse(form);
    return { operationId, wanted: { ...blocksAs(() => false), skipReason, skipNote } };
  }
  const typed = warmUpFormSchema.parse(form);
  const all = form.intent === "all";
  const blocks = blocksAs((block) => all || typed.blocks.includes(block));
  const any = Object.values(blocks).some(Boolean);
  const listed = z.string().parse(form.listed).split(" ").filter(Boolean);
  const ticked = new Set(typed.athletes);
  if (all) for (const id of z.string().parse(form.joining).split(" ").filter(Boolean)) ticked.add(id);
  return {
    operationId,
    wanted: {
      ...blocks,
      skipReason: any ? null : (base.skipReason ?? null),
      ...(any ? { skipNote: null } : {}),
      minutes: typed.minutes,
      ledBy: typed.ledBy,
      ...Object.fromEntries(listed.map((id) => [athleteField(id), ticked.has(id)])),
    },
  };
}
