import { coverageOf } from "~/features/rates/coverage";
import { tableOf } from "~/features/rates/csv-views.server";
import { tallySessions } from "~/features/rates/rates.queries.server";
import { writeTableCsv } from "~/features/rates/tables";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import { notFound } from "~/platform/errors";
import type { Route } from "./+types/view-csv";

/** One table of a view of rates as a file, under the same filters. */
export const loader = memberLoader(async ({ scope, url, params }) => {
  const name = { view: params.view ?? "", table: params.table ?? "" };
  const { frame, data } = await loadRates(scope, url, async (tx, view) => ({
    table: await tableOf(tx, view, url, name),
    coverage: coverageOf(await tallySessions(tx, { ...view.period, teamIds: view.teamIds })),
    team: view.viewing.team?.name ?? (scope.teams === "all" ? "all teams" : "own teams"),
  }));
  if (!frame) throw notFound("A season with rates");
  const { organisation, season, from, to, filters } = frame;
  const text = writeTableCsv(data.table, {
    ...{ organisation, season, from, to, filters },
    team: data.team,
    coverage: data.coverage,
  });
  const file = [name.view, name.table, season].join("-").replace(/[^A-Za-z0-9]+/g, "-");
  return new Response(text, {
    headers: {
      "Content-Type": "text/csv; charset=utf-8",
      "Content-Disposition": `attachment; filename="${file}.csv"`,
      "Cache-Control": "no-store",
    },
  });
}) satisfies (args: Route.LoaderArgs) => unknown;
