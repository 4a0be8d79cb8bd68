import { Link, useLocation } from "react-router";
import { Pager } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import type { ImportView, RowsView, ShownRow } from "../imports.server";

type Line = {
  key: string;
  line: number;
  who: string;
  column: string;
  cell: string;
  says: string;
  mend: string;
  before: string;
  after: string;
};

/** The first filled cells, enough to recognise a row. */
const rowWords = (cells: readonly string[], most: number) =>
  cells
    .filter((cell) => cell.trim() !== "")
    .slice(0, most)
    .join(", ");

function linesOf(view: RowsView, row: ShownRow): Line[] {
  const base = {
    line: row.line,
    who: rowWords(row.cells, view === "create" || view === "unchanged" ? 8 : 3),
    column: "",
    cell: "",
    says: "",
    mend: "",
    before: "",
    after: "",
  };
  const parts: Partial<Line>[] =
    view === "rejected" || view === "doubtful"
      ? row.problems.map(({ column, cell, reason, mend }) => ({ column, cell, says: reason, mend }))
      : view === "update"
        ? row.changes.map(({ field, before, after }) => ({
            column: field,
            before: before ?? "nothing",
            after: after ?? "nothing",
          }))
        : view === "warned"
          ? row.warnings.map(({ column, cell, warning }) => ({ column, cell, says: warning }))
          : [{}];
  return parts.map((part, index) => ({ ...base, ...part, key: `${row.line}-${index}` }));
}

const named: Column<Line> = {
  id: "line",
  header: "Line",
  rowHeader: true,
  cell: (row) => (
    <>
      {row.line}
      <span className="block break-words text-soft">{row.who}</span>
    </>
  ),
};
const bare: Column<Line>[] = [
  { id: "line", header: "Line", rowHeader: true, cell: (row) => row.line },
  { id: "who", header: "Row", cell: (row) => <span className="break-words">{row.who}</span> },
];
const said: Column<Line>[] = [
  named,
  {
    id: "says",
    header: "Why, and what to do",
    cell: (row) => (
      <span className="block min-w-[11.5rem]">
        {row.says} <span className="text-soft">{row.mend}</span>
      </span>
    ),
  },
  { id: "column", header: "Column", cell: (row) => row.column || "whole row" },
  { id: "cell", header: "Cell", cell: (row) => <Cell text={row.cell} /> },
];
const changed: Column<Line>[] = [
  named,
  { id: "column", header: "What", cell: (row) => row.column },
  { id: "before", header: "Old", cell: (row) => row.before },
  { id: "after", header: "New", cell: (row) => <strong className="font-medium">{row.after}</strong> },
];

function Cell({ text }: { text: string }) {
  if (text.trim() === "") return <span className="text-soft">empty</span>;
  return <span className="block max-w-[18rem] break-words">{text}</span>;
}

const columnsOf: Record<RowsView, Column<Line>[]> = {
  rejected: said,
  doubtful: said,
  warned: said,
  update: changed,
  create: bare,
  unchanged: bare,
};
const viewWords: Record<RowsView, string> = {
  rejected: "rejected",
  update: "changed",
  warned: "to look at",
  create: "new",
  unchanged: "unchanged",
  doubtful: "doubtful",
};
const captions: Record<RowsView, string> = {
  rejected: "Rejected rows",
  update: "Rows that change something",
  warned: "Rows to look at",
  create: "New rows",
  unchanged: "Unchanged rows",
  doubtful: "Doubtful rows",
};
const offered: RowsView[] = ["rejected", "update", "warned", "create", "unchanged"];

/** The rows of a file by what becomes of them, a page at a time; the choice is in the address. */
export function RowsTable({ view }: { view: ImportView }) {
  const { rows, counts } = view;
  const { search } = useLocation();
  const linkTo = (target: RowsView) => {
    const params = new URLSearchParams(search);
    params.set("rows", target);
    params.delete("page");
    return { search: params.toString() };
  };
  return (
    <>
      <p className="flex flex-wrap gap-x-6">
        {offered
          .filter((one) => (counts[one] ?? 0) > 0)
          .map((one) => (
            <Link
              key={one}
              to={linkTo(one)}
              preventScrollReset
              aria-current={one === rows.view ? "true" : undefined}
              className="inline-flex min-h-target items-center text-lagoon underline underline-offset-4 aria-[current]:font-semibold aria-[current]:text-ink aria-[current]:no-underline"
            >
              {(counts[one] ?? 0).toLocaleString("en-GB")} {viewWords[one]}
            </Link>
          ))}
      </p>
      <DataTable
        caption={captions[rows.view]}
        columns={columnsOf[rows.view]}
        rows={rows.items.flatMap((row) => linesOf(rows.view, row))}
        rowKey={(row) => row.key}
        empty="No rows."
      />
      {rows.total > rows.pageSize ? (
        <Pager page={rows.page} pageSize={rows.pageSize} total={rows.total} what="rows" />
      ) : null}
    </>
  );
}
