import { randomUUID } from "node:crypto";
import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import { returnDayOf } from "~/features/availability/availability";
import type { AvailabilityChange } from "~/features/availability/availability.schema";
import {
  changeAvailability,
  contributionsOfInjuries,
  fullFrom,
  makeUnavailable,
  moveOnset,
  openReason,
  reasonOf,
  requireFrom,
} from "~/features/availability/availability.server";
import { audit } from "~/platform/audit.server";
import { type Sealer, sealer } from "~/platform/crypto/keys.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { once } from "~/platform/operations.server";
import { type Tx, write } from "~db/client.server";
import { safeDefaultReasons } from "./cautions";
import { carryFurther, writeFurther } from "./diagnoses.server";
import { dropDraft, editDraft } from "./drafts.server";
import { changedKeys } from "./history";
import {
  findInjuriesOf,
  findInjuryRow,
  findRevisions,
  findSessionsOf,
  type InjuryRow,
  lockInjury,
} from "./injuries.queries.server";
import type { EditInput, withdrawReasons } from "./injuries.schema";
import { type Opened, openRevision, revisionPlace } from "./overview.server";
import { advanceVersion, insertNote, insertRevision, type NewRevision } from "./records.queries.server";

const refuse = (field: string, message: string) =>
  new DomainError("invalid", "", { fields: { [field]: [message] } });

/** The injury to change, held for this transaction, if nobody changed it since the form was opened. */
async function takeInjury(tx: Tx, id: string, version?: number): Promise<InjuryRow> {
  await lockInjury(tx, id);
  const row = await findInjuryRow(tx, id);
  if (!row) throw notFound("That injury");
  if (row.revision.withdrawn)
    throw new DomainError("conflict", "This record was withdrawn. It can be read and no longer changed.");
  if (version !== undefined && row.revision.version !== version)
    throw new DomainError(
      "conflict",
      "Somebody changed this record since you opened it. What you typed is still here: compare it with the history on the injury's page, then open the form again and save.",
    );
  return row;
}

/** Writes the next revision: what is given anew, the rest as it was, the sealed texts sealed for their new place. */
async function revise(
  tx: Tx,
  seals: Sealer,
  row: InjuryRow,
  given: Partial<Omit<NewRevision, keyof Opened>> & Partial<Opened>,
) {
  const { recordedAt: _at, recordedBy: _by, organisationId: _org, ...before } = row.revision;
  const version = before.version + 1;
  const texts: Opened = { ...openRevision(seals, row.revision), ...pickTexts(given) };
  const seal = (column: keyof Opened) => seals.seal(revisionPlace(column, row.id, version), texts[column]);
  await insertRevision(tx, {
    ...before,
    changeReason: null,
    ...given,
    version,
    phoned: seal("phoned"),
    diagnosis: seal("diagnosis"),
    description: seal("description"),
  });
  if (!(await advanceVersion(tx, row.id, before.version)))
    throw new DomainError("conflict", "Somebody changed this record at the same moment. Open it again.");
  return version;
}

const pickTexts = (given: Partial<Opened>): Partial<Opened> => ({
  ...(given.phoned === undefined ? {} : { phoned: given.phoned }),
  ...(given.diagnosis === undefined ? {} : { diagnosis: given.diagnosis }),
  ...(given.description === undefined ? {} : { description: given.description }),
});

async function sessionOf(tx: Tx, row: InjuryRow, input: EditInput) {
  if (input.session === "outside") return { sessionId: null, outsideSport: true };
  if (input.session === "") return { sessionId: null, outsideSport: false };
  const sessions = await findSessionsOf(tx, row.athleteId, input.day);
  const known =
    sessions.some(({ id }) => id === input.session) ||
    (row.session?.id === input.session && row.session.day === input.day);
  if (!known) throw refuse("session", "This session is not one of the athlete's on that day. Choose again.");
  return { sessionId: input.session, outsideSport: false };
}

/** The injury that this one follows is one of the same athlete. */
async function checkSubsequentTo(tx: Tx, row: InjuryRow, { subsequentTo }: EditInput) {
  if (!subsequentTo) return;
  if (subsequentTo === row.id) throw refuse("subsequentTo", "An injury cannot follow from itself.");
  const own = await findInjuriesOf(tx, [row.athleteId]);
  if (!own.some(({ id }) => id === subsequentTo))
    throw refuse("subsequentTo", "This is no longer an injury of this athlete. Choose again.");
}

async function checkClosing(tx: Tx, row: InjuryRow, input: EditInput) {
  if (!input.closedOn) return;
  if (input.closedOn > tx.scope.today) throw refuse("closedOn", "This day has not come yet.");
  const parts = (await contributionsOfInjuries(tx, [row.id])).get(row.id) ?? [];
  const returned = returnDayOf(row.revision.onsetDay, parts);
  if (returned === null || returned > input.closedOn)
    throw refuse(
      "closedOn",
      "The athlete is not fully available on that day. Enter the day of full availability first, on the injury's page.",
    );
}

/**
 * An edit that brings a reason for the safe default which no earlier revision had makes the athlete unavailable, also
 * when something else had been lifted; a reason that was known when a clinical role lifted it stays lifted.
 */
async function applySafeDefault(tx: Tx, row: InjuryRow, input: EditInput & { signs: EditInput["signs"] }) {
  if (input.closedOn) return;
  const known = (await findRevisions(tx, row.id))
    .filter(({ revision }) => revision.version <= row.revision.version)
    .flatMap(({ revision }) => safeDefaultReasons(revision));
  if (safeDefaultReasons(input).every((reason) => known.includes(reason))) return;
  await makeUnavailable(tx, { id: row.id, athleteId: row.athleteId, onsetDay: input.day });
}

/**
 * Completes or corrects a record, once per operation: a new revision; the earlier one stays with who and when.
 * @throws DomainError forbidden, not_found, invalid, conflict (changed meanwhile, withdrawn), operation_mismatch
 */
export function editInjury(scope: MemberScope, id: string, given: EditInput): Promise<{ version: number }> {
  if (!may(scope.roles, "injuries.write")) throw forbidden();
  const signs = [...new Set([...given.signs, ...given.emergencySigns, ...given.headSigns])];
  const input = { ...given, signs };
  return write(scope, (tx) =>
    once(tx, input.operation, { edit: id, input }, async () => {
      const row = await takeInjury(tx, id, input.version);
      if (input.day > scope.today) throw refuse("day", "This day has not come yet.");
      await checkSubsequentTo(tx, row, input);
      const place = await sessionOf(tx, row, input);
      await checkClosing(tx, row, input);
      const seals = await sealer(tx);
      const revision = {
        onsetDay: input.day,
        onsetTime: input.time,
        ...place,
        bodyArea: input.bodyArea,
        side: input.side,
        suspectedConcussion: input.suspectedConcussion,
        couldContinue: input.couldContinue,
        onset: input.onset,
        contact: input.contact,
        movement: input.movement,
        minuteOfPlay: input.minuteOfPlay,
        surface: input.surface,
        footwear: input.footwear,
        warmedUp: input.warmedUp,
        signs,
        swellingNoticed: input.swellingNoticed,
        firstCare: input.firstCare,
        referredTo: input.referredTo,
        phoned: input.phoned,
        tissue: input.diagnosisPair?.tissue ?? null,
        pathology: input.diagnosisPair?.pathology ?? null,
        diagnosis: input.diagnosis,
        certainty: input.certainty,
        surgery: input.surgery,
        surgeryDay: input.surgeryDay,
        description: input.description,
        subsequence: input.subsequence,
        subsequentTo: input.subsequentTo || null,
        closedOn: input.closedOn,
      };
      const version = await revise(tx, seals, row, revision);
      await writeFurther(tx, seals, id, version, input);
      await moveOnset(tx, id, row.revision.onsetDay, input.day);
      await applySafeDefault(tx, row, input);
      await dropDraft(tx, scope.personId, editDraft(id));
      const before = { ...row.revision, ...openRevision(seals, row.revision) };
      await audit(tx, {
        action: "injury.edit",
        subjectId: id,
        athleteId: row.athleteId,
        fields: { version, changed: changedKeys(before, { ...before, ...revision }) },
      });
      return { version };
    }),
  );
}

/** A dated change of what this injury allows; with `close`, full availability also closes the injury on that day. */
export function changeInjuryAvailability(
  scope: MemberScope,
  id: string,
  change: AvailabilityChange,
  { close = false }: { close?: boolean } = {},
): Promise<void> {
  if (!may(scope.roles, "availability.write")) throw forbidden();
  return write(scope, async (tx) => {
    const row = await takeInjury(tx, id);
    requireFrom(change, row.revision.onsetDay);
    const reason = await reasonOf(tx, { injuryId: id });
    if (reason) await changeAvailability(tx, reason.id, change);
    else await openReason(tx, { athleteId: row.athleteId, cause: "injury", injuryId: id, change });
    const reopened = row.revision.closedOn !== null && change.state !== "full";
    const closes = close && change.state === "full";
    if (!closes && !reopened) return;
    if (closes && change.fromDay > scope.today)
      throw refuse("fromDay", "An injury closes on a day that has come. Leave it open until then.");
    const seals = await sealer(tx);
    const version = await revise(tx, seals, row, { closedOn: closes ? change.fromDay : null });
    await carryFurther(tx, seals, id, row.revision.version, version);
    await audit(tx, {
      action: closes ? "injury.close" : "injury.reopen",
      subjectId: id,
      athleteId: row.athleteId,
    });
  });
}

/** Appends a follow-up note, once per operation. Notes are signed by their writer and never changed. */
export function addNote(scope: MemberScope, id: string, input: { operation: string; text: string }) {
  if (!may(scope.roles, "injuries.write")) throw forbidden();
  return write(scope, (tx) =>
    once(tx, input.operation, { note: id, input }, async () => {
      const row = await takeInjury(tx, id);
      const noteId = randomUUID();
      const seals = await sealer(tx);
      const place = { table: "injury_notes", column: "text", row: noteId, version: 1 };
      await insertNote(tx, { id: noteId, injuryId: id, text: seals.sealRequired(place, input.text) });
      await audit(tx, { action: "injury.note", subjectId: id, athleteId: row.athleteId });
      return { id: noteId };
    }),
  );
}

/** Withdraws a record made in error: kept for ever, counted nowhere; its availability is set aside from its first day. */
export function withdrawInjury(
  scope: MemberScope,
  id: string,
  { version, reason }: { version: number; reason: (typeof withdrawReasons)[number] },
): Promise<void> {
  if (!may(scope.roles, "injuries.write")) throw forbidden();
  return write(scope, async (tx) => {
    const row = await takeInjury(tx, id, version);
    const seals = await sealer(tx);
    const next = await revise(tx, seals, row, { withdrawn: true, changeReason: reason });
    await carryFurther(tx, seals, id, row.revision.version, next);
    const own = await reasonOf(tx, { injuryId: id });
    const [first] = (await contributionsOfInjuries(tx, [id])).get(id) ?? [];
    if (own && first) await changeAvailability(tx, own.id, fullFrom(first.fromDay));
    await audit(tx, {
      action: "injury.withdraw",
      subjectId: id,
      athleteId: row.athleteId,
      fields: { reason },
    });
  });
}
