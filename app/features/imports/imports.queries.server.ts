import { and, asc, count, desc, eq, gt, inArray, type SQL, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { importAliases, importChunks, importRows, imports, memberships, seasons } from "~db/schema";
import type { ImportKind, ImportState, RowOutcome } from "~db/schema/codes";

const org = (tx: Tx) => tx.scope.organisationId;
const here = (tx: Tx, id: string) => and(eq(imports.organisationId, org(tx)), eq(imports.id, id));

/** A file may be about every team: who covers listed teams sees their own imports only. A job sees all. */
function visible({ scope }: Tx): SQL | undefined {
  if (scope.teams === "all") return undefined;
  return scope.personId ? eq(imports.createdBy, scope.personId) : sql`false`;
}

export type ImportRecord = typeof imports.$inferSelect;
export type StagedRow = typeof importRows.$inferInsert;

/** Longer than a request may take: reading and importing a large file. */
export async function allowLongWork(tx: Tx) {
  await tx.execute(sql`select
    set_config('statement_timeout', '600000', true),
    set_config('idle_in_transaction_session_timeout', '600000', true),
    set_config('lock_timeout', '20000', true)`);
}

/** One at a time, until the transaction ends: the imports of an organisation, or the work on one of them. */
export async function takeTurn(tx: Tx, what: string) {
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`imports ${org(tx)} ${what}`}, 0))`);
}

export async function insertImport(
  tx: Tx,
  row: { id: string; kind: ImportKind; fileName: string; fileHash: string; fileSize: number },
) {
  await tx.insert(imports).values({
    organisationId: org(tx),
    state: "uploaded",
    reading: {},
    mapping: {},
    answers: {},
    questions: [],
    counts: {},
    createdBy: tx.scope.personId,
    ...row,
  });
}

export async function insertChunk(tx: Tx, importId: string, position: number, bytes: Uint8Array) {
  await tx.insert(importChunks).values({ organisationId: org(tx), importId, position, bytes });
}

export async function findChunk(tx: Tx, importId: string, position: number) {
  const [row] = await tx
    .select({ bytes: importChunks.bytes })
    .from(importChunks)
    .where(
      and(
        eq(importChunks.organisationId, org(tx)),
        eq(importChunks.importId, importId),
        eq(importChunks.position, position),
      ),
    );
  return row?.bytes;
}

export async function deleteChunks(tx: Tx, importId: string) {
  await tx
    .delete(importChunks)
    .where(and(eq(importChunks.organisationId, org(tx)), eq(importChunks.importId, importId)));
}

export async function findImport(tx: Tx, id: string): Promise<ImportRecord | undefined> {
  const [row] = await tx
    .select()
    .from(imports)
    .where(and(here(tx, id), visible(tx)));
  return row;
}

export type ImportPatch = Partial<
  Omit<ImportRecord, "organisationId" | "id" | "createdAt" | "createdBy" | "kind" | "fileHash" | "fileSize">
>;

/**
 * Changes an import that is in one of these states.
 * @returns false when it is in another state by now
 */
export async function updateImport(tx: Tx, id: string, from: readonly ImportState[], patch: ImportPatch) {
  const changed = await tx
    .update(imports)
    .set(patch)
    .where(and(here(tx, id), inArray(imports.state, [...from])))
    .returning({ id: imports.id });
  return changed.length > 0;
}

/** The newest import of the same bytes that has been committed and not undone. */
export async function findSameFile(tx: Tx, kind: string, fileHash: string, otherThan: string) {
  const [row] = await tx
    .select({ id: imports.id, fileName: imports.fileName, committedAt: imports.committedAt })
    .from(imports)
    .where(
      and(
        eq(imports.organisationId, org(tx)),
        eq(imports.kind, kind),
        eq(imports.fileHash, fileHash),
        eq(imports.state, "committed"),
        sql`${imports.id} <> ${otherThan}::uuid`,
        visible(tx),
      ),
    )
    .orderBy(desc(imports.committedAt))
    .limit(1);
  return row;
}

export async function listImports(tx: Tx, page: number, pageSize: number) {
  const where = and(eq(imports.organisationId, org(tx)), visible(tx));
  const rows = await tx
    .select({
      id: imports.id,
      kind: imports.kind,
      state: imports.state,
      fileName: imports.fileName,
      counts: imports.counts,
      createdAt: imports.createdAt,
      by: memberships.displayName,
    })
    .from(imports)
    .leftJoin(
      memberships,
      and(
        eq(memberships.organisationId, imports.organisationId),
        eq(memberships.personId, imports.createdBy),
      ),
    )
    .where(where)
    .orderBy(desc(imports.createdAt), desc(imports.id))
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  const [total] = await tx.select({ rows: count() }).from(imports).where(where);
  return { rows, total: total?.rows ?? 0 };
}

/** Committed in the last days with rejected rows, unless a later import of a file of that name mended them. */
export async function findImportsWithRejectedRows(tx: Tx, days: number) {
  return tx
    .select({
      id: imports.id,
      kind: imports.kind,
      fileName: imports.fileName,
      committedAt: imports.committedAt,
      rejected: sql<number>`(${imports.counts} ->> 'rejected')::int`,
    })
    .from(imports)
    .where(
      and(
        eq(imports.organisationId, org(tx)),
        eq(imports.state, "committed"),
        visible(tx),
        sql`(${imports.counts} ->> 'rejected')::int > 0`,
        sql`${imports.committedAt} > now() - make_interval(days => ${days})`,
        sql`not exists (
          select 1 from imports later
          where later.organisation_id = ${imports.organisationId} and later.kind = ${imports.kind}
            and later.file_name = ${imports.fileName} and later.state = 'committed'
            and later.committed_at > ${imports.committedAt})`,
      ),
    )
    .orderBy(desc(imports.committedAt));
}

export async function findDisplayName(tx: Tx, personId: string | null) {
  if (!personId) return null;
  const [row] = await tx
    .select({ name: memberships.displayName })
    .from(memberships)
    .where(and(eq(memberships.organisationId, org(tx)), eq(memberships.personId, personId)));
  return row?.name ?? null;
}

/** What the organisation confirmed about headings before; null: left out. */
export async function findAliases(tx: Tx, kind: string): Promise<Record<string, string | null>> {
  const rows = await tx
    .select({ headerKey: importAliases.headerKey, columnKey: importAliases.columnKey })
    .from(importAliases)
    .where(and(eq(importAliases.organisationId, org(tx)), eq(importAliases.kind, kind)));
  return Object.fromEntries(rows.map(({ headerKey, columnKey }) => [headerKey, columnKey || null]));
}

/** An empty column key remembers "left out". */
export async function rememberAliases(tx: Tx, kind: string, aliases: Record<string, string | null>) {
  const values = Object.entries(aliases).map(([headerKey, columnKey]) => ({
    organisationId: org(tx),
    kind,
    headerKey,
    columnKey: columnKey ?? "",
    setBy: tx.scope.personId,
  }));
  if (values.length === 0) return;
  await tx
    .insert(importAliases)
    .values(values)
    .onConflictDoUpdate({
      target: [importAliases.organisationId, importAliases.kind, importAliases.headerKey],
      set: { columnKey: sql`excluded.column_key`, setBy: sql`excluded.set_by`, setAt: sql`now()` },
    });
}

export async function deleteRows(tx: Tx, importId: string) {
  await tx
    .delete(importRows)
    .where(and(eq(importRows.organisationId, org(tx)), eq(importRows.importId, importId)));
}

/** Stages rows in one statement: one array per column. */
export async function insertRows(
  tx: Tx,
  importId: string,
  rows: readonly Omit<StagedRow, "organisationId" | "importId">[],
) {
  if (rows.length === 0) return;
  await tx.execute(sql`
    insert into import_rows (organisation_id, import_id, line, cells, value, outcome, problems, changes, warnings)
    select ${org(tx)}::uuid, ${importId}::uuid, r.line, r.cells, r.value, r.outcome, r.problems, r.changes, r.warnings
    from jsonb_to_recordset(${JSON.stringify(rows)}::jsonb) as r
      (line int, cells jsonb, value jsonb, outcome text, problems jsonb, changes jsonb, warnings jsonb)`);
}

/** Adds warnings to rows that are staged already: the rows are taken out and put back, since none may be changed. */
export async function addWarnings(tx: Tx, importId: string, byLine: Record<string, unknown[]>) {
  if (Object.keys(byLine).length === 0) return;
  await tx.execute(sql`
    with extra as (
      select e.key::int as line, e.value as warnings from jsonb_each(${JSON.stringify(byLine)}::jsonb) e
    ), gone as (
      delete from import_rows r using extra
      where r.organisation_id = ${org(tx)}::uuid and r.import_id = ${importId}::uuid and r.line = extra.line
      returning r.*, extra.warnings as more
    )
    insert into import_rows (organisation_id, import_id, line, cells, value, outcome, problems, changes, warnings)
    select organisation_id, import_id, -line, cells, value, outcome, problems, changes, warnings || more from gone`);
  await tx.execute(sql`
    with gone as (
      delete from import_rows
      where organisation_id = ${org(tx)}::uuid and import_id = ${importId}::uuid and line < 0 returning *
    )
    insert into import_rows (organisation_id, import_id, line, cells, value, outcome, problems, changes, warnings)
    select organisation_id, import_id, -line, cells, value, outcome, problems, changes, warnings from gone`);
}

/** The staged rows that would be imported, in the order of the file. */
export async function findStagedRows(tx: Tx, importId: string, afterLine: number, limit: number) {
  return tx
    .select({ line: importRows.line, value: importRows.value, outcome: importRows.outcome })
    .from(importRows)
    .where(
      and(
        eq(importRows.organisationId, org(tx)),
        eq(importRows.importId, importId),
        gt(importRows.line, afterLine),
        sql`${importRows.value} is not null`,
      ),
    )
    .orderBy(asc(importRows.line))
    .limit(limit);
}

export async function findRows(
  tx: Tx,
  importId: string,
  filter: { outcome?: RowOutcome; warned?: boolean; doubtful?: boolean; afterLine?: number },
  limit: number,
  offset = 0,
) {
  const where = and(
    eq(importRows.organisationId, org(tx)),
    eq(importRows.importId, importId),
    filter.outcome ? eq(importRows.outcome, filter.outcome) : undefined,
    filter.warned
      ? sql`jsonb_array_length(${importRows.warnings}) > 0 and ${importRows.outcome} <> 'rejected'`
      : undefined,
    filter.doubtful ? sql`${importRows.problems} -> 0 ? 'candidates'` : undefined,
    filter.afterLine === undefined ? undefined : gt(importRows.line, filter.afterLine),
  );
  return tx.select().from(importRows).where(where).orderBy(asc(importRows.line)).limit(limit).offset(offset);
}

/** The latest season that has begun, and every season's days. */
export async function findSeasons(tx: Tx) {
  return tx
    .select({ startsOn: seasons.startsOn, endsOn: seasons.endsOn })
    .from(seasons)
    .where(eq(seasons.organisationId, org(tx)))
    .orderBy(desc(seasons.startsOn));
}
