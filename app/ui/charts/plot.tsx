import { ScatterPlot } from "@nivo/scatterplot";
import type { ReactElement } from "react";
import { formatTick } from "../scale";
import { chartTheme, textWidth } from "./chart-frame";

/** One axis: its ends and the figures written at it, in the unit of the data. */
export type PlotAxis = {
  min: number;
  max: number;
  ticks: number[];
  /** Words of a tick; a number as `formatTick` writes it unless given. */
  format?: (tick: number) => string;
  /** Equal distances are equal ratios; both ends must be above 0. */
  logarithmic?: boolean;
  /** Draws a line at every tick. */
  grid?: boolean;
};

/** The drawing area in px from its upper left corner, and how data are placed in it. */
export type PlotArea = {
  /** Keeps what lies past an end of the axis at that end; what is no number lies at the axis's beginning. */
  x: (value: number) => number;
  y: (value: number) => number;
  innerWidth: number;
  innerHeight: number;
};

export type Margin = { top: number; right: number; bottom: number; left: number };

type Props = {
  width: number;
  height: number;
  margin: Margin;
  x: PlotAxis;
  y: PlotAxis;
  /** What the picture shows, in a sentence, for screen readers. */
  title: string;
  children: (area: PlotArea) => ReactElement;
};

/** Room on the left for the figures of an upright axis, in px; more than a thousand million would have no room. */
export function tickRoom({ ticks, format = formatTick }: PlotAxis): number {
  return Math.min(132, Math.max(40, ...ticks.map((tick) => textWidth(format(tick)) + 14)));
}

const scaleOf = ({ min, max, logarithmic }: PlotAxis) =>
  logarithmic
    ? ({ type: "log", base: 10, min, max, nice: false } as const)
    : ({ type: "linear", min, max, nice: false } as const);

const ticksOf = ({ ticks, format = formatTick }: PlotAxis, tickPadding: number) => ({
  tickSize: 0,
  tickPadding,
  tickValues: ticks,
  format: (tick: number | string | Date) => format(Number(tick)),
});

/** Places data inside an axis, whatever they are, so that nothing is drawn outside or as "NaN". */
function placer(scale: (value: number) => number, { min, max }: PlotAxis) {
  return (value: number) => scale(Math.min(max, Math.max(min, Number.isNaN(value) ? min : value)));
}

/** Two axes with their grid; what lies on them is drawn by `children`. */
export function Plot({ width, height, margin, x, y, title, children }: Props) {
  return (
    <ScatterPlot
      width={width}
      height={height}
      margin={margin}
      data={[{ id: "corner", data: [{ x: x.min, y: y.min }] }]}
      xScale={scaleOf(x)}
      yScale={scaleOf(y)}
      theme={chartTheme}
      animate={false}
      isInteractive={false}
      enableGridX={x.grid ?? false}
      enableGridY={y.grid ?? true}
      gridXValues={x.ticks}
      gridYValues={y.ticks}
      axisTop={null}
      axisRight={null}
      axisLeft={ticksOf(y, 12)}
      axisBottom={ticksOf(x, 14)}
      layers={[
        "grid",
        "axes",
        ({ xScale, yScale, innerWidth, innerHeight }) =>
          children({
            // Linear or logarithmic, as set above; nivo's own type allows for dates and words as well.
            x: placer(xScale as (value: number) => number, x),
            y: placer(yScale as (value: number) => number, y),
            innerWidth,
            innerHeight,
          }),
      ]}
      role="img"
      ariaLabel={title}
    />
  );
}

/** The words of the upright axis, above it, and of the level one, below its figures. */
export function AxisWords({ left, top, bottom, x, y }: AxisWordsProps) {
  return (
    <g fontSize={15} fill="var(--color-soft)">
      <text x={-left} y={top}>
        {y}
      </text>
      {x === undefined ? null : (
        <text x={0} y={bottom}>
          {x}
        </text>
      )}
    </g>
  );
}

type AxisWordsProps = { left: number; top: number; bottom?: number; x?: string; y: string };
