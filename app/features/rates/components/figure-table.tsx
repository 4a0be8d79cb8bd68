import { useMemo } from "react";
import { Link, useLocation } from "react-router";
import { formatTick, type NiceScale, niceScale, RateAxis, RateBar } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import { decimalsFor, formatCount, formatRate, formatRatio } from "../figures";
import { medianUpper } from "../picture";
import {
  type Cell,
  type Figure,
  isFigure,
  reasonOf,
  type TableColumn,
  type TableData,
  type TableRow,
} from "../tables";
import { searchWith } from "../views";

type FigureColumn = Extract<TableColumn, { kind: "figure" }>;

const dash = <span className="text-soft">–</span>;
const totalSeries = 5;
/** Shares on an axis whose halves and quarters are lines. */
const shareScale: NiceScale = { max: 100, ticks: [0, 25, 50, 75, 100] };

/** How the figures of a column are written: their decimals are those of its largest estimate. */
function writerOf({ form, decimals: own }: FigureColumn, figures: readonly Figure[]) {
  if (own !== undefined) return (value: number) => value.toFixed(own);
  if (form === "ratio") return formatRatio;
  if (form === "share") return (value: number) => `${Math.round(value * 100)} %`;
  const decimals = decimalsFor(figures.map(({ estimate }) => Math.abs(estimate)));
  return (value: number) => formatRate(value, decimals).replace("-", "−");
}

const figuresOf = (column: TableColumn, rows: readonly TableRow[]) =>
  rows.flatMap(({ cells }) => {
    const cell = cells[column.id];
    return isFigure(cell) ? [cell] : [];
  });

/** The end of a column's axis: made for its stable figures, so that one wild interval does not flatten the others. */
function scaleOf(figures: readonly Figure[]): NiceScale {
  const reach = (list: readonly Figure[]) =>
    Math.max(0, ...list.flatMap(({ upper }) => (upper !== null && Number.isFinite(upper) ? upper : [])));
  const stable = reach(figures.filter(({ unstable }) => !unstable));
  const all = reach(figures);
  const fit = stable > 0 ? stable : medianUpper(figures.map(({ upper }) => upper ?? 0));
  return niceScale(Math.min(all, fit * 2), 4);
}

function intervalText({ lower, upper }: Figure, write: (value: number) => string) {
  if (lower === null || upper === null) return "no interval";
  return upper === Infinity ? `${write(lower)}, no upper limit` : `${write(lower)} to ${write(upper)}`;
}

/** A sign of per cent stays with its number. */
const unbroken = (words: string) => words.replaceAll(" %", "\u00a0%");

function plainCell(column: TableColumn, cell: Cell | undefined) {
  const reason = reasonOf(cell);
  if (reason) return <span className="text-soft">{unbroken(reason)}</span>;
  if (cell === null || cell === undefined || typeof cell === "object") return dash;
  if (typeof cell === "string") return unbroken(cell);
  if (column.kind === "number") return cell.toFixed(column.decimals);
  if (column.kind === "percent") return `${(column.down ? Math.floor : Math.round)(cell * 100)} %`;
  return formatCount(cell);
}

const sortValue = (cell: Cell | undefined) => {
  if (isFigure(cell)) return cell.estimate;
  return typeof cell === "object" ? null : cell;
};

function figureColumns(column: FigureColumn, rows: readonly TableRow[]): Column<TableRow>[] {
  const figures = figuresOf(column, rows);
  const write = writerOf(column, figures);
  const at = (row: TableRow) => row.cells[column.id];
  const interval = (row: TableRow) => {
    const cell = at(row);
    if (isFigure(cell))
      return (
        <span className="whitespace-nowrap">
          {intervalText(cell, write)}
          {cell.unstable && !column.bar ? <span className="text-soft">, unstable</span> : null}
        </span>
      );
    return plainCell(column, cell);
  };
  const columns: Column<TableRow>[] = [
    {
      id: column.id,
      header: column.header,
      numeric: true,
      value: (row) => (row.total ? undefined : sortValue(at(row))),
      cell: (row) => {
        const cell = at(row);
        return isFigure(cell) ? write(cell.estimate) : dash;
      },
    },
    { id: `${column.id}-interval`, header: "95 % interval", cell: interval },
  ];
  if (!column.bar) return columns;
  const scale = column.form === "share" ? shareScale : scaleOf(figures);
  return [
    ...columns,
    {
      id: `${column.id}-bar`,
      header: column.unit,
      axis: true,
      headerPicture: <RateAxis scale={scale} label={axisWords(column, scale)} />,
      cell: (row) => <BarCell row={row} cell={at(row)} scale={scale} column={column} />,
    },
  ];
}

/** What the axis measures, its unit once: "Rate, per 1000 hours, from 0 to 80". */
const axisWords = ({ header, unit }: FigureColumn, scale: NiceScale) =>
  `${header.replace(/, %$/, "")}, ${unit}, from 0 to ${formatTick(scale.max)}`;

function BarCell({
  row,
  cell,
  scale,
  column: { unit, form },
}: {
  row: TableRow;
  cell: Cell | undefined;
  scale: NiceScale;
  column: FigureColumn;
}) {
  if (!isFigure(cell) || cell.lower === null || cell.upper === null) return null;
  const times = form === "share" ? 100 : 1;
  const upper = Number.isFinite(cell.upper) ? cell.upper * times : scale.max * 2;
  return (
    <RateBar
      rate={{ estimate: cell.estimate * times, lower: cell.lower * times, upper }}
      scale={scale}
      series={row.total ? totalSeries : (row.series ?? 1)}
      unstable={cell.unstable ?? false}
      decimals={form === "share" ? 0 : decimalsFor([cell.estimate])}
      unit={unit}
    />
  );
}

function columnsOf({ columns, rows }: TableData): Column<TableRow>[] {
  return columns.flatMap((column, index): Column<TableRow>[] => {
    if (column.kind === "figure") return figureColumns(column, rows);
    const at = (row: TableRow) => row.cells[column.id];
    return [
      {
        id: column.id,
        header: column.header,
        ...(index === 0 ? { rowHeader: true } : {}),
        ...(column.kind === "text" ? {} : { numeric: true }),
        value: (row) => (row.total ? undefined : sortValue(at(row))),
        cell: (row) => {
          const shown = plainCell(column, at(row));
          if (index > 0) return shown;
          const words = row.total ? <span className="font-medium">{shown}</span> : shown;
          return row.href ? (
            <Link to={row.href} className="text-ink underline decoration-line underline-offset-4">
              {words}
            </Link>
          ) : (
            words
          );
        },
      },
    ];
  });
}

/** The search of a table's CSV: the view's filters and whatever else the view reads from the address. */
function useCsvHref(slug: string, view: string, id: string, keeps: readonly string[]) {
  const { search } = useLocation();
  const own = new URLSearchParams(search);
  const more = Object.fromEntries(
    keeps.flatMap((name) => (own.has(name) ? [[name, own.get(name) ?? ""]] : [])),
  );
  return `/${slug}/rates/csv/${view}/${id}${searchWith(search, more)}`;
}

type Props = {
  table: TableData;
  slug: string;
  /** The view's name in the address of its CSV files. */
  view: string;
  /** Parameters of the address, beside the filters, that the view reads. */
  keeps?: readonly string[];
  captionHidden?: boolean;
};

/** A table of figures with their intervals on one axis, sortable, with its file. */
export function FigureTable({ table, slug, view, keeps = [], captionHidden }: Props) {
  const columns = useMemo(() => columnsOf(table), [table]);
  const csvHref = useCsvHref(slug, view, table.id, keeps);
  return (
    <DataTable
      caption={table.caption}
      columns={columns}
      rows={table.rows}
      rowKey={({ key }) => key}
      empty={table.empty ?? "Nothing counted yet."}
      sortParam={`sort-${table.id}`}
      csvHref={csvHref}
      {...(captionHidden ? { captionHidden } : {})}
    />
  );
}
