import { audit } from "~/platform/audit.server";
import { enqueue } from "~/platform/jobs/queue.server";
import { log } from "~/platform/log.server";
import { sqlState, type Tx, write } from "~db/client.server";
import type { MemberScope } from "../accounts/scope.server";
import { carryOut, RecordsMoved } from "./bulk.queries.server";
import {
  allowLongWork,
  deleteChunks,
  findImport,
  findStagedRows,
  type ImportRecord,
  rememberAliases,
  takeTurn,
  updateImport,
} from "./imports.queries.server";
import { type MappedHeading, mappedHeadingSchema } from "./imports.schema";
import type { ImportRowValue } from "./kinds";
import { rememberedKey } from "./mapping/map-headers";
import { batchSize, openMatching } from "./matching.server";
import { prepareImport } from "./prepare.server";
import { reportProgress } from "./progress.server";

/** What is stored is no longer what the preview compared with. */
class PreviewOutdated extends Error {}

/** SQLSTATEs that mean somebody else wrote at the same moment. */
const collisions = new Set(["23505", "23P01", "23503", "40001", "40P01", "55P03"]);

/**
 * Imports what the preview showed, as one transaction: all of it or nothing. Imports of an organisation take turns.
 * Every row is compared with the records anew; where one would now do something else than the preview said, nothing
 * is written and the preview is made again. Safe to run twice.
 */
export async function commitImport(scope: MemberScope, id: string) {
  try {
    await write(scope, async (tx) => {
      await allowLongWork(tx);
      await takeTurn(tx, "commit");
      const record = await findImport(tx, id);
      if (record?.state === "committing") await commit(tx, record);
    });
  } catch (error) {
    await giveBack(scope, id, error);
  }
}

async function commit(tx: Tx, record: ImportRecord) {
  const matching = await openMatching(tx, record);
  let position = 0;
  let done = 0;
  for (let line = 0; ; ) {
    const rows = await findStagedRows(tx, record.id, line, batchSize);
    const last = rows.at(-1);
    if (!last) break;
    line = last.line;
    const decisions = await matching.decide(
      rows.map((row) => ({ line: row.line, value: row.value as ImportRowValue })),
    );
    if (decisions.some(({ outcome }, index) => outcome !== rows[index]?.outcome)) throw new PreviewOutdated();
    if (rows.length < batchSize) matching.finish();
    position = await carryOut(tx, record.id, matching.writes, position);
    done += rows.length;
    await reportProgress(tx.scope, record.id, done, record.progressTotal);
  }
  matching.finish();
  await carryOut(tx, record.id, matching.writes, position);
  await rememberAliases(tx, record.kind, aliasesToRemember(record));
  await deleteChunks(tx, record.id);
  const fields = Object.fromEntries(Object.entries(record.counts).filter(([, value]) => value > 0));
  await audit(tx, { action: `${record.kind}.import`, subjectId: record.id, fields });
  await updateImport(tx, record.id, ["committing"], {
    state: "committed",
    committedBy: tx.scope.personId,
    committedAt: new Date(),
    progressDone: record.progressTotal,
    failure: null,
  });
  // Many days are marked now: they need not wait for the job of the next minute.
  await enqueue(tx, "rollup", { organisationId: tx.scope.organisationId });
}

/** What a person mapped by hand. A heading that stands twice cannot be remembered. */
function aliasesToRemember(record: ImportRecord) {
  const headings: MappedHeading[] = mappedHeadingSchema.array().parse(record.mapping.headings ?? []);
  const seen = new Map<string, number>();
  for (const { header } of headings)
    seen.set(rememberedKey(header), (seen.get(rememberedKey(header)) ?? 0) + 1);
  return Object.fromEntries(
    headings
      .filter(({ confidence, header }) => confidence === "person" && rememberedKey(header) !== "")
      .filter(({ header }) => seen.get(rememberedKey(header)) === 1)
      .map(({ header, key }) => [rememberedKey(header), key]),
  );
}

async function giveBack(scope: MemberScope, id: string, error: unknown) {
  const outdated =
    error instanceof PreviewOutdated ||
    error instanceof RecordsMoved ||
    collisions.has(sqlState(error) ?? "");
  if (!outdated) {
    log.error(
      { import: id, error: error instanceof Error ? error.name : "unknown", sqlState: sqlState(error) },
      "import failed",
    );
    const failure = "The import stopped half-way, and nothing of it was kept. Try again.";
    await write(scope, (tx) => updateImport(tx, id, ["committing"], { state: "previewed", failure }));
    return;
  }
  const failure =
    "Somebody changed records after this preview was made, so nothing was imported. This is the new preview.";
  await write(scope, (tx) => updateImport(tx, id, ["committing"], { state: "uploaded", failure }));
  await prepareImport(scope, id);
}
