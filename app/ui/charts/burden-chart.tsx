import type { ReactNode } from "react";
import { Marker } from "../marker";
import { logarithmicAxis, productLine } from "./burden-axes";
import { ChartFrame, textWidth } from "./chart-frame";
import { EndWords } from "./end-words";
import { type Box, placeNames } from "./name-places";
import { AxisWords, Plot, type PlotArea, type PlotAxis, tickRoom } from "./plot";
import { SpotNames } from "./spot-names";

export type BurdenPoint = {
  label: string;
  x: number;
  y: number;
  /** Rests on too few events. */
  unstable?: boolean;
  /** The spot's area grows with them. */
  events: number;
};

type Props = {
  points: BurdenPoint[];
  /** Lines on which x times y is `value`. */
  curves: { value: number; label: string }[];
  xUnit: string;
  yUnit: string;
  title: string;
  caption?: ReactNode;
};

/** Radius of a spot in px: its area follows the events, with a least size that can still be seen. */
const radiusOf = (events: number, most: number) =>
  4.5 + 11 * Math.sqrt(Math.max(0, Number.isFinite(events) ? events : 0) / Math.max(1, most));

type Line = { label: string; x1: number; y1: number; x2: number; y2: number; atFoot: boolean };

/** Lines of equal products in px; those that end at the foot of the picture have their words there. */
function linesOf(curves: Props["curves"], x: PlotAxis, y: PlotAxis, area: PlotArea): Line[] {
  return curves.flatMap(({ value, label }): Line[] => {
    const ends = productLine(value, x, y);
    if (!ends) return [];
    const [x1, y1, x2, y2] = [area.x(ends.from.x), area.y(ends.from.y), area.x(ends.to.x), area.y(ends.to.y)];
    return [{ label, x1, y1, x2, y2, atFoot: x2 < area.innerWidth - textWidth(label) }];
  });
}

const footOf = ({ x2, y2 }: Line) => ({ x: x2 + 6, y: y2 - 8 });

function ProductLines({ lines, end, room, limit }: LinesProps) {
  const words = lines.filter(({ atFoot }) => !atFoot);
  return (
    <g>
      {lines.map(({ label, x1, y1, x2, y2 }, index) => (
        <line
          // biome-ignore lint/suspicious/noArrayIndexKey: two lines may carry the same words
          key={`${index} ${label}`}
          {...{ x1, y1, x2, y2 }}
          stroke="var(--color-soft)"
          strokeWidth={1.5}
          strokeDasharray="6 4"
        />
      ))}
      {lines.map((line, index) =>
        line.atFoot ? (
          // biome-ignore lint/suspicious/noArrayIndexKey: two lines may carry the same words
          <text key={`${index} ${line.label}`} {...footOf(line)} fontSize={15} fontWeight={500} {...soft}>
            {line.label}
          </text>
        ) : null,
      )}
      <EndWords
        words={words.map(({ label, y2 }) => ({ text: label, y: y2, colour: "var(--color-soft)" }))}
        {...{ x: end, room, limit }}
      />
    </g>
  );
}

type LinesProps = { lines: Line[]; end: number; room: number; limit: number };

const soft = {
  fill: "var(--color-soft)",
  stroke: "var(--color-chalk)",
  strokeWidth: 4,
  paintOrder: "stroke",
};

/** What a logarithmic axis cannot hold lies at its beginning, with an arrow towards 0. */
function ZeroArrow({ x, y }: { x: boolean; y: boolean }) {
  return (
    <g fill="none" stroke="var(--color-series-1)" strokeWidth={2}>
      {x ? <path d="M-9 -5L-14 0L-9 5" /> : null}
      {y ? <path d="M-5 9L0 14L5 9" /> : null}
    </g>
  );
}

type SpotsProps = { points: BurdenPoint[]; area: PlotArea; taken: Box[]; reach: number };

function Spots({ points, area, taken, reach }: SpotsProps) {
  const most = Math.max(1, ...points.map(({ events }) => (Number.isFinite(events) ? events : 0)));
  const spots = points.map(({ label, x, y, events }) => ({
    x: area.x(x),
    y: area.y(y),
    radius: radiusOf(events, most),
    text: label,
    must: true,
    colour: "var(--color-ink)",
  }));
  const places = placeNames(
    spots,
    { left: 2, right: area.innerWidth, top: -16, bottom: area.innerHeight },
    taken,
    reach,
  );
  return (
    <g>
      {points.map(({ label, x, y, unstable }, index) => (
        <g
          // biome-ignore lint/suspicious/noArrayIndexKey: two spots may have the same name
          key={`${index} ${label}`}
          transform={`translate(${spots[index]?.x},${spots[index]?.y})`}
          opacity={unstable ? 1 : 0.85}
        >
          <Marker
            shape="circle"
            colour="var(--color-series-1)"
            hollow={unstable}
            radius={spots[index]?.radius}
          />
          <ZeroArrow x={x <= 0} y={y <= 0} />
        </g>
      ))}
      <SpotNames spots={spots} places={places} />
    </g>
  );
}

/**
 * Two measures whose product counts, on logarithmic axes: equal products are straight lines, so that what is rare
 * and long can be weighed against what is frequent and short. Each spot is named; its area grows with its events.
 */
export function BurdenChart({ points, curves, xUnit, yUnit, title, caption }: Props) {
  // What weighs most is drawn first, below the smaller spots, and named first.
  const shown = points
    .filter((point) => Number.isFinite(point.x) && Number.isFinite(point.y))
    .sort((a, b) => b.x * b.y - a.x * a.y);
  const y = logarithmicAxis(shown.map((point) => point.y));
  const endRoom = Math.min(150, Math.max(40, ...curves.map(({ label }) => textWidth(label) + 16)));
  return (
    <ChartFrame caption={caption} wideHeight={480} narrowHeight={460}>
      {({ width, height, narrow }) => {
        const x = logarithmicAxis(
          shown.map((point) => point.x),
          narrow ? "tens" : "all",
        );
        const left = tickRoom(y);
        const right = narrow ? Math.min(endRoom, 76) : endRoom;
        return (
          <Plot
            width={width}
            height={height}
            margin={{ top: 40, right, bottom: 62, left }}
            x={x}
            y={y}
            title={title}
          >
            {(area) => {
              const lines = linesOf(curves, x, y, area);
              const taken = lines
                .filter(({ atFoot }) => atFoot)
                .map((line) => {
                  const { x: from, y: base } = footOf(line);
                  return {
                    left: from,
                    right: from + textWidth(line.label),
                    top: base - 14,
                    bottom: base + 4,
                  };
                });
              return (
                <g>
                  <AxisWords left={left} top={-20} y={yUnit} bottom={area.innerHeight + 54} x={xUnit} />
                  <ProductLines
                    lines={lines}
                    end={area.innerWidth + 10}
                    room={right - 12}
                    limit={area.innerHeight + 10}
                  />
                  <Spots points={shown} area={area} taken={taken} reach={narrow ? 48 : 120} />
                </g>
              );
            }}
          </Plot>
        );
      }}
    </ChartFrame>
  );
}

export default BurdenChart;
