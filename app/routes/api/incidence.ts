import { parseRatesQuery } from "~/features/rates/rates.schema";
import { incidenceOf } from "~/features/rates/rates.server";
import { incidenceJson } from "~/features/rates/rates-json";
import { openView } from "~/features/rates/view.server";
import { apiLoader } from "~/middleware/handlers.server";
import { read } from "~db/client.server";

/** Incidence with its intervals: the same parameters as in the page's address. */
export const loader = apiLoader(async ({ scope, url }) => {
  const query = parseRatesQuery(url.searchParams, { strict: true });
  return read(scope, async (tx) => {
    const view = await openView(tx, url, query);
    return incidenceJson(view, view && (await incidenceOf(tx, view)), query);
  });
});
