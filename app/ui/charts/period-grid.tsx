import type { ReactNode } from "react";
import { Link } from "react-router";
import { textWidth } from "./chart-frame";

export type GridCell = {
  /** From 0 to 1. */
  share: number;
  /** What a screen reader says and a pointer shows: "3 of 4". */
  text: string;
} | null;

export type GridRow = { label: string; href?: string; cells: GridCell[] };

type Props = {
  rows: GridRow[];
  /** `short` stands above where it differs from the one before and there is room: the month's name for a week. */
  periods: { short: string; long: string }[];
  title: string;
  caption?: ReactNode;
  /** Instead of the grid when there are no rows; also what a row says in which nothing took place. */
  emptyText: string;
};

/** Sizes in px. The stroke leans a little, as by hand, always the same for the same period. */
const slot = 15;
const rowHeight = 40;
const stroke = { top: 7, length: 26, width: 8 };

/**
 * Indexes of the periods whose short names are written, none touching the next. A name that its own periods are too
 * short for (the last week of July, before August) gives way to the next.
 */
export function headings(periods: { short: string }[]): number[] {
  const starts = [...periods.keys()].filter((index) => periods[index]?.short !== periods[index - 1]?.short);
  const room = (index: number) => textWidth(periods[index]?.short ?? "") + 6;
  const fits = (place: number) =>
    ((starts[place + 1] ?? Infinity) - (starts[place] ?? 0)) * slot >= room(starts[place] ?? 0);
  const shown: number[] = [];
  let free = 0;
  for (const [place, index] of starts.entries()) {
    const givesWay = place === 0 && !fits(0) && fits(1);
    if (index * slot < free || givesWay) continue;
    shown.push(index);
    free = index * slot + room(index);
  }
  return shown;
}

/** What a row says once, for screen readers: every period in which something took place. */
export function rowWords({ cells }: GridRow, periods: { long: string }[], emptyText: string): string {
  const words = periods.flatMap(({ long }, index) => {
    const cell = cells[index];
    return cell ? [`${long}: ${cell.text}`] : [];
  });
  return words.length > 0 ? words.join("; ") : emptyText;
}

/** An upright chalk stroke, filled from its foot up to the share; a faint dot where nothing took place. */
function Stroke({ cell, index, long }: { cell: GridCell; index: number; long: string }) {
  const x = index * slot + slot / 2;
  if (!cell)
    return (
      <circle cx={x} cy={stroke.top + stroke.length / 2} r={1.8} fill="var(--color-edge)" opacity={0.35} />
    );
  const share = Number.isFinite(cell.share) ? Math.min(1, Math.max(0, cell.share)) : 0;
  const lean = [0.8, -0.6, 0.3, -0.9][index % 4] ?? 0;
  const filled = share * stroke.length;
  const left = x - stroke.width / 2;
  return (
    <g transform={`rotate(${lean * 2} ${x} ${stroke.top + stroke.length})`}>
      <title>{`${long}: ${cell.text}`}</title>
      {/* The whole cell answers to the pointer, not the thin stroke alone. */}
      <rect x={x - slot / 2} y={0} width={slot} height={rowHeight} fill="transparent" />
      <rect
        x={left}
        y={stroke.top}
        width={stroke.width}
        height={stroke.length}
        rx={3}
        fill="none"
        stroke="var(--color-soft)"
        strokeWidth={1.5}
      />
      {filled > 0 ? (
        <rect
          x={left}
          y={stroke.top + stroke.length - filled}
          width={stroke.width}
          height={filled}
          rx={Math.min(3, filled / 2)}
          fill="var(--color-lagoon)"
        />
      ) : null}
    </g>
  );
}

const nameCell =
  "sticky left-0 z-1 flex w-[min(13rem,38vw)] shrink-0 items-center bg-chalk py-1 pr-3 leading-snug";

/** On paper nothing scrolls, so that a long season is drawn smaller; all rows alike, since all are as wide. */
const drawing = "block shrink-0 self-center print:min-w-0 print:shrink";

function Heads({ periods, width }: { periods: Props["periods"]; width: number }) {
  return (
    <div className="flex" aria-hidden="true">
      <span className={nameCell} />
      <svg aria-hidden="true" width={width} height={24} viewBox={`0 0 ${width} 24`} className={drawing}>
        {headings(periods).map((index) => (
          <text key={index} x={index * slot + 3} y={16} fontSize={15} fill="var(--color-soft)">
            {periods[index]?.short}
          </text>
        ))}
      </svg>
    </div>
  );
}

function Row({ row, periods, width, emptyText }: RowProps) {
  return (
    <li className="flex border-t border-line">
      <span className={nameCell}>
        {row.href ? (
          <Link to={row.href} className="text-lagoon underline underline-offset-4">
            {row.label}
          </Link>
        ) : (
          row.label
        )}
      </span>
      <svg
        role="img"
        aria-label={rowWords(row, periods, emptyText)}
        width={width}
        height={rowHeight}
        viewBox={`0 0 ${width} ${rowHeight}`}
        className={drawing}
      >
        {periods.map(({ long }, index) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: a cell is its period
          <Stroke key={index} cell={row.cells[index] ?? null} index={index} long={long} />
        ))}
      </svg>
    </li>
  );
}

type RowProps = { row: GridRow; periods: Props["periods"]; width: number; emptyText: string };

/**
 * Groups down, periods across: a stroke per cell, filled as far as its share. Wider than its room it scrolls
 * sideways, by finger and by keys, and the names stay.
 */
export function PeriodGrid({ rows, periods, title, caption, emptyText }: Props) {
  const width = Math.max(slot, periods.length * slot) + 8;
  return (
    <figure className="my-6">
      {caption ? <figcaption className="mb-2 font-semibold">{caption}</figcaption> : null}
      {rows.length === 0 ? (
        <p className="text-soft">{emptyText}</p>
      ) : (
        // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by keys
        <section className="relative overflow-x-auto print:overflow-visible" aria-label={title} tabIndex={0}>
          <div className="w-max print:w-full">
            <Heads periods={periods} width={width} />
            <ul className="border-b border-line">
              {rows.map((row, index) => (
                // biome-ignore lint/suspicious/noArrayIndexKey: two rows may have the same name
                <Row key={`${index} ${row.label}`} {...{ row, periods, width, emptyText }} />
              ))}
            </ul>
          </div>
        </section>
      )}
    </figure>
  );
}

export default PeriodGrid;
