import type { ReactNode } from "react";
import { Marker } from "../marker";
import { formatTick, type NiceScale, niceScale } from "../scale";
import { seriesLook, unstableDash } from "../series";
import { ChartFrame, textWidth, ticksThatFit } from "./chart-frame";
import {
  layoutSides,
  middleRoom,
  narrowSideWords,
  type PlacedSide,
  type SideRate,
  type SideRow,
  wideSideWords,
} from "./side-rows";

export type { SideRate, SideRow } from "./side-rows";

type Props = {
  rows: SideRow[];
  leftLabel: string;
  rightLabel: string;
  /** What both axes count. */
  unit: string;
  decimals: number;
  title: string;
  caption?: ReactNode;
};

/** One side in px: its zero, its way outwards (-1 to the left) and its length. */
type Side = { zero: number; way: 1 | -1; length: number; scale: NiceScale; series: 1 | 2 };

const headRoom = 30;
const axisRoom = 54;
const anchorOf = (way: 1 | -1) => (way === 1 ? "start" : "end");
const outline = { stroke: "var(--color-chalk)", strokeWidth: 4, paintOrder: "stroke" } as const;

function place({ zero, way, length, scale }: Side, value: number): number {
  const share = Math.min(1, Math.max(0, Number.isNaN(value) ? 0 : value / scale.max));
  return zero + way * length * share;
}

function Axis({ side, label, height }: { side: Side; label: string; height: number }) {
  const { scale, way } = side;
  const words = scale.ticks.map(formatTick);
  const shown = new Set(ticksThatFit(words, side.length / Math.max(1, words.length - 1)));
  return (
    <g fontSize={15}>
      {scale.ticks.map((tick, index) => (
        <g key={tick}>
          <line
            x1={place(side, tick)}
            x2={place(side, tick)}
            y1={headRoom - 4}
            y2={headRoom + height}
            stroke="var(--color-line)"
            strokeWidth={1.5}
          />
          {shown.has(index) ? (
            <text
              x={place(side, tick)}
              y={headRoom + height + 20}
              textAnchor="middle"
              fill="var(--color-ink)"
            >
              {words[index]}
            </text>
          ) : null}
        </g>
      ))}
      <text
        x={side.zero}
        y={16}
        textAnchor={anchorOf(way)}
        fontWeight={500}
        fill={seriesLook(side.series).textColour}
      >
        {label}
      </text>
    </g>
  );
}

function SideLine({ rate, side, y, narrow, decimals }: SideLineProps) {
  const { colour, textColour, shape } = seriesLook(side.series);
  if (!rate || !Number.isFinite(rate.value)) {
    return (
      <text x={side.zero + side.way * 10} y={y + 5} textAnchor={anchorOf(side.way)} fill="var(--color-soft)">
        –
      </text>
    );
  }
  const { value, lower, upper, unstable = false } = rate;
  const [from, at, to] = [place(side, lower), place(side, value), place(side, upper)];
  const beyond = upper > side.scale.max;
  return (
    <g>
      <line
        x1={from}
        x2={to}
        y1={y}
        y2={y}
        stroke={colour}
        strokeWidth={3}
        strokeLinecap={unstable ? "round" : "butt"}
        strokeDasharray={unstable ? unstableDash : undefined}
      />
      {beyond ? (
        <path
          d={`M${to - side.way * 7} ${y - 5}L${to} ${y}L${to - side.way * 7} ${y + 5}`}
          fill="none"
          stroke={colour}
          strokeWidth={2.5}
        />
      ) : null}
      <g transform={`translate(${at},${y})`}>
        <Marker shape={shape} colour={colour} hollow={unstable} radius={6.5} />
      </g>
      {narrow ? (
        <NarrowWords lines={narrowSideWords(rate, decimals)} {...{ side, y, textColour }} />
      ) : (
        <text
          x={to + side.way * 11}
          y={y + 5}
          textAnchor={anchorOf(side.way)}
          fontSize={15}
          fill={textColour}
          {...outline}
        >
          {wideSideWords(rate, decimals)}
        </text>
      )}
    </g>
  );
}

type SideLineProps = {
  rate: SideRate | null;
  side: Side;
  y: number;
  narrow: boolean;
  decimals: number;
};

/** Above the line, from the zero outwards. */
function NarrowWords({ side, y, lines, textColour }: NarrowWordsProps) {
  return lines.map((line, index) => (
    <text
      key={line}
      x={side.zero}
      y={y - 14 - (lines.length - 1 - index) * 18}
      textAnchor={anchorOf(side.way)}
      fontSize={15}
      fill={textColour}
      {...outline}
    >
      {line}
    </text>
  ));
}

type NarrowWordsProps = { side: Side; y: number; lines: string[]; textColour: string };

function Names({ placed, centre, narrow }: { placed: PlacedSide[]; centre: number; narrow: boolean }) {
  return placed.map(({ row, key, top, line }) => {
    const y = narrow ? headRoom + top + 16 : headRoom + line + (row.middle ? -4 : 5);
    return (
      <g key={key} textAnchor="middle" fill="var(--color-ink)" {...outline}>
        <text x={centre} y={y} fontSize={16} fontWeight={narrow ? 500 : 400}>
          {row.label}
        </text>
        {row.middle ? (
          <text x={centre} y={y + 19} fontSize={15} fill="var(--color-soft)">
            {row.middle.text}
          </text>
        ) : null}
      </g>
    );
  });
}

/** The length of an axis that leaves every line room for its words behind it. `room` is that of a whole side. */
function axisLength(rows: SideRow[], room: number, scale: NiceScale, decimals: number): number {
  const lengths = sidesIn(rows).map((side) => {
    const share = Math.min(1, Math.max(side.upper, side.value) / scale.max);
    return (room - 15 - textWidth(wideSideWords(side, decimals))) / Math.max(share, 0.01);
  });
  return Math.max(40, Math.min(room - 14, ...lengths.filter(Number.isFinite)));
}

const sidesIn = (rows: SideRow[]) =>
  rows.flatMap(({ left, right }) => [left, right].flatMap((side) => side ?? []));

/** End of both axes: every figure and finite limit. */
function scaleOf(rows: SideRow[]): NiceScale {
  const reach = sidesIn(rows)
    .flatMap(({ value, upper }) => [value, upper])
    .filter(Number.isFinite);
  return niceScale(Math.max(0, ...reach), 4);
}

/**
 * Rates of two sides as mirrored lines with their intervals: the left side's grow to the left, the right side's to
 * the right, the names between them.
 */
export function TwoSidedBars({ rows, leftLabel, rightLabel, unit, decimals, title, caption }: Props) {
  const scale = scaleOf(rows);
  const layouts = { wide: layoutSides(rows, false, decimals), narrow: layoutSides(rows, true, decimals) };
  const names = middleRoom(rows);
  return (
    <ChartFrame
      caption={caption}
      narrowOn="desk"
      wideHeight={headRoom + layouts.wide.height + axisRoom}
      narrowHeight={headRoom + layouts.narrow.height + axisRoom}
    >
      {({ width, height, narrow }) => {
        const layout = narrow ? layouts.narrow : layouts.wide;
        // On a narrow screen the sides meet, since the names stand above the lines.
        const gap = narrow ? 20 : names;
        const room = (width - gap) / 2;
        const length = narrow ? Math.max(10, room - 14) : axisLength(rows, room, scale, decimals);
        const left: Side = { zero: room, way: -1, length, scale, series: 1 };
        const right: Side = { zero: room + gap, way: 1, length, scale, series: 2 };
        return (
          <svg width={width} height={height} role="img" aria-label={title}>
            <Axis side={left} label={leftLabel} height={layout.height} />
            <Axis side={right} label={rightLabel} height={layout.height} />
            <Names placed={layout.rows} centre={width / 2} narrow={narrow} />
            {layout.rows.map(({ row, key, line }) => (
              <g key={key}>
                <SideLine rate={row.left} side={left} {...{ y: headRoom + line, narrow, decimals }} />
                <SideLine rate={row.right} side={right} {...{ y: headRoom + line, narrow, decimals }} />
              </g>
            ))}
            <text
              x={width / 2}
              y={headRoom + layout.height + 44}
              textAnchor="middle"
              fontSize={15}
              fill="var(--color-soft)"
            >
              {unit}
            </text>
          </svg>
        );
      }}
    </ChartFrame>
  );
}

export default TwoSidedBars;
