import { openDoor, sweeperScope } from "~/features/accounts/doors.server";
import { describeFault } from "~/platform/fault.server";
import { log } from "~/platform/log.server";
import { read, type Scope, sqlState, type Tx, write } from "~db/client.server";
import {
  findMarkedSlices,
  listMarkedOrganisations,
  listMarks,
  removeMarks,
  replaceExposure,
  replaceInjuries,
} from "./rollups.queries.server";

/** Marks of one transaction. Most lead to one day of one team; the birth date of an athlete to a few hundred. */
const batch = 2000;

/**
 * Counts anew what a batch of marks touches and deletes exactly these marks. All statements see one snapshot: a change
 * that is not in it has its mark not in it either, and that mark stays.
 * @returns how many marks
 */
async function rollUpBatch(tx: Tx): Promise<number> {
  const marks = await listMarks(tx, batch);
  if (marks.length === 0) return 0;
  const { days, weeks } = await findMarkedSlices(tx, marks);
  await replaceExposure(tx, days);
  await replaceInjuries(tx, weeks);
  await removeMarks(tx, marks);
  return marks.length;
}

/** Another run was faster: of serializable transactions, or of the same keys. */
const overtaken = ["40001", "40P01", "23505"];

/**
 * Brings one organisation's roll-ups up to date, in the scope of the job. Two runs at once cannot write the same days:
 * the slower one is turned back, and what it saw is left for the next run.
 * @returns false where that happened
 */
export async function rollUp(job: Scope): Promise<boolean> {
  try {
    for (let seen = batch; seen === batch; )
      seen = await write(job, rollUpBatch, { isolation: "serializable" });
    return true;
  } catch (error) {
    if (!overtaken.includes(sqlState(error) ?? "")) throw error;
    log.info({ organisationId: job.organisationId }, "roll-up overtaken");
    return false;
  }
}

/**
 * The job: one organisation, where something big was written; else every one in which anything was. One that fails
 * keeps no other waiting.
 * @throws the first failure, once all had their turn
 */
export async function rollUpMarked({ organisationId }: Record<string, string> = {}) {
  const all = organisationId ? [organisationId] : await read(sweeperScope, listMarkedOrganisations);
  const faults: unknown[] = [];
  for (const each of all)
    try {
      await rollUp(await openDoor("job", each));
    } catch (error) {
      faults.push(error);
      log.error({ organisationId: each, ...describeFault(error) }, "roll-up failed");
    }
  if (faults.length > 0) throw faults[0];
}
