import { notFound } from "~/platform/errors";
import type { Tx } from "~db/client.server";
import { coverageViewOf } from "./coverage-view.server";
import type { TableData } from "./tables";
import type { RatesView } from "./view.server";

/** The tables of each view, for their files: the same functions as the pages', so that both say the same. */
type TablesOf = (tx: Tx, view: RatesView, url: URL) => Promise<readonly TableData[]>;

const views: Record<string, TablesOf> = {
  coverage: async (tx, view) => (await coverageViewOf(tx, view)).tables,
};

/**
 * One table of a view.
 * @throws DomainError not_found for a view or a table that there is not
 */
export async function tableOf(tx: Tx, view: RatesView, url: URL, name: { view: string; table: string }) {
  const tables = Object.hasOwn(views, name.view) ? await views[name.view]?.(tx, view, url) : undefined;
  const table = tables?.find(({ id }) => id === name.table);
  if (!table) throw notFound("That table");
  return table;
}
