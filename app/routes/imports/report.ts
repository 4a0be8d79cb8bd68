import { openReport } from "~/features/imports/report.server";
import { memberLoader } from "~/middleware/handlers.server";

/** What happened to each row, as CSV. */
export const loader = memberLoader(async ({ scope, id }) => {
  const { stream, fileName } = await openReport(scope, id("import"));
  return new Response(stream, {
    headers: {
      "Content-Type": "text/csv; charset=utf-8",
      "Content-Disposition": `attachment; filename="import-report.csv"; filename*=UTF-8''${encodeURIComponent(fileName)}`,
      "Cache-Control": "no-store",
    },
  });
});
