import { tableFileOf } from "~/features/rates/csv-views.server";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import { notFound } from "~/platform/errors";
import type { Route } from "./+types/view-csv";

/** One table of a view of rates as a file, under the same filters. */
export const loader = memberLoader(async ({ scope, url, params }) => {
  const name = { view: params.view ?? "", table: params.table ?? "" };
  const { data } = await loadRates(scope, url, (tx, view) => tableFileOf(tx, view, url, name));
  if (!data) throw notFound("A season with rates");
  return new Response(data.text, {
    headers: {
      "Content-Type": "text/csv; charset=utf-8",
      "Content-Disposition": `attachment; filename="${data.name}"`,
      "Cache-Control": "no-store",
    },
  });
}) satisfies (args: Route.LoaderArgs) => unknown;
