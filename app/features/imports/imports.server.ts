import { audit } from "~/platform/audit.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { read, sqlState, type Tx, write } from "~db/client.server";
import type { ImportKind, ImportState, RowOutcome } from "~db/schema/codes";
import { openDoor } from "../accounts/doors.server";
import { may } from "../accounts/permissions";
import { type MemberScope, resolveMemberScope } from "../accounts/scope.server";
import { findOwnTeams } from "../accounts/viewing.server";
import { mergeAnswers } from "./answers.server";
import { commitImport } from "./commit.server";
import {
  deleteChunks,
  deleteRows,
  findDisplayName,
  findImport,
  findImportsWithRejectedRows,
  findRows,
  findSameFile,
  type ImportRecord,
  listImports,
  takeTurn,
  updateImport,
} from "./imports.queries.server";
import { answersSchema, mappedHeadingSchema, questionSchema, readingSchema } from "./imports.schema";
import { definitions } from "./kinds";
import { prepareImport } from "./prepare.server";
import {
  type Blocker,
  findLaterEdits,
  findLaterReferences,
  reachesOtherTeams,
  takeBack,
} from "./undo.queries.server";
import { enqueueWork, smallFileBytes, smallRowCount, uploadImport } from "./upload.server";

export { checkUploadLength } from "./upload.server";

const historyPageSize = 25;
export const rowsPageSize = 50;
const rejectedShownDays = 30;

function need(scope: MemberScope) {
  if (!may(scope.roles, "imports")) throw forbidden();
}

async function get(tx: Tx, id: string): Promise<ImportRecord> {
  const record = await findImport(tx, id);
  if (!record) throw notFound("This import");
  return record;
}

/** Takes in a file. @throws DomainError invalid for no file, too_large past the limit */
export async function upload(scope: MemberScope, kind: ImportKind, file: unknown) {
  need(scope);
  if (!(file instanceof File) || (file.name === "" && file.size === 0))
    throw new DomainError("invalid", "", { fields: { file: ["Choose the CSV file to import."] } });
  return uploadImport(scope, kind, file);
}

/** The imports that the person may see, newest first. */
export function listHistory(scope: MemberScope, page: number) {
  need(scope);
  return read(scope, async (tx) => ({
    ...(await listImports(tx, page, historyPageSize)),
    page,
    pageSize: historyPageSize,
  }));
}

/** For today's page: committed imports of the last 30 days whose rejected rows are still to be mended. */
export function listImportsWithRejectedRows(tx: Tx) {
  return findImportsWithRejectedRows(tx, rejectedShownDays);
}

export type RowsView = "rejected" | "update" | "create" | "unchanged" | "warned" | "doubtful";
const rowsViews: readonly RowsView[] = ["rejected", "update", "create", "unchanged", "warned", "doubtful"];

function rowsFilter(view: RowsView) {
  if (view === "warned") return { warned: true };
  if (view === "doubtful") return { doubtful: true };
  return { outcome: view as RowOutcome };
}

/** Everything the page of an import shows: its state, what was read, one page of rows of one kind. */
export function viewImport(scope: MemberScope, id: string, url: URL) {
  need(scope);
  return read(scope, async (tx) => {
    const record = await get(tx, id);
    const { counts } = record;
    const asked = rowsViews.find((view) => view === url.searchParams.get("rows"));
    const filled = (["rejected", "update", "warned", "create"] as const).find(
      (view) => (counts[view] ?? 0) > 0,
    );
    const view = asked ?? filled ?? "unchanged";
    const page = Math.max(1, Math.trunc(Number(url.searchParams.get("page")) || 1));
    const rows = await findRows(tx, id, rowsFilter(view), rowsPageSize, (page - 1) * rowsPageSize);
    const open = record.state === "previewed" && (counts.doubtful ?? 0) > 0;
    const doubts = open ? await findRows(tx, id, { doubtful: true }, rowsPageSize) : [];
    const reading = readingSchema.safeParse(record.reading);
    const definition = definitions[record.kind as ImportKind];
    return {
      id,
      kind: record.kind as ImportKind,
      state: record.state as ImportState,
      fileName: record.fileName,
      counts,
      failure: record.failure,
      progress: { done: record.progressDone, total: record.progressTotal },
      uploaded: { by: await findDisplayName(tx, record.createdBy), at: record.createdAt },
      committed: { by: await findDisplayName(tx, record.committedBy), at: record.committedAt },
      undone: { by: await findDisplayName(tx, record.undoneBy), at: record.undoneAt },
      reading: reading.success ? reading.data : null,
      headings: mappedHeadingSchema.array().parse(record.mapping.headings ?? []),
      columns: definition.columns.map(({ key, label, description }) => ({ key, label, description })),
      answers: answersSchema.parse(record.answers),
      questions: questionSchema.array().parse(record.questions),
      sameFile: (await findSameFile(tx, record.kind, record.fileHash, id)) ?? null,
      teams: await findOwnTeams(tx, scope),
      coversAll: scope.teams === "all",
      timeZone: scope.timeZone,
      rows: { view, page, pageSize: rowsPageSize, total: counts[view] ?? 0, items: rows.map(shownRow) },
      doubts: doubts.map(shownRow),
    };
  });
}

type FoundRow = Awaited<ReturnType<typeof findRows>>[number];
type Problem = {
  column: string;
  cell: string;
  reason: string;
  mend: string;
  candidates?: {
    id: string;
    name: string;
    number: string | null;
    dateOfBirth: string | null;
    sex: string;
    teams: string[];
  }[];
  separable?: boolean;
};

function shownRow({ line, cells, outcome, problems, changes, warnings }: FoundRow) {
  return {
    line,
    cells,
    outcome: outcome as RowOutcome,
    problems: problems as Problem[],
    changes: changes as { field: string; before: string | null; after: string | null }[],
    warnings: warnings as { column: string; cell: string; warning: string }[],
  };
}
export type ShownRow = ReturnType<typeof shownRow>;
export type ImportView = Awaited<ReturnType<typeof viewImport>>;

/** How far an import is, for polling. */
export function importProgress(scope: MemberScope, id: string) {
  need(scope);
  return read(scope, async (tx) => {
    const { state, progressDone, progressTotal } = await get(tx, id);
    return { state, done: progressDone, total: progressTotal };
  });
}

const answerable: readonly ImportState[] = ["needs_answers", "previewed"];

/** Takes a person's answers and reads the file again with them. Nothing is imported by this. */
export async function answerImport(scope: MemberScope, id: string, form: FormData) {
  need(scope);
  const small = await write(scope, async (tx) => {
    const record = await get(tx, id);
    const before = answersSchema.parse(record.answers);
    const reading = readingSchema.safeParse(record.reading);
    const shown = reading.success ? reading.data : null;
    const answers = mergeAnswers(before, shown, form, definitions[record.kind as ImportKind]);
    if (scope.teams !== "all") delete answers.teams;
    const patch = { state: "uploaded", answers, questions: [], failure: null, progressDone: 0 };
    if (!(await updateImport(tx, id, answerable, patch))) throw moved();
    await enqueueWork(tx, id);
    return record.fileSize <= smallFileBytes;
  });
  if (small) await prepareImport(scope, id);
}

/** Imports what the preview shows: a small file at once, a large one by the job. Pressing twice imports once. */
export async function requestCommit(scope: MemberScope, id: string) {
  need(scope);
  const inline = await write(scope, async (tx) => {
    const record = await get(tx, id);
    if (record.state === "committing" || record.state === "committed") return false;
    const patch = { state: "committing", failure: null, progressDone: 0, committedBy: scope.personId };
    if (!(await updateImport(tx, id, ["previewed"], patch))) {
      // Pressed twice: the first press is at work, or done.
      const { state } = await get(tx, id);
      if (state === "committing" || state === "committed") return false;
      throw moved();
    }
    await enqueueWork(tx, id);
    return (record.counts.rows ?? 0) <= smallRowCount;
  });
  if (inline) await commitImport(scope, id);
}

/** Ends an import that has not been carried out; its file and its rows are deleted. */
export function cancelImport(scope: MemberScope, id: string) {
  need(scope);
  return write(scope, async (tx) => {
    await get(tx, id);
    const from: ImportState[] = ["uploaded", "needs_answers", "previewed"];
    if (!(await updateImport(tx, id, from, { state: "cancelled", questions: [], counts: {} }))) throw moved();
    await deleteRows(tx, id);
    await deleteChunks(tx, id);
    await audit(tx, { action: "import.cancel", subjectId: id });
  });
}

/**
 * Takes an import back: what it made is deleted, what it changed is as it was. All or nothing.
 * @returns what stands in the way: records edited since, or used by others; empty when it is undone
 */
export async function undoImport(scope: MemberScope, id: string): Promise<Blocker[]> {
  need(scope);
  try {
    return await write(scope, async (tx) => {
      await takeTurn(tx, "commit");
      const record = await get(tx, id);
      if (record.state === "undone") return [];
      if (record.state !== "committed") throw moved();
      if (await reachesOtherTeams(tx, id)) throw forbidden();
      const edits = await findLaterEdits(tx, id);
      const blockers = edits.length > 0 ? edits : await findLaterReferences(tx, id);
      if (blockers.length > 0) return blockers;
      await takeBack(tx, id);
      const patch = { state: "undone", undoneBy: scope.personId, undoneAt: new Date() };
      await updateImport(tx, id, ["committed"], patch);
      await audit(tx, { action: `${record.kind}.undo-import`, subjectId: id });
      return [];
    });
  } catch (error) {
    if (sqlState(error) !== "23503") throw error;
    throw new DomainError(
      "conflict",
      "Records that you may not see refer to what this import made, so it cannot be undone. Nothing was changed.",
    );
  }
}

function moved() {
  return new DomainError(
    "conflict",
    "This import has moved on meanwhile, perhaps in another window. Load the page again.",
  );
}

/** The job of the queue: goes on where the import stands, in the scope its person has now. */
export async function runImportJob({ organisationId, importId, personId }: Record<string, string>) {
  if (!organisationId || !importId || !personId) return;
  const door = await openDoor("job", organisationId);
  const scope = await resolveMemberScope(personId, door.slug);
  if (!scope || !may(scope.roles, "imports")) {
    const failure =
      "Whoever started this import may no longer import, so it was stopped. Nothing of it was kept.";
    await write(door, (tx) =>
      updateImport(tx, importId, ["uploaded", "reading", "committing"], { state: "failed", failure }),
    );
    return;
  }
  await prepareImport(scope, importId);
  await commitImport(scope, importId);
}
