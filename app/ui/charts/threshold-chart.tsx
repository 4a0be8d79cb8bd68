import type { ReactNode } from "react";
import { Marker } from "../marker";
import { splitAtGaps } from "./gaps";
import { placeNames } from "./name-places";
import { type PeriodArea, PeriodPlot } from "./period-plot";
import { SpotNames } from "./spot-names";
import { levelPath } from "./svg-path";

type Props = {
  periods: string[];
  /** The running sum after each period, in order; null where there is no figure: the line breaks there. */
  values: (number | null)[];
  threshold: { value: number; label: string };
  /** Indexes of the periods in which the sum crossed the threshold. */
  crossings: number[];
  /** What the axis counts, written above it. */
  unit: string;
  title: string;
  caption?: ReactNode;
};

type Level = { index: number; value: number };

/** The sum as a line with a level piece per period; the first piece rises from 0. */
function Levels({ run, area }: { run: Level[]; area: PeriodArea }) {
  const { x, y, slot, innerHeight } = area;
  const places = run.map(({ index, value }) => ({ x: x(index), y: y(value) }));
  const [first, last] = [run[0], run.at(-1)];
  if (!first || !last) return null;
  const line = levelPath(places, slot);
  const start = x(first.index) - slot / 2;
  const end = x(last.index) + slot / 2;
  const fromZero = first.index === 0 ? `M${start} ${innerHeight}L${line.slice(1)}` : line;
  return (
    <g>
      <path
        d={`${line}L${end} ${innerHeight}L${start} ${innerHeight}Z`}
        fill="var(--color-series-1)"
        opacity={0.1}
      />
      <path d={fromZero} fill="none" stroke="var(--color-series-1)" strokeWidth={slot < 8 ? 2 : 2.5} />
    </g>
  );
}

function Crossings({ crossed, periods, area }: { crossed: Level[]; periods: string[]; area: PeriodArea }) {
  const spots = crossed.map(({ index, value }) => ({
    x: area.x(index),
    y: area.y(value),
    radius: 9,
    text: periods[index] ?? "",
    must: true,
    colour: "var(--color-ember)",
  }));
  const bounds = { left: 0, right: area.innerWidth + 8, top: -18, bottom: area.innerHeight };
  return (
    <g>
      {spots.map(({ x, y }) => (
        <g key={x} transform={`translate(${x},${y})`}>
          <Marker shape="diamond" colour="var(--color-ember)" radius={7} />
        </g>
      ))}
      <SpotNames spots={spots} places={placeNames(spots, bounds)} />
    </g>
  );
}

/** A running sum from 0 with the threshold above it; the periods that crossed it are marked and named. */
export function ThresholdChart(props: Props) {
  const { periods, values, threshold, crossings, unit, title, caption } = props;
  const placed = periods.map((_, index): Level | null => {
    const value = values[index] ?? null;
    return value !== null && Number.isFinite(value) ? { index, value } : null;
  });
  const shown = placed.filter((level) => level !== null);
  const marked = new Set(crossings);
  return (
    <PeriodPlot
      {...{ periods, unit, title, caption }}
      reach={Math.max(threshold.value * 1.15, ...shown.map(({ value }) => value * 1.05))}
      ends={[{ text: threshold.label, value: threshold.value, colour: "var(--color-ink)" }]}
    >
      {(area) => (
        <g>
          {splitAtGaps(placed).map((run) => (
            <Levels key={run[0]?.index} run={run} area={area} />
          ))}
          <line
            x1={0}
            x2={area.innerWidth}
            y1={area.y(threshold.value)}
            y2={area.y(threshold.value)}
            stroke="var(--color-ink)"
            strokeWidth={2}
            strokeDasharray="6 4"
          />
          <Crossings crossed={shown.filter(({ index }) => marked.has(index))} periods={periods} area={area} />
        </g>
      )}
    </PeriodPlot>
  );
}

export default ThresholdChart;
