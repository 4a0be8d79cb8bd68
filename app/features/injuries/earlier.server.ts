import { returnDayOf } from "~/features/availability/availability";
import { contributionsOfInjuries } from "~/features/availability/availability.server";
import type { Sealer } from "~/platform/crypto/keys.server";
import type { Tx } from "~db/client.server";
import { type BodyArea, pathologies, type Side } from "~db/schema/codes";
import { findInjuriesBefore, findInjuriesOf, type InjuryRow } from "./injuries.queries.server";
import { openRevision } from "./overview.server";
import { type EarlierInjury, suggestSubsequence } from "./subsequence";

/** An anterior cruciate ligament injury is told by the words of its diagnosis: the codes stop at "sprain". */
const namesAcl = (text: string | null) => text !== null && /\bACL\b|anterior cruciate/i.test(text);

/** Injuries from before Haleside carry a code or the words of a roster; a torn ligament is a sprain either way. */
function pathologyOf(text: string): string | null {
  if (pathologies.some((code) => code === text)) return text;
  return namesAcl(text) || /ligament|sprain/i.test(text) ? "sprain" : null;
}

/** Earlier injuries of the athlete, in Haleside and before it, that began before this one. */
async function findEarlier(tx: Tx, seals: Sealer, injury: InjuryRow) {
  const { onsetDay } = injury.revision;
  const own = (await findInjuriesOf(tx, [injury.athleteId])).filter(
    (row) => row.id !== injury.id && row.revision.onsetDay < onsetDay,
  );
  const parts = await contributionsOfInjuries(
    tx,
    own.map(({ id }) => id),
  );
  const inHaleside = own.map(({ id, revision }): EarlierInjury => {
    const returned = returnDayOf(revision.onsetDay, parts.get(id) ?? []);
    return {
      id,
      bodyArea: revision.bodyArea,
      side: revision.side,
      pathology: revision.pathology,
      acl: namesAcl(openRevision(seals, revision).diagnosis),
      onsetDay: revision.onsetDay,
      returnDay: returned ?? revision.closedOn,
      year: null,
    };
  });
  const before = (await findInjuriesBefore(tx, [injury.athleteId])).map(
    (row): EarlierInjury => ({
      id: null,
      bodyArea: row.bodyArea as BodyArea,
      side: row.side as Side,
      pathology: pathologyOf(row.pathology),
      acl: namesAcl(row.pathology) || row.pathology === "acl",
      onsetDay: null,
      returnDay: null,
      year: row.year,
    }),
  );
  return [...inHaleside, ...before];
}

/** The earlier injuries of the athlete and what this one seems to be to them; a clinical role confirms it. */
export async function relateToEarlier(tx: Tx, seals: Sealer, injury: InjuryRow) {
  const earlier = await findEarlier(tx, seals, injury);
  const { revision } = injury;
  const suggestion = suggestSubsequence(
    {
      bodyArea: revision.bodyArea,
      side: revision.side,
      pathology: revision.pathology,
      acl: false,
      onsetDay: revision.onsetDay,
    },
    earlier,
  );
  return { earlier, suggestion };
}
