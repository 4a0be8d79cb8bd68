import { z } from "zod";
import { searchOptions } from "~/features/roster/roster.server";
import { apiLoader } from "~/middleware/handlers.server";

const query = z.object({ q: z.string().max(100, "Search with at most 100 characters.").default("") });

/** Athletes whose name or number matches `q`, as options of a search field. */
export const loader = apiLoader(({ scope, url }) =>
  searchOptions(scope, query.parse(Object.fromEntries(url.searchParams)).q),
);
