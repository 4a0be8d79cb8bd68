import { Marker } from "../marker";
import type { RateEstimate } from "../rate-bar";
import { type SeriesNumber, seriesLook } from "../series";
import { splitAtGaps } from "./gaps";
import { spotRadius } from "./period-plot";
import { linePath } from "./svg-path";

/** A point in px of the drawing; `index` is its period. */
export type PlacedPoint = RateEstimate & { index: number; x: number; unstable: boolean };

type Props = {
  series: SeriesNumber;
  /** One entry per period; null where there is no figure. */
  points: (PlacedPoint | null)[];
  /** Distance between two periods in px: the closer they are, the smaller the spots. */
  slot: number;
  opacity: number;
};

/** A spot, or where spots would touch only the hollow one that says "unstable". */
function Spot({ point, look, radius }: SpotProps) {
  const { x, estimate, unstable } = point;
  if (radius >= 3.4) {
    return (
      <g transform={`translate(${x},${estimate})`}>
        <Marker shape={look.shape} colour={look.colour} hollow={unstable} radius={radius} />
      </g>
    );
  }
  if (!unstable) return null;
  return (
    <circle
      cx={x}
      cy={estimate}
      r={Math.max(1.8, radius)}
      fill="var(--color-chalk)"
      stroke={look.colour}
      strokeWidth={1.2}
    />
  );
}

type SpotProps = { point: PlacedPoint; look: ReturnType<typeof seriesLook>; radius: number };

/** The line of a series with its band, broken where a period has no figure. */
export function BandLine({ series, points, slot, opacity }: Props) {
  const look = seriesLook(series);
  const radius = slot >= 20 ? 5.5 : Math.min(4.2, spotRadius(slot));
  return splitAtGaps(points).map((run) => {
    const there = run.map(({ x, upper }) => ({ x, y: upper }));
    const back = run.map(({ x, lower }) => ({ x, y: lower })).reverse();
    return (
      <g key={run[0]?.index}>
        {run.length > 1 ? (
          <path d={`${linePath([...there, ...back])}Z`} fill={look.colour} opacity={opacity} />
        ) : null}
        <path
          d={linePath(run.map(({ x, estimate }) => ({ x, y: estimate })))}
          fill="none"
          stroke={look.colour}
          strokeWidth={radius < 5 ? 2 : 2.5}
          strokeDasharray={look.dash}
        />
        {run.map((point) => (
          <g key={point.index}>
            {/* A period on its own has no band and no line, so it gets its interval as one. */}
            {run.length === 1 ? (
              <line
                x1={point.x}
                x2={point.x}
                y1={point.lower}
                y2={point.upper}
                stroke={look.colour}
                strokeWidth={2.5}
              />
            ) : null}
            <Spot point={point} look={look} radius={run.length === 1 ? Math.max(3.4, radius) : radius} />
          </g>
        ))}
      </g>
    );
  });
}
