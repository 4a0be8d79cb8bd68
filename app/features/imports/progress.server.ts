import { type Scope, write } from "~db/client.server";
import { updateImport } from "./imports.queries.server";

/**
 * Notes how far the work on an import is, in a transaction of its own: the work's own one shows nothing until it
 * ends. Where no connection is free, the note is left out; the work matters more.
 */
export async function reportProgress(scope: Scope, id: string, done: number, total: number) {
  const note = { progressDone: done, progressTotal: total };
  await write(scope, (tx) => updateImport(tx, id, ["reading", "committing"], note)).catch(() => {});
}
