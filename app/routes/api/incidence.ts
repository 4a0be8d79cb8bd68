import { parseRatesQuery } from "~/features/rates/rates.schema";
import { incidenceOf } from "~/features/rates/rates.server";
import { incidenceJson } from "~/features/rates/rates-json";
import { apiLoader } from "~/middleware/handlers.server";
import { read } from "~db/client.server";

/** Incidence with its intervals: `injuries`, `sessions`, `by`, `per`, `season`, `team`, as in the page's address. */
export const loader = apiLoader(async ({ scope, url }) => {
  const filters = parseRatesQuery(url.searchParams, { strict: true });
  return incidenceJson(await read(scope, (tx) => incidenceOf(tx, url, filters)), filters);
});
