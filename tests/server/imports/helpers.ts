import { readFile } from "node:fs/promises";
import type { MemberScope } from "~/features/accounts/scope.server";
import { answerImport, requestCommit, upload, viewImport } from "~/features/imports/imports.server";
import type { ImportKind } from "~db/schema/codes";
import { maintenance } from "../../harness";

export const page = (search = "") => new URL(`http://localhost/imports/one${search}`);

export async function sampleFile(path: string) {
  const bytes = await readFile(new URL(`../../../imports/${path}`, import.meta.url));
  return new File([new Uint8Array(bytes)], path.split("/").at(-1) ?? "");
}

export const csvFile = (lines: string[], name = "file.csv") => new File([lines.join("\n")], name);

export function formOf(fields: Record<string, string>) {
  const form = new FormData();
  for (const [name, value] of Object.entries(fields)) form.set(name, value);
  return form;
}

/** Uploads and gives what the page shows. */
export async function uploadAndView(scope: MemberScope, kind: ImportKind, file: File) {
  const { id } = await upload(scope, kind, file);
  return viewImport(scope, id, page());
}

export async function answer(scope: MemberScope, id: string, fields: Record<string, string>) {
  await answerImport(scope, id, formOf(fields));
  return viewImport(scope, id, page());
}

export async function commit(scope: MemberScope, id: string) {
  await requestCommit(scope, id);
  return viewImport(scope, id, page());
}

/** Answers that make every team asked for. */
export function makeTeams(view: Awaited<ReturnType<typeof uploadAndView>>) {
  const fields: Record<string, string> = {};
  const asked = view.questions.find((question) => question.kind === "teams");
  (asked?.kind === "teams" ? asked.teams : []).forEach(({ key, name, guess }, at) => {
    Object.assign(fields, {
      [`team.${at}.key`]: key,
      [`team.${at}.name`]: name,
      [`team.${at}.decision`]: "create",
      [`team.${at}.sport`]: guess.sport ?? "other",
      [`team.${at}.sex`]: guess.sex ?? "mixed",
      [`team.${at}.underAge`]: String(guess.underAge ?? ""),
    });
  });
  return fields;
}

/** The whole way: upload, make the teams asked for, import. */
export async function importFile(
  scope: MemberScope,
  kind: ImportKind,
  file: File,
  extra: Record<string, string> = {},
) {
  const view = await uploadAndView(scope, kind, file);
  const ready =
    view.state === "needs_answers" ? await answer(scope, view.id, { ...makeTeams(view), ...extra }) : view;
  return commit(scope, ready.id);
}

const recordTables = [
  "teams",
  "athletes",
  "guardians",
  "guardianships",
  "roster_entries",
  "sessions",
  "participations",
  "warm_ups",
  "injuries",
];

/** Every row of the trade's tables, as text: for comparing before and after. */
export async function snapshot(organisationId: string) {
  const all: Record<string, string[]> = {};
  for (const table of recordTables) {
    const rows = await maintenance().unsafe(
      `select to_jsonb(t)::text as row from ${table} t where organisation_id = $1 order by 1`,
      [organisationId],
    );
    all[table] = rows.map(({ row }) => String(row));
  }
  return all;
}

export async function countRows(organisationId: string, table: string) {
  const [row] = await maintenance().unsafe(
    `select count(*)::int as n from ${table} where organisation_id = $1`,
    [organisationId],
  );
  return Number(row?.n);
}
