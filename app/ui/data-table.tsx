import {
  type ColumnDef,
  createSortedRowModel,
  rowSortingFeature,
  type SortFn,
  tableFeatures,
  useTable,
} from "@tanstack/react-table";
import { type ReactNode, useId, useMemo } from "react";
import { Link, useLocation } from "react-router";
import { joinClasses } from "./classes";

export type Column<Row> = {
  id: string;
  header: string;
  /** Drawn instead of the words of `header`, for example a `RateAxis`; such a head does not sort. */
  headerPicture?: ReactNode;
  /** What the column sorts by; nothing sorts last in both directions. */
  value?: (row: Row) => string | number | null | undefined;
  /** What the cell shows; the value unless given. */
  cell?: (row: Row) => ReactNode;
  numeric?: boolean;
  /** The one column that names its row. */
  rowHeader?: boolean;
  /** A column of `RateBar`s: no side padding, so that every bar lies on the one axis. */
  axis?: boolean;
};

type Props<Row> = {
  caption: ReactNode;
  /** Keep at module scope or memoised. */
  columns: Column<Row>[];
  rows: Row[];
  rowKey: (row: Row) => string;
  /** Words in place of rows when there are none. */
  empty: ReactNode;
  /** Search parameter that holds the order: `rate` ascending, `-rate` descending. One per table of a page. */
  sortParam?: string;
  defaultSort?: string;
  /** The rows arrive in the order of the address (a list in pages): only the heads show it. */
  sortedByServer?: boolean;
  csvHref?: string;
  captionHidden?: boolean;
};

const features = tableFeatures({ rowSortingFeature, sortedRowModel: createSortedRowModel() });
type Features = typeof features;

const collator = new Intl.Collator("en-GB", { numeric: true, sensitivity: "base" });

/** Numbers by size, words as a dictionary orders them, "under 9" before "under 12". */
function compareValues(a: unknown, b: unknown): number {
  if (typeof a === "number" && typeof b === "number") return a - b;
  return collator.compare(String(a), String(b));
}

function readSort(text: string | null | undefined) {
  if (!text) return null;
  return text.startsWith("-") ? { id: text.slice(1), desc: true } : { id: text, desc: false };
}

function useSortingColumns<Row extends object>(columns: Column<Row>[]) {
  return useMemo(() => {
    const byValue: SortFn<Features, Row> = (a, b, id) => compareValues(a.getValue(id), b.getValue(id));
    return columns.map(
      (column): ColumnDef<Features, Row, unknown> => ({
        id: column.id,
        header: column.header,
        accessorFn: (row) => column.value?.(row) ?? undefined,
        sortFn: byValue,
        sortUndefined: "last",
      }),
    );
  }, [columns]);
}

/** The head of a sortable column: a link, so that the order is in the address and needs no script. */
function SortLink<Row>(props: { column: Column<Row>; sort: ReturnType<typeof readSort>; param: string }) {
  const { column, sort, param } = props;
  const { search } = useLocation();
  const isCurrent = sort?.id === column.id;
  // Figures start with the largest, words with the first of the alphabet.
  const nextDescends = isCurrent ? !sort.desc : Boolean(column.numeric);
  const params = new URLSearchParams(search);
  params.set(param, `${nextDescends ? "-" : ""}${column.id}`);
  return (
    <Link
      to={{ search: params.toString() }}
      replace
      preventScrollReset
      className="inline-flex min-h-target items-center gap-1.5 text-inherit no-underline hover:text-ink hover:underline"
    >
      {column.header}
      <svg aria-hidden="true" viewBox="0 0 10 12" className="h-3 w-2.5 shrink-0 print:hidden">
        {isCurrent ? (
          <path d={sort.desc ? "M1 4l4 5 4-5z" : "M1 8l4-5 4 5z"} fill="currentColor" />
        ) : (
          <path d="M2 4.5 5 1.5l3 3M2 7.5l3 3 3-3" fill="none" stroke="currentColor" opacity="0.55" />
        )}
      </svg>
    </Link>
  );
}

const pad = (column: { axis?: boolean }) =>
  column.axis
    ? "axis-cell"
    : "px-3 first:pl-0 last:pr-0 lg:max-xl:px-2 lg:max-xl:first:pl-0 lg:max-xl:last:pr-0 print:px-1.5 print:first:pl-0 print:last:pr-0";

/**
 * A table with its caption, sortable by links and, on a narrow screen, scrolled sideways by finger or keys while
 * the column that names the rows stays. The numbers of every picture stand in one of these.
 */
export function DataTable<Row extends object>({ sortParam = "sort", ...props }: Props<Row>) {
  const { caption, columns, rows, rowKey, empty, defaultSort, sortedByServer = false, csvHref } = props;
  const captionId = useId();
  const { search } = useLocation();
  const asked = readSort(new URLSearchParams(search).get(sortParam));
  const known = asked && columns.some((column) => column.id === asked.id && column.value);
  const sort = known ? asked : readSort(defaultSort);
  const columnDefs = useSortingColumns(columns);
  const table = useTable({
    features,
    columns: columnDefs,
    data: rows,
    getRowId: rowKey,
    state: { sorting: sort ? [sort] : [] },
    manualSorting: sortedByServer,
  });

  return (
    <div className="my-6">
      {/* biome-ignore lint/a11y/useSemanticElements: a scrolled box is no section of the page */}
      <div
        role="region"
        aria-labelledby={captionId}
        // biome-ignore lint/a11y/noNoninteractiveTabindex: who has no pointer scrolls it with the arrow keys
        tabIndex={0}
        data-scroll
        className="overflow-x-auto lg:overflow-x-visible"
      >
        <table className="dense-table w-full border-collapse">
          <caption
            id={captionId}
            className={props.captionHidden ? "sr-only" : "pb-1 text-left font-semibold text-pretty"}
          >
            <span className="sticky left-0 inline-block max-w-[calc(100vw-2.5rem)]">{caption}</span>
          </caption>
          <thead className="sticky top-0 z-10 bg-chalk">
            <tr className="border-0 border-b border-edge">
              {columns.map((column) => (
                <th
                  key={column.id}
                  scope="col"
                  aria-sort={sort?.id === column.id ? (sort.desc ? "descending" : "ascending") : undefined}
                  className={joinClasses(
                    "py-1 align-bottom font-medium text-soft [overflow-wrap:normal]",
                    pad(column),
                    column.numeric ? "text-right" : "text-left",
                    column.rowHeader && "sticky left-0 bg-chalk lg:static",
                  )}
                >
                  {column.headerPicture ??
                    (column.value && rows.length > 1 ? (
                      <SortLink column={column} sort={sort} param={sortParam} />
                    ) : (
                      <span className="inline-flex min-h-target items-center">{column.header}</span>
                    ))}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {table.getRowModel().rows.map((row) => (
              <tr key={row.id} className="border-0 border-b border-line">
                {columns.map((column) => (
                  <BodyCell key={column.id} column={column} row={row.original} />
                ))}
              </tr>
            ))}
            {rows.length === 0 ? (
              <tr className="border-0 border-b border-line">
                <td colSpan={columns.length} className="py-4 text-soft">
                  {empty}
                </td>
              </tr>
            ) : null}
          </tbody>
        </table>
      </div>
      {csvHref && rows.length > 0 ? (
        <p className="print:hidden">
          <a
            href={csvHref}
            download
            className="inline-flex min-h-target items-center text-lagoon underline underline-offset-4"
          >
            Download this table (CSV)
          </a>
        </p>
      ) : null}
    </div>
  );
}

function BodyCell<Row>({ column, row }: { column: Column<Row>; row: Row }) {
  const content = column.cell ? column.cell(row) : (column.value?.(row) ?? "–");
  const classes = joinClasses(
    "py-2.5",
    pad(column),
    column.axis ? "align-middle" : "align-baseline",
    column.numeric ? "text-right whitespace-nowrap" : "text-left",
  );
  if (!column.rowHeader) return <td className={classes}>{content}</td>;
  return (
    <th
      scope="row"
      className={joinClasses(
        classes,
        "sticky left-0 max-w-[46vw] min-w-[8.5rem] bg-chalk font-normal lg:static lg:max-w-none print:min-w-[6rem]",
      )}
    >
      {content}
    </th>
  );
}
