import type { ReactNode } from "react";
import { Marker } from "../marker";
import { longestGap, splitAtGaps } from "./gaps";
import { placeNames } from "./name-places";
import { type PeriodArea, PeriodPlot, spotRadius } from "./period-plot";
import { SpotNames } from "./spot-names";
import { levelPath, linePath } from "./svg-path";

/** One period: its figure, the limits that its own exposure allows, and whether it lies outside of them. */
export type ControlPoint = {
  value: number;
  lower: number;
  upper: number;
  signal: boolean;
  /** Rests on too few events. */
  unstable?: boolean;
};

type Props = {
  periods: string[];
  /** One entry per period, in order; null where there is no figure: the line breaks there. */
  points: (ControlPoint | null)[];
  centre: { value: number; label: string };
  /** Words of both limits, at the end of the upper one. */
  limitLabel: string;
  /** What the axis counts, written above it. */
  unit: string;
  title: string;
  caption?: ReactNode;
  /** Why some periods have no figure; written below the longest gap. */
  gapNote?: string;
};

type Shown = ControlPoint & { index: number };

/**
 * End of the axis: every figure, and the limits of most periods. A period with hardly any exposure has limits so
 * wide that they would press all else flat; its limit leaves the picture instead.
 */
function reachOf(shown: Shown[], centre: number): number {
  const uppers = shown.map(({ upper }) => upper).filter(Number.isFinite);
  uppers.sort((a, b) => a - b);
  const most = uppers[Math.floor((uppers.length - 1) * 0.8)] ?? 0;
  return Math.max(
    centre,
    Math.min(most * 1.25, uppers.at(-1) ?? 0),
    ...shown.map(({ value }) => value * 1.05),
  );
}

function Limits({ run, area }: { run: Shown[]; area: PeriodArea }) {
  const { x, y, slot } = area;
  // Past the end of the axis the line is led out of the nested picture, which cuts it off.
  const top = y(Number.POSITIVE_INFINITY);
  const upper = run.map((point) => {
    const at = y(point.upper);
    return { x: x(point.index), y: at <= top ? -20 : at };
  });
  const lower = run.map((point) => ({ x: x(point.index), y: y(point.lower) }));
  // A lower limit of 0 all along is the axis itself.
  const lines = run.some((point) => point.lower > 0) ? [upper, lower] : [upper];
  return lines.map((places, index) => (
    <path
      key={index === 0 ? "upper" : "lower"}
      d={levelPath(places, slot)}
      fill="none"
      stroke="var(--color-soft)"
      strokeWidth={1.5}
      strokeDasharray="6 4"
    />
  ));
}

function Figures({ run, area }: { run: Shown[]; area: PeriodArea }) {
  const radius = spotRadius(area.slot);
  return (
    <g>
      <path
        d={linePath(run.map(({ index, value }) => ({ x: area.x(index), y: area.y(value) })))}
        fill="none"
        stroke="var(--color-series-1)"
        strokeWidth={radius < 3 ? 1.5 : 2}
      />
      {run.map(({ index, value, unstable, signal }) =>
        signal ? null : (
          <circle
            key={index}
            cx={area.x(index)}
            cy={area.y(value)}
            r={unstable ? radius - 0.4 : radius}
            fill={unstable ? "var(--color-chalk)" : "var(--color-series-1)"}
            stroke="var(--color-series-1)"
            strokeWidth={unstable ? Math.min(2, radius * 0.6) : 0}
          />
        ),
      )}
    </g>
  );
}

function Signals({ shown, periods, area }: { shown: Shown[]; periods: string[]; area: PeriodArea }) {
  const { x, y, slot, innerWidth, innerHeight } = area;
  const spots = shown.map(({ index, value, signal }) => ({
    x: x(index),
    y: y(value),
    radius: signal ? 9 : spotRadius(slot),
    text: signal ? (periods[index] ?? "") : "",
    must: signal,
    colour: "var(--color-ember)",
  }));
  const places = placeNames(spots, { left: 0, right: innerWidth + 8, top: -18, bottom: innerHeight });
  return (
    <g>
      {shown.map(({ index, value, signal, unstable }) =>
        signal ? (
          <g key={index} transform={`translate(${x(index)},${y(value)})`}>
            <Marker shape="diamond" colour="var(--color-ember)" hollow={unstable} radius={7} />
          </g>
        ) : null,
      )}
      <SpotNames spots={spots} places={places} />
    </g>
  );
}

/**
 * A figure per period against what its exposure lets one expect: the centre line, limits that change in steps, and
 * the periods outside of them as larger diamonds with their names.
 */
export function ControlChart(props: Props) {
  const { periods, points, centre, limitLabel, unit, title, caption, gapNote } = props;
  const placed = periods.map((_, index): Shown | null => {
    const point = points[index];
    return point && Number.isFinite(point.value) ? { ...point, index } : null;
  });
  const shown = placed.filter((point) => point !== null);
  const runs = splitAtGaps(placed);
  const gap = longestGap(placed);
  const last = shown.at(-1);
  const ends = [{ text: centre.label, value: centre.value, colour: "var(--color-ink)" }];
  if (last) ends.push({ text: limitLabel, value: last.upper, colour: "var(--color-soft)" });
  return (
    <PeriodPlot
      {...{ periods, unit, title, caption, ends }}
      reach={reachOf(shown, centre.value)}
      foot={gapNote && gap !== null ? { text: `– ${gapNote}`, index: gap } : undefined}
    >
      {(area) => (
        <g>
          <svg aria-hidden="true" x={0} y={-2} width={area.innerWidth} height={area.innerHeight + 4}>
            <g transform="translate(0,2)">
              {runs.map((run) => (
                <Limits key={run[0]?.index} run={run} area={area} />
              ))}
            </g>
          </svg>
          <line
            x1={0}
            x2={area.innerWidth}
            y1={area.y(centre.value)}
            y2={area.y(centre.value)}
            stroke="var(--color-ink)"
            strokeWidth={1.5}
          />
          {placed.map((point, index) =>
            point ? null : (
              <line
                // biome-ignore lint/suspicious/noArrayIndexKey: a gap is its period
                key={index}
                x1={area.x(index) - Math.min(5, area.slot * 0.35)}
                x2={area.x(index) + Math.min(5, area.slot * 0.35)}
                y1={area.innerHeight - 5}
                y2={area.innerHeight - 5}
                stroke="var(--color-soft)"
                strokeWidth={1.5}
              />
            ),
          )}
          {runs.map((run) => (
            <Figures key={run[0]?.index} run={run} area={area} />
          ))}
          <Signals shown={shown} periods={periods} area={area} />
        </g>
      )}
    </PeriodPlot>
  );
}

export default ControlChart;
