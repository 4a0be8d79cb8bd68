import type { Sealer } from "~/platform/crypto/keys.server";
import type { Tx } from "~db/client.server";
import { findDiagnoses } from "./injuries.queries.server";
import { type EditInput, furtherDiagnoses } from "./injuries.schema";
import { insertDiagnoses } from "./records.queries.server";

/** Where the sealed words of a further diagnosis belong. */
export const diagnosisPlace = (injuryId: string, version: number, position: number) => ({
  table: "injury_diagnoses",
  column: "diagnosis",
  row: `${injuryId}/${position}`,
  version,
});

/** The further diagnoses of a revision in clear. */
export async function readFurther(tx: Tx, seals: Sealer, injuryId: string) {
  const rows = await findDiagnoses(tx, injuryId);
  return rows.map(({ diagnosis, ...row }) => ({
    ...row,
    diagnosis: seals.open(diagnosisPlace(injuryId, row.version, row.position), diagnosis),
  }));
}

/** Writes the further diagnoses of the edit form under a revision. */
export async function writeFurther(
  tx: Tx,
  seals: Sealer,
  injuryId: string,
  version: number,
  input: EditInput,
) {
  const rows = furtherDiagnoses.flatMap((n) => {
    const pair = input[`further${n}`];
    const certainty = input[`further${n}Certainty`];
    return pair && certainty ? [{ ...pair, certainty, text: input[`further${n}Words`] }] : [];
  });
  await insertDiagnoses(
    tx,
    rows.map(({ text, ...row }, index) => ({
      injuryId,
      version,
      position: index + 1,
      ...row,
      diagnosis: seals.seal(diagnosisPlace(injuryId, version, index + 1), text),
    })),
  );
}

/** Further diagnoses stand per revision; a revision that does not touch them carries them on. */
export async function carryFurther(tx: Tx, seals: Sealer, injuryId: string, from: number, to: number) {
  const rows = (await readFurther(tx, seals, injuryId)).filter(({ version }) => version === from);
  await insertDiagnoses(
    tx,
    rows.map(({ diagnosis, organisationId: _org, ...row }) => ({
      ...row,
      version: to,
      diagnosis: seals.seal(diagnosisPlace(injuryId, to, row.position), diagnosis),
    })),
  );
}
