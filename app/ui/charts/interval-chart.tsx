import { ScatterPlot, type ScatterPlotLayerProps } from "@nivo/scatterplot";
import type { ReactNode } from "react";
import { Marker } from "../marker";
import { formatTick, niceScale } from "../scale";
import { seriesLook, unstableDash } from "../series";
import { ChartFrame, chartTheme, textWidth } from "./chart-frame";
import { type IntervalGroup, type IntervalRow, layoutRows, placeLabel } from "./interval-rows";

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
};

type Datum = { x: number; y: number };
type LayerProps = ScatterPlotLayerProps<Datum>;

const axisRoom = 34;
/** A narrow axis carries its unit on a line of its own. */
const unitRoom = 22;
/** Room above the lines for the words of the reference. */
const headRoom = 26;

function IntervalLine({ row, place, right, narrow }: LineProps) {
  const { rate, series, unstable = false } = row.point;
  const { colour, textColour, shape, dash } = seriesLook(series);
  const outline = { stroke: "var(--color-chalk)", strokeWidth: 6, paintOrder: "stroke" } as const;
  if (!rate) {
    return (
      <text
        x={narrow ? 0 : 6}
        y={row.y + (narrow ? -11 : 5)}
        fontSize={15}
        fill="var(--color-soft)"
        {...outline}
      >
        – {row.text}
      </text>
    );
  }
  const [from, to] = [place(rate.lower), place(rate.upper)];
  const label = narrow
    ? { x: 0, anchor: "start" as const, above: true }
    : placeLabel(row.text, from, to, right);
  const drop = narrow ? -14 : label.above ? -9 : 5;
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
      <g transform={`translate(${place(rate.estimate)},${row.y})`}>
        <Marker shape={shape} colour={colour} hollow={unstable} radius={7} />
      </g>
      <text
        x={label.x}
        y={row.y + drop}
        textAnchor={label.anchor}
        fontSize={15}
        fill={textColour}
        {...outline}
      >
        {row.text}
      </text>
    </g>
  );
}

type LineProps = { row: IntervalRow; place: (value: number) => number; right: number; narrow: boolean };

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
    margin: { left: number; right: number };
    end: number;
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
  margin,
  end,
}: DrawingProps) {
  const right = innerWidth + margin.right;
  // The axis is linear, as the chart below sets it; nivo's own type allows for dates and words as well.
  const place = (value: number) => Number((xScale as (value: number) => number)(Math.min(value, end)));
  return (
    <g>
      {reference ? (
        <Reference x={place(reference.value)} width={right} height={innerHeight} label={reference.label} />
      ) : null}
      {narrow ? (
        <text x={0} y={innerHeight + axisRoom + 12} fontSize={15} fill="var(--color-soft)">
          {unit}
        </text>
      ) : null}
      {headings.map(({ key, y, label }) => (
        <text
          key={key}
          x={narrow ? 0 : -margin.left}
          y={y + 5}
          fontSize={narrow ? 17 : 16}
          fontWeight={narrow ? 500 : 400}
          fill="var(--color-ink)"
          stroke="var(--color-chalk)"
          strokeWidth={4}
          paintOrder="stroke"
        >
          {label}
        </text>
      ))}
      {rows.map((row) => (
        <IntervalLine key={row.key} row={row} place={place} right={right} narrow={narrow} />
      ))}
    </g>
  );
}

/**
 * Estimates with their intervals, by group, on one axis: each line carries its own words, so there is no legend.
 * On a narrow screen the words stand above the lines.
 */
export function IntervalChart({ groups, unit, title, caption, reference, decimals = 1, max }: Props) {
  const rates = groups.flatMap((group) => group.points.flatMap((point) => point.rate ?? []));
  const reach = max ?? Math.max(0, reference?.value ?? 0, ...rates.map((rate) => rate.upper));
  const scale = niceScale(reach);
  const layouts = {
    wide: layoutRows(groups, false, decimals),
    narrow: layoutRows(groups, true, decimals),
  };
  const labelRoom = Math.min(300, Math.max(60, ...groups.map((group) => textWidth(group.label) + 40)));
  const data = [{ id: "estimates", data: rates.map((rate, index) => ({ x: rate.estimate, y: index })) }];
  const lastTick = scale.ticks.at(-1);

  return (
    <ChartFrame
      caption={caption}
      wideHeight={layouts.wide.height + axisRoom + headRoom}
      narrowHeight={layouts.narrow.height + axisRoom + headRoom + unitRoom}
    >
      {({ width, height, narrow }) => {
        const { headings, rows } = narrow ? layouts.narrow : layouts.wide;
        const margin = narrow
          ? { top: headRoom, right: 36, bottom: axisRoom + unitRoom, left: 8 }
          : { top: headRoom, right: 150, bottom: axisRoom, left: labelRoom };
        return (
          <ScatterPlot
            width={width}
            height={height}
            margin={margin}
            data={data}
            xScale={{ type: "linear", min: 0, max: scale.max }}
            yScale={{ type: "linear", min: 0, max: 1 }}
            theme={chartTheme}
            animate={false}
            isInteractive={false}
            enableGridY={false}
            gridXValues={scale.ticks}
            axisTop={null}
            axisRight={null}
            axisLeft={null}
            axisBottom={{
              tickSize: 0,
              tickPadding: 12,
              tickValues:
                narrow && scale.ticks.length > 6
                  ? scale.ticks.filter((_, index) => index % 2 === 0)
                  : scale.ticks,
              format: (tick) =>
                tick === lastTick && !narrow ? `${formatTick(tick)} ${unit}` : formatTick(Number(tick)),
            }}
            layers={[
              "grid",
              "axes",
              (layer) => (
                <Drawing
                  {...layer}
                  {...{ headings, rows, reference, unit, narrow }}
                  margin={margin}
                  end={scale.max}
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
