import { Marker } from "../marker";
import { seriesLook, unstableDash } from "../series";
import type { IntervalAxis } from "./interval-axis";
import { type IntervalRow, placeLabel, wordLine } from "./interval-rows";

type Props = {
  row: IntervalRow;
  /** Where a figure lies in px; past an end of the axis at that end. */
  place: (value: number) => number;
  /** How far words may reach, and where narrow ones begin, in px of the drawing. */
  right: number;
  start: number;
  narrow: boolean;
  axis: IntervalAxis;
};

/** The end of a line that goes on beyond the axis. */
function Arrow({ x, y, way, colour }: { x: number; y: number; way: 1 | -1; colour: string }) {
  const back = x - way * 8;
  return (
    <path d={`M${back} ${y - 5}L${x} ${y}L${back} ${y + 5}`} fill="none" stroke={colour} strokeWidth={2.5} />
  );
}

type WordsProps = { lines: string[]; x: number; y: number; anchor: "start" | "end"; colour: string };

/** Words of which the last line stands at `y`. */
function Words({ lines, x, y, anchor, colour }: WordsProps) {
  return (
    <text
      y={y - (lines.length - 1) * wordLine}
      textAnchor={anchor}
      fontSize={15}
      fill={colour}
      stroke="var(--color-chalk)"
      strokeWidth={6}
      paintOrder="stroke"
    >
      {lines.map((line, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: lines of one text never change their order
        <tspan key={`${index} ${line}`} x={x} dy={index === 0 ? 0 : wordLine}>
          {line}
        </tspan>
      ))}
    </text>
  );
}

/** An estimate with its interval and its words; without a figure a dash and why. */
export function IntervalLine({ row, place, right, start, narrow, axis }: Props) {
  const { rate, series, unstable = false } = row.point;
  const { colour, textColour, shape, dash } = seriesLook(series);
  if (!rate || !Number.isFinite(rate.estimate)) {
    const lines = row.lines.map((line, index) => (index === 0 ? `– ${line}` : line));
    const at = narrow ? { x: start, y: row.y - 11 } : { x: 6, y: row.y + 5 };
    return <Words lines={lines} {...at} anchor="start" colour="var(--color-soft)" />;
  }
  const [from, to] = [place(rate.lower), place(rate.upper)];
  const label = narrow
    ? { x: start, anchor: "start" as const, above: true }
    : placeLabel(row.text, from, to, right);
  const drop = narrow ? -14 : label.above ? -12 : 5;
  return (
    <g>
      <line
        x1={from}
        x2={to}
        y1={row.y}
        y2={row.y}
        stroke={colour}
        strokeWidth={3}
        strokeLinecap={unstable ? "round" : "butt"}
        strokeDasharray={unstable ? unstableDash : dash}
      />
      {rate.lower < axis.min ? <Arrow x={from} y={row.y} way={-1} colour={colour} /> : null}
      {rate.upper > axis.max ? <Arrow x={to} y={row.y} way={1} colour={colour} /> : null}
      <g transform={`translate(${place(rate.estimate)},${row.y})`}>
        <Marker shape={shape} colour={colour} hollow={unstable} radius={7} />
      </g>
      <Words lines={row.lines} x={label.x} y={row.y + drop} anchor={label.anchor} colour={textColour} />
    </g>
  );
}
