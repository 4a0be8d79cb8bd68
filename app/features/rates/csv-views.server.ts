import { notFound } from "~/platform/errors";
import type { Tx } from "~db/client.server";
import { bodyAreasViewOf } from "./body-areas/body-areas-view.server";
import { comparisonsViewOf } from "./comparisons/comparisons-view.server";
import { coverageOf } from "./coverage";
import { coverageViewOf } from "./coverage/coverage-view.server";
import { prevalenceViewOf } from "./prevalence/prevalence-view.server";
import { programmeViewOf } from "./programme/programme-view.server";
import { tallySessions } from "./rates.queries.server";
import { recentWeeksViewOf } from "./recent-weeks/recent-weeks-view.server";
import { severityViewOf } from "./severity/severity-view.server";
import { type TableData, writeTableCsv } from "./tables";
import { teamRatesViewOf } from "./teams/team-rates-view.server";
import { trendsViewOf } from "./trends/trends-view.server";
import type { RatesView } from "./view.server";

/** The tables of each view, for their files: the same functions as the pages', so that both say the same. */
type TablesOf = (tx: Tx, view: RatesView, url: URL) => Promise<readonly TableData[]>;

const views: Record<string, TablesOf> = {
  severity: async (tx, view, url) => Object.values((await severityViewOf(tx, view, url)).tables),
  prevalence: async (tx, view, url) => Object.values((await prevalenceViewOf(tx, view, url)).tables),
  "body-areas": async (tx, view, url) => Object.values((await bodyAreasViewOf(tx, view, url)).tables),
  coverage: async (tx, view) => (await coverageViewOf(tx, view)).tables,
  comparisons: async (tx, view, url) => (await comparisonsViewOf(tx, view, url)).tables,
  trends: async (tx, view) => (await trendsViewOf(tx, view)).tables,
  teams: async (tx, view) => (await teamRatesViewOf(tx, view)).tables,
  programme: async (tx, view, url) => (await programmeViewOf(tx, view, url)).tables,
  "recent-weeks": async (tx, view) => (await recentWeeksViewOf(tx, view)).tables,
};

/**
 * One table of a view as a file: its name and its text.
 * @throws DomainError not_found for a view or a table that there is not
 */
export async function tableFileOf(
  tx: Tx,
  view: RatesView,
  url: URL,
  name: { view: string; table: string },
): Promise<{ name: string; text: string }> {
  const tables = Object.hasOwn(views, name.view) ? await views[name.view]?.(tx, view, url) : undefined;
  const table = tables?.find(({ id }) => id === name.table);
  if (!table) throw notFound("That table");
  const { period, filters, viewing, organisation } = view;
  const text = writeTableCsv(table, {
    ...period,
    organisation,
    filters,
    team: viewing.team?.name ?? (tx.scope.teams === "all" ? "all teams" : "own teams"),
    coverage: coverageOf(await tallySessions(tx, { ...period, teamIds: view.teamIds })),
  });
  const file = [name.view, name.table, period.season].join("-").replace(/[^A-Za-z0-9]+/g, "-");
  return { name: `${file}.csv`, text };
}
