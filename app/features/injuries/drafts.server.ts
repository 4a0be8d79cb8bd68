import { z } from "zod";
import type { MemberScope } from "~/features/accounts/scope.server";
import { sealer } from "~/platform/crypto/keys.server";
import { DomainError } from "~/platform/errors";
import type { FormValues } from "~/ui";
import { type Tx, write } from "~db/client.server";
import { findDraft, findResult, removeDraft, upsertDraft } from "./drafts.queries.server";

/** Drafts of the injury forms, kept on the server as they are typed and sealed like the record they become. */

const draftForms = /^injury\.(new|report\.[0-9a-f-]{36}|edit\.[0-9a-f-]{36})$/;
export const logDraft = (reportId: string | null) => (reportId ? `injury.report.${reportId}` : "injury.new");
export const editDraft = (injuryId: string) => `injury.edit.${injuryId}`;

const longest = 60_000;
const bodySchema = z.record(z.string(), z.union([z.string(), z.array(z.string())]));

const place = (personId: string, form: string) => ({
  table: "form_drafts",
  column: "body",
  row: `${personId}:${form}`,
  version: 1,
});

/**
 * Keeps what was typed. A draft that arrives after its form was saved is dropped, or a slow network would bring the
 * saved record back as a draft.
 * @returns the instant of keeping; null when the form was saved already
 */
export function saveDraft(scope: MemberScope, form: string, values: FormValues): Promise<Date | null> {
  if (!draftForms.test(form)) throw new DomainError("invalid", "There is no such form.");
  const body = JSON.stringify(values);
  if (body.length > longest) throw new DomainError("too_large", "This draft is too long to keep.");
  return write(scope, async (tx) => {
    const { operation } = values;
    if (
      typeof operation === "string" &&
      z.uuid().safeParse(operation).success &&
      (await findResult(tx, operation))
    )
      return null;
    const seals = await sealer(tx);
    const savedAt = new Date();
    await upsertDraft(tx, {
      personId: scope.personId,
      form,
      body: seals.sealRequired(place(scope.personId, form), body),
      savedAt,
    });
    return savedAt;
  });
}

/** The person's draft of a form; null when there is none. */
export async function readDraft(tx: Tx, personId: string, form: string) {
  const row = await findDraft(tx, personId, form);
  if (!row) return null;
  const text = (await sealer(tx)).open(place(personId, form), row.body);
  const parsed = bodySchema.safeParse(JSON.parse(text ?? "{}"));
  return parsed.success ? { values: parsed.data, savedAt: row.savedAt } : null;
}

export const dropDraft = removeDraft;

/** Throws a draft away at the person's wish. */
export function discardDraft(scope: MemberScope, form: string) {
  return write(scope, (tx) => removeDraft(tx, scope.personId, form));
}
