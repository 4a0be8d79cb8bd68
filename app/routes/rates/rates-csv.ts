import { fixedFilters } from "~/features/rates/filters";

import { parseRatesQuery } from "~/features/rates/rates.schema";
import { fixedTablesOf, incidenceOf, seesRates } from "~/features/rates/rates.server";
import { type CsvContext, writeRatesCsv } from "~/features/rates/rates-csv";
import { memberLoader } from "~/middleware/handlers.server";
import { notFound } from "~/platform/errors";
import { read } from "~db/client.server";
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
  const filters = parseRatesQuery(url.searchParams);
  const { viewing, period, rates, club } = await read(scope, (tx) => incidenceOf(tx, url, filters));
  if (!period || !rates) throw notFound("A season with rates");
  const team = viewing.team?.name ?? (scope.teams === "all" ? "all teams" : "own teams");
  const rows = [...rates.rows, rates.total, ...(club ? [club] : [])];
  const { coverage } = rates;
  return answer([{ filters, rows }], { ...period, organisation: scope.organisationName, team, coverage });
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
