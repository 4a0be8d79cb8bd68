import { memberLoader } from "~/middleware/handlers.server";
import { notFound } from "~/platform/errors";
import exposure from "~imports/exposure/template.csv?raw";
import headcount from "~imports/exposure/template-by-headcount.csv?raw";
import roster from "~imports/roster/template.csv?raw";

const templates = new Map([
  ["roster", roster],
  ["exposure", exposure],
  ["exposure-by-headcount", headcount],
]);

/** An empty file of the right shape with one example row. The mark at its start lets spreadsheets read accents. */
export const loader = memberLoader(async ({ params }) => {
  const text = templates.get(params.kind ?? "");
  if (text === undefined) throw notFound("This template");
  return new Response(`\uFEFF${text}`, {
    headers: {
      "Content-Type": "text/csv; charset=utf-8",
      "Content-Disposition": `attachment; filename="${params.kind}-template.csv"`,
    },
  });
});
