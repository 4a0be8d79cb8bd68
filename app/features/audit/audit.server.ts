import { log } from "~/platform/log.server";
import { read, type Scope, type Tx, write } from "~db/client.server";
import { openDoor, sweeperScope } from "../accounts/doors.server";
import { findChain, findHead, findUnsealed, insertSeals, listOrganisationIds } from "./audit.queries.server";
import { firstBroken, linkHash } from "./chain";

const batch = 1000;

/** Adds the unsealed events of one organisation to its chain. @returns how many */
async function sealBatch(tx: Tx): Promise<number> {
  const head = await findHead(tx);
  let { position, hash } = head ?? { position: 0, hash: "" };
  const rows = (await findUnsealed(tx, batch)).map(({ event }) => {
    position += 1;
    hash = linkHash(hash, event);
    return { position, hash, eventId: event.id };
  });
  if (rows.length === 0) return 0;
  await insertSeals(tx, rows);
  return rows.length;
}

/**
 * Seals one organisation's audit events in order. Two runs at once cannot both take a position: the later one fails on
 * the key and finds nothing left the next time. The head goes to the log, outside the database.
 */
export async function sealAudit(scope: Scope) {
  for (let sealed = batch; sealed === batch; ) {
    sealed = await write(scope, sealBatch);
  }
  const head = await read(scope, findHead);
  if (head)
    log.info(
      { organisationId: scope.organisationId, position: head.position, hash: head.hash },
      "audit head",
    );
}

/** The job: every organisation's chain, one after the other. */
export async function sealAllAudits() {
  for (const { organisationId } of await read(sweeperScope, listOrganisationIds))
    await sealAudit(await openDoor("job", organisationId));
}

/** Walks an organisation's chain. @returns the first position that does not fit, or null */
export function checkAudit(scope: Scope) {
  return read(scope, async (tx) => firstBroken(await findChain(tx)));
}
