import { importProgress } from "~/features/imports/imports.server";
import { apiLoader } from "~/middleware/handlers.server";

/** State of an import and how many of its rows are done, for the page that waits for it. */
export const loader = apiLoader(({ scope, id }) => importProgress(scope, id("import")));
