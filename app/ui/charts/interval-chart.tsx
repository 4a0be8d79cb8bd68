import { ScatterPlot, type ScatterPlotLayerProps } from "@nivo/scatterplot";
import type { ReactNode } from "react";
import { formatTick } from "../scale";
import { ChartFrame, chartTheme, textWidth } from "./chart-frame";
import { type IntervalAxis, linearAxis, ratioAxis, shownTicks } from "./interval-axis";
import { IntervalLine } from "./interval-line";
import { type IntervalGroup, layoutRows, wordLine } from "./interval-rows";

export type { IntervalGroup, IntervalPoint } from "./interval-rows";

type Props = {
  groups: IntervalGroup[];
  /** What the axis counts, written behind its last figure: "per 1000". */
  unit: string;
  /** What the chart shows, in a sentence, for screen readers; the figures stand in the table beside it. */
  title: string;
  caption?: ReactNode;
  reference?: { value: number; label: string };
  decimals?: number;
  /** End of the axis; the smallest round number above every upper limit unless given. */
  max?: number;
  /**
   * For ratios: equal distances are equal factors, the reference is 1 unless given, the axis ends at 1/max and max.
   * An upper limit of Infinity and a lower limit of 0 are no limits: the line ends in an arrow.
   */
  logarithmic?: boolean;
};

type Datum = { x: number; y: number };
type LayerProps = ScatterPlotLayerProps<Datum>;

const axisRoom = 34;
/** A narrow axis carries its unit on a line of its own. */
const unitRoom = 22;
/** Room above the lines for the words of the reference. */
const headRoom = 26;

function Reference({ x, width, height, label }: { x: number; width: number; height: number; label: string }) {
  const fits = x + 6 + textWidth(label) <= width;
  return (
    <g>
      <line
        x1={x}
        x2={x}
        y1={-headRoom + 6}
        y2={height}
        stroke="var(--color-ink)"
        strokeWidth={2}
        strokeDasharray="2 4"
      />
      <text
        x={fits ? x + 6 : x - 6}
        y={-10}
        textAnchor={fits ? "start" : "end"}
        fontSize={14}
        fill="var(--color-ink)"
      >
        {label}
      </text>
    </g>
  );
}

type DrawingProps = LayerProps &
  Pick<ReturnType<typeof layoutRows>, "headings" | "rows"> & {
    reference?: { value: number; label: string };
    unit: string;
    narrow: boolean;
    ownLine: boolean;
    margin: { left: number; right: number };
    axis: IntervalAxis;
  };

/** What lies on nivo's grid and axis. */
function Drawing({
  xScale,
  innerWidth,
  innerHeight,
  headings,
  rows,
  reference,
  unit,
  narrow,
  ownLine,
  margin,
  axis,
}: DrawingProps) {
  const right = innerWidth + margin.right;
  // The axis is one of numbers, as the chart below sets it; nivo's own type allows for dates and words as well.
  const place = (value: number) =>
    Number(
      (xScale as (value: number) => number)(
        Number.isNaN(value) ? axis.min : Math.max(axis.min, Math.min(value, axis.max)),
      ),
    );
  // Narrow words begin a little to the right of the picture's edge, whatever room the axis takes there.
  const start = 8 - margin.left;
  return (
    <g>
      {reference ? (
        <Reference x={place(reference.value)} width={right} height={innerHeight} label={reference.label} />
      ) : null}
      {narrow || ownLine ? (
        <text x={narrow ? start : 0} y={innerHeight + axisRoom + 12} fontSize={15} fill="var(--color-soft)">
          {unit}
        </text>
      ) : null}
      {headings.map(({ key, y, lines }) => (
        <text
          key={key}
          y={y + 5}
          fontSize={narrow ? 17 : 16}
          fontWeight={narrow ? 500 : 400}
          fill="var(--color-ink)"
          stroke="var(--color-chalk)"
          strokeWidth={4}
          paintOrder="stroke"
        >
          {lines.map((line, index) => (
            // biome-ignore lint/suspicious/noArrayIndexKey: lines of one text never change their order
            <tspan key={`${index} ${line}`} x={narrow ? start : -margin.left} dy={index === 0 ? 0 : wordLine}>
              {line}
            </tspan>
          ))}
        </text>
      ))}
      {rows.map((row) => (
        <IntervalLine key={row.key} {...{ row, place, right, narrow, axis, start }} />
      ))}
    </g>
  );
}

/**
 * Estimates with their intervals, by group, on one axis: each line carries its own words, so there is no legend.
 * On a narrow screen the words stand above the lines.
 */
export function IntervalChart(props: Props) {
  const { groups, unit, title, caption, decimals = 1, max, logarithmic = false } = props;
  const reference = props.reference ?? (logarithmic ? { value: 1, label: "" } : undefined);
  const rates = groups.flatMap((group) => group.points.flatMap((point) => point.rate ?? []));
  const axis = (logarithmic ? ratioAxis : linearAxis)({ rates, reference: reference?.value, max });
  const layouts = {
    wide: layoutRows(groups, false, decimals, logarithmic),
    narrow: layoutRows(groups, true, decimals, logarithmic),
  };
  const labelRoom = Math.min(300, Math.max(60, ...groups.map((group) => textWidth(group.label) + 40)));
  // A short unit stands behind the last figure, a long one, or any on a narrow screen, on a line of its own.
  const ownLine = textWidth(unit) > 110;

  return (
    <ChartFrame
      caption={caption}
      narrowOn="tablet"
      wideHeight={layouts.wide.height + axisRoom + headRoom + (ownLine ? unitRoom : 0)}
      narrowHeight={layouts.narrow.height + axisRoom + headRoom + unitRoom}
    >
      {({ width, height, narrow }) => {
        const { headings, rows } = narrow ? layouts.narrow : layouts.wide;
        const margin = narrow
          ? { top: headRoom, right: 36, bottom: axisRoom + unitRoom, left: logarithmic ? 28 : 8 }
          : { top: headRoom, right: 150, bottom: axisRoom + (ownLine ? unitRoom : 0), left: labelRoom };
        const shown = shownTicks(axis, width - margin.left - margin.right);
        const lastTick = narrow || ownLine ? undefined : shown.at(-1);
        return (
          <ScatterPlot
            width={width}
            height={height}
            margin={margin}
            data={[{ id: "corner", data: [{ x: axis.min, y: 0 }] }]}
            xScale={{
              ...(logarithmic ? { type: "log", base: 2, nice: false } : { type: "linear" }),
              min: axis.min,
              max: axis.max,
            }}
            yScale={{ type: "linear", min: 0, max: 1 }}
            theme={chartTheme}
            animate={false}
            isInteractive={false}
            enableGridY={false}
            gridXValues={axis.ticks}
            axisTop={null}
            axisRight={null}
            axisLeft={null}
            axisBottom={{
              tickSize: 0,
              tickPadding: 12,
              tickValues: shown,
              format: (tick) =>
                tick === lastTick ? `${formatTick(tick)} ${unit}` : formatTick(Number(tick)),
            }}
            layers={[
              "grid",
              "axes",
              (layer) => (
                <Drawing
                  {...layer}
                  {...{ headings, rows, reference, unit, narrow, ownLine }}
                  margin={margin}
                  axis={axis}
                />
              ),
            ]}
            role="img"
            ariaLabel={title}
          />
        );
      }}
    </ChartFrame>
  );
}

export default IntervalChart;
