import type { ReactNode } from "react";
import type { RateEstimate } from "../rate-bar";
import { type NiceScale, niceScale } from "../scale";
import { type SeriesNumber, seriesLook } from "../series";
import { BandLine, type PlacedPoint } from "./band-series";
import { ChartFrame, textWidth } from "./chart-frame";
import { type EndWord, EndWords } from "./end-words";
import { namedPeriods } from "./period-plot";
import { AxisWords, Plot, type PlotArea, tickRoom } from "./plot";

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

/** Where so many periods meet on a narrow screen, each series gets a picture of its own on the same axis. */
const crowded = 20;
const panelHeight = 210;

function placePoints(points: BandPoint[], periods: string[], { x, y }: PlotArea) {
  return periods.map((_, index): PlacedPoint | null => {
    const point = points[index];
    if (!point || !Number.isFinite(point.estimate)) return null;
    const { estimate, lower, upper, unstable = false } = point;
    return { index, x: x(index), estimate: y(estimate), lower: y(lower), upper: y(upper), unstable };
  });
}

/** The lines, the reference, and the words at their ends, spread so that none covers another. */
function Drawing({ periods, series, reference, area, slot, room }: DrawingProps) {
  const drawn = series.map((one) => ({ ...one, placed: placePoints(one.points, periods, area) }));
  const words = drawn.flatMap(({ label, series: number, placed }): EndWord[] => {
    const end = placed.findLast((point) => point !== null);
    return end ? [{ text: label, y: end.estimate, colour: seriesLook(number).textColour }] : [];
  });
  const level = reference ? area.y(reference.value) : 0;
  if (reference) words.push({ text: reference.label, y: level, colour: "var(--color-ink)" });
  return (
    <g>
      {drawn.map(({ series: number, label, placed }) => (
        <BandLine
          key={`${number} ${label}`}
          series={number}
          points={placed}
          slot={slot}
          opacity={series.length > 2 ? 0.12 : 0.16}
        />
      ))}
      {reference ? (
        <line
          x1={0}
          x2={area.innerWidth}
          y1={level}
          y2={level}
          stroke="var(--color-ink)"
          strokeWidth={2}
          strokeDasharray="2 4"
        />
      ) : null}
      <EndWords words={words} x={area.innerWidth + 12} room={room} limit={area.innerHeight + 24} />
    </g>
  );
}

type DrawingProps = Pick<Props, "periods" | "series" | "reference"> & {
  area: PlotArea;
  slot: number;
  /** Width of the labels behind the last period. */
  room: number;
};

/** One picture of some of the series. */
function Panel({ periods, series, unit, title, reference, scale, ...size }: PanelProps) {
  const { width, height, right } = size;
  const y = { min: 0, ...scale };
  const left = tickRoom(y);
  const slot = Math.max(0, width - left - right) / Math.max(1, periods.length - 1);
  const alone = periods.length < 2;
  return (
    <Plot
      width={width}
      height={height}
      margin={{ top: 40, right, bottom: 36, left }}
      x={{
        min: alone ? -0.5 : 0,
        max: alone ? 0.5 : periods.length - 1,
        ticks: namedPeriods(periods, slot),
        format: (index) => periods[index] ?? "",
      }}
      y={y}
      title={title}
    >
      {(area) => (
        <g>
          <AxisWords left={left} top={-20} y={unit} />
          <Drawing {...{ periods, series, reference, area, slot }} room={right - 14} />
        </g>
      )}
    </Plot>
  );
}

type PanelProps = Omit<Props, "caption"> & {
  scale: NiceScale;
  width: number;
  height: number;
  right: number;
};

/**
 * Estimates over periods with their intervals as bands, each line named at its end. Hollow spots rest on too few
 * events; the line stops where there is no figure.
 */
export function LineWithBand(props: Props) {
  const { periods, series, unit, title, caption, reference } = props;
  const figures = series.flatMap(({ points }) =>
    points.flatMap((point) => (point ? [point.estimate, point.upper] : [])),
  );
  const scale = niceScale(Math.max(0, reference?.value ?? 0, ...figures.filter(Number.isFinite)));
  const ends = [...series, ...(reference ? [reference] : [])];
  const labelRoom = Math.min(170, Math.max(24, ...ends.map(({ label }) => textWidth(label) + 16)));
  const apart = periods.length > crowded && series.length > 1;

  return (
    <ChartFrame caption={caption} wideHeight={340} narrowHeight={apart ? panelHeight * series.length : 320}>
      {({ width, height, narrow }) => {
        const right = narrow ? Math.min(labelRoom, 96) : labelRoom;
        const shared = { periods, reference, scale, width, right };
        if (!narrow || !apart) return <Panel {...shared} {...{ series, unit, title, height }} />;
        return (
          <div>
            {series.map((one, index) => (
              <Panel
                key={`${one.series} ${one.label}`}
                {...shared}
                series={[one]}
                unit={index === 0 ? unit : ""}
                title={`${title}: ${one.label}`}
                height={panelHeight}
              />
            ))}
          </div>
        );
      }}
    </ChartFrame>
  );
}

export default LineWithBand;
