import type { ReactNode } from "react";
import { Marker } from "../marker";
import { formatTick, niceScale } from "../scale";
import { ChartFrame, textWidth, ticksThatFit } from "./chart-frame";
import { EndWords } from "./end-words";
import { placeNames } from "./name-places";
import { AxisWords, Plot, type PlotArea, type PlotAxis, tickRoom } from "./plot";
import { SpotNames } from "./spot-names";
import { linePath } from "./svg-path";

export type FunnelPoint = {
  label: string;
  exposure: number;
  rate: number;
  /** Lies outside of the limits: always named, and drawn as a larger diamond. */
  outside: boolean;
  /** Rests on too few events. */
  unstable?: boolean;
};

/** The limits of one level at several exposures, from little to much. */
export type FunnelLimits = { label: string; points: { exposure: number; lower: number; upper: number }[] };

type Props = {
  points: FunnelPoint[];
  centre: { value: number; label: string };
  /** Two levels, the narrower first. */
  limits: FunnelLimits[];
  xUnit: string;
  yUnit: string;
  title: string;
  caption?: ReactNode;
};

const dashes = ["9 5", "2 3"];

/** Ends of both axes: every spot is inside; limits for hardly any exposure leave the picture above. */
function axesOf({ points, centre, limits }: Pick<Props, "points" | "centre" | "limits">) {
  const drawn = points.filter(({ rate, exposure }) => Number.isFinite(rate) && Number.isFinite(exposure));
  const ends = limits.flatMap(({ points: curve }) => curve.at(-1)?.upper ?? []).filter(Number.isFinite);
  const exposures = drawn.map(({ exposure }) => exposure);
  const rates = drawn.map(({ rate }) => rate * 1.08);
  return {
    drawn,
    x: { min: 0, ...niceScale(Math.max(0, ...exposures) * 1.04) },
    y: { min: 0, ...niceScale(Math.max(centre.value * 2, ...rates, ...ends)) },
  };
}

function Curves({
  limits,
  area,
  x,
  y,
}: {
  limits: FunnelLimits[];
  area: PlotArea;
  x: PlotAxis;
  y: PlotAxis;
}) {
  const place = (exposure: number, value: number) => ({
    x: area.x(exposure),
    // Past the axis a curve runs on outside of the nested picture, which cuts it off.
    y: value > y.max ? area.y(y.max) - Math.min(400, (value / y.max - 1) * area.innerHeight) : area.y(value),
  });
  return (
    <svg aria-hidden="true" x={0} y={-1} width={area.innerWidth} height={area.innerHeight + 2}>
      <g transform="translate(0,1)">
        {limits.flatMap(({ label, points }, level) => {
          const curve = points.filter(({ exposure }) => exposure <= x.max);
          return (["upper", "lower"] as const).map((side) => (
            <path
              key={`${label} ${side}`}
              d={linePath(
                curve
                  // A lower limit of 0 is the axis itself.
                  .filter((point, index) => point[side] > 0 || (curve[index + 1]?.[side] ?? 0) > 0)
                  .map((point) => place(point.exposure, point[side])),
              )}
              fill="none"
              stroke="var(--color-soft)"
              strokeWidth={1.5}
              strokeDasharray={dashes[level % dashes.length]}
            />
          ));
        })}
      </g>
    </svg>
  );
}

function Spots({ points, area, level }: { points: FunnelPoint[]; area: PlotArea; level: number }) {
  const spots = points.map(({ label, exposure, rate, outside }) => ({
    x: area.x(exposure),
    y: area.y(rate),
    radius: outside ? 8 : 6,
    text: label,
    must: outside,
    colour: outside ? "var(--color-ember)" : "var(--color-ink)",
  }));
  const bounds = { left: 4, right: area.innerWidth, top: -16, bottom: area.innerHeight };
  const centreLine = { left: 0, right: area.innerWidth, top: level - 1, bottom: level + 1 };
  return (
    <g>
      <SpotNames spots={spots} places={placeNames(spots, bounds, [centreLine])} />
      {points.map(({ label, outside, unstable }, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: two spots may have the same name
        <g key={`${index} ${label}`} transform={`translate(${spots[index]?.x},${spots[index]?.y})`}>
          <Marker
            shape={outside ? "diamond" : "circle"}
            colour={outside ? "var(--color-ember)" : "var(--color-series-1)"}
            hollow={unstable}
            radius={outside ? 7 : 5}
          />
        </g>
      ))}
    </g>
  );
}

/** The words at the right ends of the centre and of each upper limit. */
function endsOf(limits: FunnelLimits[], centre: Props["centre"], end: number) {
  const ends = limits.flatMap(({ label, points }) => {
    const last = points.findLast(({ exposure }) => exposure <= end);
    return last ? [{ text: label, value: last.upper, colour: "var(--color-soft)" }] : [];
  });
  return [...ends, { text: centre.label, value: centre.value, colour: "var(--color-ink)" }];
}

/**
 * Rates against the exposure they rest on, with limits that are wide where there is little of it. Spots outside are
 * named first, the others where their name covers nothing.
 */
export function FunnelChart(props: Props) {
  const { limits, centre, xUnit, yUnit, title, caption } = props;
  const { drawn, x, y } = axesOf(props);
  const ends = endsOf(limits, centre, x.max);
  const endRoom = Math.min(170, Math.max(24, ...ends.map(({ text }) => textWidth(text) + 16)));
  return (
    <ChartFrame caption={caption} wideHeight={440} narrowHeight={440}>
      {({ width, height, narrow }) => {
        const left = tickRoom(y);
        const right = narrow ? Math.min(endRoom, 92) : endRoom;
        const spacing = (width - left - right) / Math.max(1, x.ticks.length - 1);
        const shown = new Set(ticksThatFit(x.ticks.map(formatTick), spacing));
        const ticks = x.ticks.filter((_, index) => shown.has(index));
        return (
          <Plot
            width={width}
            height={height}
            margin={{ top: 40, right, bottom: 62, left }}
            x={{ ...x, ticks, format: formatTick }}
            y={y}
            title={title}
          >
            {(area) => (
              <g>
                <AxisWords left={left} top={-20} y={yUnit} bottom={area.innerHeight + 54} x={xUnit} />
                <Curves limits={limits} area={area} x={x} y={y} />
                <line
                  x1={0}
                  x2={area.innerWidth}
                  y1={area.y(centre.value)}
                  y2={area.y(centre.value)}
                  stroke="var(--color-ink)"
                  strokeWidth={1.5}
                />
                <Spots points={drawn} area={area} level={area.y(centre.value)} />
                <EndWords
                  words={ends.map((end) => ({ ...end, y: area.y(end.value) }))}
                  x={area.innerWidth + 10}
                  room={right - 12}
                  limit={area.innerHeight + 24}
                />
              </g>
            )}
          </Plot>
        );
      }}
    </ChartFrame>
  );
}

export default FunnelChart;
