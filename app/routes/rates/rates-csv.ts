import { allSeasons } from "~/features/rates/csv-views.server";
import { fixedFilters } from "~/features/rates/filters";
import { fixedTablesOf, incidenceOf, seesRates } from "~/features/rates/rates.server";
import { type CsvContext, writeRatesCsv } from "~/features/rates/rates-csv";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import { notFound } from "~/platform/errors";
import type { Route } from "./+types/rates-csv";

/** The numbers of the page as a file, under the same filters and the same rules of small numbers. */
export const loader = memberLoader(async ({ scope, url }) => {
  if (!seesRates(scope)) {
    const { period, fixed } = await fixedTablesOf(scope, url);
    if (!period || !fixed) throw notFound("A season with rates");
    const tables = fixed.tables.map(({ by, rows, total }) => ({
      filters: fixedFilters(by),
      rows: [...rows, total],
    }));
    return answer(tables, { ...period, organisation: scope.organisationName, team: "all teams", ...fixed });
  }
  const { frame, data } = await loadRates(scope, url, async (tx, view) => ({
    ...(await incidenceOf(tx, view)),
    span: view.filters.by === "season" ? allSeasons(view, scope.today) : view.period,
    team: view.viewing.team?.name ?? (scope.teams === "all" ? "all teams" : "own teams"),
  }));
  if (!frame) throw notFound("A season with rates");
  const { rates, club, team, span } = data;
  const rows = [...rates.rows, rates.total, ...(club ? [club] : [])];
  const { organisation, filters } = frame;
  const context = { ...span, organisation, team, coverage: rates.coverage };
  return answer([{ filters, rows }], context);
}) satisfies (args: Route.LoaderArgs) => unknown;

function answer(tables: Parameters<typeof writeRatesCsv>[0], context: CsvContext) {
  const name = `rates-${context.season.replace(/[^A-Za-z0-9]+/g, "-")}.csv`;
  return new Response(writeRatesCsv(tables, context), {
    headers: {
      "Content-Type": "text/csv; charset=utf-8",
      "Content-Disposition": `attachment; filename="${name}"`,
      "Cache-Control": "no-store",
    },
  });
}
