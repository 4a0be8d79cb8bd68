import { exportInjuries } from "~/features/injuries/list-injuries.server";
import { memberLoader } from "~/middleware/handlers.server";

/** The list under the filter of its address, as CSV. */
export const loader = memberLoader(async ({ scope, url }) => {
  const text = await exportInjuries(scope, url);
  return new Response(text, {
    headers: {
      "Content-Type": "text/csv; charset=utf-8",
      "Content-Disposition": `attachment; filename="injuries-${scope.today}.csv"`,
      "Cache-Control": "no-store",
    },
  });
});
