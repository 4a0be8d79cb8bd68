import { randomUUID } from "node:crypto";
import { sealer } from "~/platform/crypto/keys.server";
import { type Scope, type Tx, write } from "~db/client.server";
import {
  availabilityChanges,
  availabilityReasons,
  coachReports,
  injuries,
  injuryNotes,
  injuryRevisions,
} from "~db/schema";
import { only } from "./rows";

type Row<T> = Partial<Omit<T, "organisationId">>;
type Clear = { diagnosis?: string; description?: string; phoned?: string };
type Revision = Omit<Row<typeof injuryRevisions.$inferInsert>, keyof Clear> & Clear;

/**
 * Left out: a sprained left knee while cutting, today. Free text is given in clear and sealed here. `unavailableFrom`
 * makes the athlete unavailable from that day on.
 */
export function makeInjury(
  scope: Scope,
  {
    athleteId,
    notes = [],
    unavailableFrom,
    ...given
  }: Revision & { athleteId: string; notes?: readonly string[]; unavailableFrom?: string },
) {
  const { organisationId, personId } = scope;
  const id = randomUUID();
  return write(scope, async (tx) => {
    const seals = await sealer(tx);
    const place = (column: string) => ({ table: "injury_revisions", column, row: id, version: 1 });
    const injury = only(
      await tx.insert(injuries).values({ organisationId, id, athleteId, createdBy: personId }).returning(),
    );
    const { diagnosis, description, phoned, ...clear } = given;
    await tx.insert(injuryRevisions).values({
      organisationId,
      injuryId: id,
      version: 1,
      recordedBy: personId,
      onsetDay: scope.today,
      bodyArea: "knee",
      side: "left",
      onset: "sudden",
      contact: "non_contact",
      movement: "cutting",
      tissue: "ligament_capsule",
      pathology: "sprain",
      certainty: "clinical",
      signs: [],
      firstCare: [],
      referredTo: [],
      ...clear,
      diagnosis: seals.seal(place("diagnosis"), diagnosis),
      description: seals.seal(place("description"), description),
      phoned: seals.seal(place("phoned"), phoned),
    });
    for (const text of notes) {
      const row = randomUUID();
      const note = { table: "injury_notes", column: "text", row, version: 1 };
      await tx.insert(injuryNotes).values({
        organisationId,
        id: row,
        injuryId: id,
        text: seals.sealRequired(note, text),
        writtenBy: personId,
      });
    }
    if (unavailableFrom)
      await addAvailability(tx, { athleteId, cause: "injury", injuryId: id, fromDay: unavailableFrom });
    return injury;
  });
}

type Change = Row<typeof availabilityChanges.$inferInsert> & {
  athleteId: string;
  cause?: string;
  injuryId?: string;
  reportId?: string;
};

async function addAvailability(tx: Tx, { cause = "other", injuryId, reportId, ...given }: Change) {
  const { organisationId, personId, today } = tx.scope;
  const reasonId = given.reasonId ?? randomUUID();
  if (!given.reasonId)
    await tx.insert(availabilityReasons).values({
      organisationId,
      id: reasonId,
      athleteId: given.athleteId,
      cause,
      injuryId: injuryId ?? null,
      reportId: reportId ?? null,
      recordedBy: personId,
    });
  return only(
    await tx
      .insert(availabilityChanges)
      .values({
        organisationId,
        id: randomUUID(),
        fromDay: today,
        state: "unavailable",
        restrictions: [],
        seq: 1,
        setBy: personId,
        ...given,
        reasonId,
      })
      .returning(),
  );
}

/** A change of availability; with `reasonId` (and its `seq`) a further one of the same reason. */
export const makeAvailability = (scope: Scope, change: Change) =>
  write(scope, (tx) => addAvailability(tx, change));

/** Left out: a knee that swelled today. The note is given in clear. */
export function makeCoachReport(
  scope: Scope,
  {
    note,
    ...given
  }: Omit<Row<typeof coachReports.$inferInsert>, "note"> & { athleteId: string; note?: string },
) {
  const id = given.id ?? randomUUID();
  return write(scope, async (tx) => {
    const seals = await sealer(tx);
    const place = { table: "coach_reports", column: "note", row: id, version: 1 };
    return only(
      await tx
        .insert(coachReports)
        .values({
          organisationId: scope.organisationId,
          id,
          onsetDay: scope.today,
          bodyArea: "knee",
          side: "left",
          signs: ["swelling"],
          reportedBy: scope.personId,
          ...given,
          note: seals.seal(place, note),
        })
        .returning(),
    );
  });
}
