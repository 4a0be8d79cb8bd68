import type { ReactElement, ReactNode } from "react";
import { niceScale } from "../scale";
import { ChartFrame, textWidth } from "./chart-frame";
import { EndWords } from "./end-words";
import { AxisWords, Plot, type PlotArea, tickRoom } from "./plot";

/** A line's words at its right end, at the height of `value`. */
export type PeriodEnd = { text: string; value: number; colour: string };

export type PeriodArea = PlotArea & {
  /** Width of one period in px; period `index` lies around `x(index)`. */
  slot: number;
};

type Props = {
  periods: string[];
  /** What the axis counts, written above it. */
  unit: string;
  title: string;
  caption?: ReactNode;
  /** The largest figure to be seen; the axis ends at a round number above it. */
  reach: number;
  ends: PeriodEnd[];
  /** A line below the names of the periods. */
  foot?: { text: string; index: number };
  children: (area: PeriodArea) => ReactElement;
};

/** Indexes of the periods whose names are written, so that none touches the next. `slot` in px. */
export function namedPeriods(periods: string[], slot: number): number[] {
  const widest = Math.max(1, ...periods.map(textWidth));
  const every = Math.max(1, Math.ceil((widest + 10) / Math.max(slot, 0.1)));
  return periods.map((_, index) => index).filter((index) => index % every === 0);
}

/** Radius of a spot that still leaves the spots beside it apart, in px. */
export function spotRadius(slot: number): number {
  return Math.min(5, Math.max(1.8, slot * 0.36));
}

function Foot({ text, at, innerWidth, y }: { text: string; at: number; innerWidth: number; y: number }) {
  const half = textWidth(text) / 2;
  // The middle of its period as far as the words then stay inside.
  const x = Math.max(half - 30, Math.min(at, innerWidth + 12 - half));
  return (
    <text x={x} y={y} textAnchor="middle" fontSize={15} fill="var(--color-soft)">
      {text}
    </text>
  );
}

/** The ground of a chart by period: an axis from 0, the periods' names below, and each line's words at its end. */
export function PeriodPlot({ periods, unit, title, caption, reach, ends, foot, children }: Props) {
  const scale = niceScale(reach);
  const yAxis = { min: 0, ...scale };
  const endRoom = Math.min(170, Math.max(24, ...ends.map(({ text }) => textWidth(text) + 16)));
  const footRoom = foot ? 22 : 0;
  return (
    <ChartFrame caption={caption} wideHeight={340 + footRoom} narrowHeight={320 + footRoom}>
      {({ width, height, narrow }) => {
        const left = tickRoom(yAxis);
        const right = narrow ? Math.min(endRoom, 96) : endRoom;
        const slot = Math.max(0, width - left - right) / Math.max(1, periods.length);
        return (
          <Plot
            width={width}
            height={height}
            margin={{ top: 40, right, bottom: 36 + footRoom, left }}
            x={{
              min: -0.5,
              max: Math.max(0.5, periods.length - 0.5),
              ticks: namedPeriods(periods, slot),
              format: (index) => periods[index] ?? "",
            }}
            y={yAxis}
            title={title}
          >
            {(area) => (
              <g>
                <AxisWords left={left} top={-20} y={unit} />
                {foot ? (
                  <Foot
                    text={foot.text}
                    at={area.x(foot.index)}
                    innerWidth={area.innerWidth}
                    y={area.innerHeight + 52}
                  />
                ) : null}
                {children({ ...area, slot })}
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
