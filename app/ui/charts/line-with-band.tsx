import { Line } from "@nivo/line";
import type { ReactNode } from "react";
import { Marker } from "../marker";
import type { RateEstimate } from "../rate-bar";
import { formatTick, niceScale } from "../scale";
import { type SeriesNumber, seriesLook } from "../series";
import { ChartFrame, chartTheme, textWidth } from "./chart-frame";
import { type EndWord, EndWords } from "./end-words";
import { splitAtGaps } from "./gaps";
import { linePath } from "./svg-path";

export type BandPoint = (RateEstimate & { unstable?: boolean }) | null;
export type BandSeries = {
  series: SeriesNumber;
  label: string;
  /** One entry per period, in order; null where there is no figure: the line breaks there. */
  points: BandPoint[];
};

type Props = {
  periods: string[];
  series: BandSeries[];
  /** What the axis counts, written above it: "per 1000 athlete-exposures". */
  unit: string;
  title: string;
  caption?: ReactNode;
  reference?: { value: number; label: string };
};

type Datum = { x: string; y: number | null };
type NivoSeries = { id: string; data: Datum[] };
type Placed = { x: number; estimate: number; lower: number; upper: number; unstable: boolean };

function Series({ look, runs }: { look: ReturnType<typeof seriesLook>; runs: Placed[][] }) {
  return (
    <g>
      {runs.map((run) => {
        const there = run.map(({ x, upper }) => ({ x, y: upper }));
        const back = run.map(({ x, lower }) => ({ x, y: lower })).reverse();
        return (
          <g key={run[0]?.x}>
            {run.length > 1 ? (
              <path d={`${linePath([...there, ...back])}Z`} fill={look.colour} opacity={0.16} />
            ) : null}
            <path
              d={linePath(run.map(({ x, estimate }) => ({ x, y: estimate })))}
              fill="none"
              stroke={look.colour}
              strokeWidth={2.5}
              strokeDasharray={look.dash}
            />
            {run.map(({ x, estimate, lower, upper, unstable }) => (
              <g key={x}>
                {/* A period on its own has no band, so it gets its interval as a line. */}
                {run.length === 1 ? (
                  <line x1={x} x2={x} y1={lower} y2={upper} stroke={look.colour} strokeWidth={2.5} />
                ) : null}
                <g transform={`translate(${x},${estimate})`}>
                  <Marker shape={look.shape} colour={look.colour} hollow={unstable} radius={5.5} />
                </g>
              </g>
            ))}
          </g>
        );
      })}
    </g>
  );
}

type DrawingProps = Pick<Props, "periods" | "series" | "unit" | "reference"> & {
  x: (period: string) => number;
  y: (value: number) => number;
  innerWidth: number;
  innerHeight: number;
  left: number;
  /** Width of the labels behind the last period. */
  room: number;
};

/** What lies on nivo's grid and axes. */
function Drawing({
  periods,
  series,
  unit,
  reference,
  x,
  y,
  innerWidth,
  innerHeight,
  left,
  room,
}: DrawingProps) {
  const drawn = series.map(({ series: number, label, points }) => {
    const placed = periods.map((period, index): Placed | null => {
      const point = points[index];
      if (!point) return null;
      const { estimate, lower, upper, unstable = false } = point;
      return { x: x(period), estimate: y(estimate), lower: y(lower), upper: y(upper), unstable };
    });
    return { number, label, look: seriesLook(number), placed };
  });
  const labels = drawn.flatMap(({ label, look, placed }): EndWord[] => {
    const end = placed.findLast((point) => point !== null);
    return end ? [{ text: label, y: end.estimate, colour: look.textColour }] : [];
  });
  const level = reference ? y(reference.value) : 0;
  if (reference) labels.push({ text: reference.label, y: level, colour: "var(--color-ink)" });

  return (
    <g>
      <text x={left} y={-20} fontSize={15} fill="var(--color-soft)">
        {unit}
      </text>
      {drawn.map(({ number, look, placed }) => (
        <Series key={number} look={look} runs={splitAtGaps(placed)} />
      ))}
      {reference ? (
        <line
          x1={0}
          x2={innerWidth}
          y1={level}
          y2={level}
          stroke="var(--color-ink)"
          strokeWidth={2}
          strokeDasharray="2 4"
        />
      ) : null}
      <EndWords words={labels} x={innerWidth + 12} room={room} limit={innerHeight + 24} />
    </g>
  );
}

/**
 * Estimates over periods with their intervals as bands, each line named at its end. Hollow spots rest on too few
 * events; the line stops where there is no figure.
 */
export function LineWithBand({ periods, series, unit, title, caption, reference }: Props) {
  const uppers = series.flatMap(({ points }) => points.flatMap((point) => point?.upper ?? []));
  const scale = niceScale(Math.max(0, reference?.value ?? 0, ...uppers));
  const data: NivoSeries[] = series.map(({ series: number, points }) => ({
    id: String(number),
    data: periods.map((x, index) => ({ x, y: points[index]?.estimate ?? null })),
  }));
  const ends = [...series, ...(reference ? [reference] : [])];
  const labelRoom = Math.min(170, Math.max(24, ...ends.map(({ label }) => textWidth(label) + 16)));

  return (
    <ChartFrame caption={caption} wideHeight={340} narrowHeight={320}>
      {({ width, height, narrow }) => {
        const margin = { top: 40, right: narrow ? Math.min(labelRoom, 96) : labelRoom, bottom: 36, left: 40 };
        const slot = (width - margin.left - margin.right) / Math.max(1, periods.length - 1);
        const widest = Math.max(...periods.map(textWidth), 1);
        const every = Math.max(1, Math.ceil((widest + 10) / Math.max(slot, 1)));
        return (
          <Line
            width={width}
            height={height}
            margin={margin}
            data={data}
            xScale={{ type: "point" }}
            yScale={{ type: "linear", min: 0, max: scale.max }}
            theme={chartTheme}
            animate={false}
            isInteractive={false}
            enableGridX={false}
            gridYValues={scale.ticks}
            axisLeft={{
              tickSize: 0,
              tickPadding: 12,
              tickValues: scale.ticks,
              format: (tick) => formatTick(Number(tick)),
            }}
            axisBottom={{
              tickSize: 0,
              tickPadding: 14,
              tickValues: periods.filter((_, index) => index % every === 0),
            }}
            layers={[
              "grid",
              "axes",
              ({ xScale, yScale, innerWidth, innerHeight }) => (
                <Drawing
                  {...{ periods, series, unit, reference, innerWidth, innerHeight }}
                  // A point scale and a linear one, as set above; nivo's own type allows for others as well.
                  x={xScale as (period: string) => number}
                  y={yScale as (value: number) => number}
                  left={-margin.left}
                  room={margin.right - 14}
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

export default LineWithBand;
