import { type CsvValue, writeCsv } from "~/platform/csv";
import { notFound } from "~/platform/errors";
import { read } from "~db/client.server";
import type { MemberScope } from "../accounts/scope.server";
import { findImport, findRows } from "./imports.queries.server";

const pageSize = 5000;
const outcomeWords = {
  create: "new",
  update: "changed",
  unchanged: "unchanged",
  rejected: "rejected",
} as const;
type Told = {
  column?: string;
  cell?: string;
  reason?: string;
  mend?: string;
  warning?: string;
  field?: string;
  before?: string | null;
  after?: string | null;
};

/**
 * The report of an import: one line per row of the file and thing to say about it, with the row's own cells at the
 * end, so that the rejected ones can be mended and imported.
 * @returns the CSV as a stream, page by page, each in a transaction of its own
 */
export async function openReport(scope: MemberScope, id: string) {
  const record = await read(scope, (tx) => findImport(tx, id));
  const headings = record?.mapping.headings;
  if (!record || !Array.isArray(headings)) throw notFound("This report");
  const header = headings.map((heading: { header: string }) => heading.header);
  const encoder = new TextEncoder();
  let afterLine = 0;
  const columns = ["Line", "Outcome", "Column", "Cell", "Reason", "What to do", "Before", "After", ...header];
  let text = writeCsv([columns], { bom: true });
  const stream = new ReadableStream<Uint8Array>({
    async pull(controller) {
      if (text) controller.enqueue(encoder.encode(text));
      const rows = await read(scope, (tx) => findRows(tx, id, { afterLine }, pageSize));
      text = writeCsv(rows.flatMap(reportRow));
      afterLine = rows.at(-1)?.line ?? afterLine;
      if (rows.length === 0) controller.close();
    },
  });
  return { stream, fileName: `${record.fileName.replace(/\.[^.]*$/u, "")} - report.csv` };
}

function reportRow({
  line,
  outcome,
  cells,
  problems,
  changes,
  warnings,
}: Awaited<ReturnType<typeof findRows>>[number]) {
  const word = outcomeWords[outcome as keyof typeof outcomeWords];
  const told: CsvValue[][] = [
    ...(problems as Told[]).map((one) => [one.column, one.cell, one.reason, one.mend, "", ""]),
    ...(changes as Told[]).map((one) => [one.field, "", "", "", one.before ?? "", one.after ?? ""]),
    ...(warnings as Told[]).map((one) => [
      one.column,
      one.cell,
      one.warning,
      "Have a look; it is imported.",
      "",
      "",
    ]),
  ];
  const lines = told.length > 0 ? told : [["", "", "", "", "", ""]];
  return lines.map((one): CsvValue[] => [line, word, ...one, ...cells]);
}
