import type { ReactNode } from "react";
import { formatTick, niceScale } from "../scale";
import { type SeriesNumber, seriesLook } from "../series";
import { ChartFrame, textWidth, ticksThatFit } from "./chart-frame";
import { EndWords } from "./end-words";
import { AxisWords, Plot, type PlotArea, tickRoom } from "./plot";
import { linePath } from "./svg-path";

/** From `x` on, up to the next step, the curve is at `y`; all of `y` are shares from 0 to 1. */
export type CurveStep = { x: number; y: number; lower: number; upper: number };

export type Curve = {
  series: SeriesNumber;
  label: string;
  /** By rising `x`. */
  steps: CurveStep[];
  /** Times at which the watch over someone ended without the event, in the unit of `x`. */
  censored: number[];
};

type Props = {
  curves: Curve[];
  /** Share at 0, before the first step: 1 for a curve of those left. */
  start: number;
  xUnit: string;
  yUnit: string;
  /** A level line such as one half, with its words at its end. */
  mark?: { y: number; label: string };
  title: string;
  caption?: ReactNode;
};

const isFigure = ({ x, y, lower, upper }: CurveStep) => [x, y, lower, upper].every(Number.isFinite) && x >= 0;

/** Where a curve ends: at its last step or at the last end of a watch, whichever is later. */
function endOf({ steps, censored }: Curve): number {
  return Math.max(0, ...steps.filter(isFigure).map(({ x }) => x), ...censored.filter(Number.isFinite));
}

/** The height at `x`: that of the last step at or before it. */
function heightAt(steps: CurveStep[], x: number): number | undefined {
  return steps.findLast((step) => step.x <= x)?.y;
}

/** Corners of one edge of the curve, with the level piece first and then the fall. */
function corners(steps: CurveStep[], end: number, edge: "y" | "lower" | "upper", area: PlotArea) {
  return steps.flatMap((step, index) => {
    const next = steps[index + 1]?.x ?? end;
    const y = area.y(step[edge]);
    return [
      { x: area.x(step.x), y },
      { x: area.x(next), y },
    ];
  });
}

function Steps({ curve, start, area }: { curve: Curve; start: number; area: PlotArea }) {
  const { colour, dash } = seriesLook(curve.series);
  const end = endOf(curve);
  const steps = [{ x: 0, y: start, lower: start, upper: start }, ...curve.steps.filter(isFigure)];
  const there = corners(steps, end, "upper", area);
  const back = corners(steps, end, "lower", area).reverse();
  return (
    <g>
      <path d={`${linePath([...there, ...back])}Z`} fill={colour} opacity={0.16} />
      <path
        d={linePath(corners(steps, end, "y", area))}
        fill="none"
        stroke={colour}
        strokeWidth={2.5}
        strokeDasharray={dash}
      />
      {[...new Set(curve.censored.filter((time) => Number.isFinite(time) && time >= 0))].map((time) => {
        const y = area.y(heightAt(steps, time) ?? start);
        return (
          <line
            key={time}
            x1={area.x(time)}
            x2={area.x(time)}
            y1={y - 6}
            y2={y + 6}
            stroke={colour}
            strokeWidth={1.5}
          />
        );
      })}
    </g>
  );
}

const yAxis = { min: 0, max: 1, ticks: [0, 0.25, 0.5, 0.75, 1] };
const percent = (share: number) => `${formatTick(share * 100)} %`;

/** The words at the end of each curve and of the mark; a curve that ends early has them behind its end. */
function wordsOf({ curves, start, mark }: Pick<Props, "curves" | "start" | "mark">, area: PlotArea) {
  const words = curves.map((curve) => ({
    text: curve.label,
    y: area.y(heightAt(curve.steps.filter(isFigure), Number.POSITIVE_INFINITY) ?? start),
    colour: seriesLook(curve.series).textColour,
    x: Math.min(
      area.innerWidth + 10,
      Math.max(area.x(endOf(curve)) + 10, area.innerWidth < 400 ? area.innerWidth + 10 : 0),
    ),
  }));
  return mark ? [...words, { text: mark.label, y: area.y(mark.y), colour: "var(--color-ink)" }] : words;
}

/**
 * Shares over time as right-continuous steps, each with its limits as a stepped band; ticks on a curve are times at
 * which a watch ended without the event.
 */
export function StepCurve(props: Props) {
  const { curves, start, xUnit, yUnit, mark, title, caption } = props;
  const scale = niceScale(Math.max(0, ...curves.map(endOf)));
  const texts = [...curves.map(({ label }) => label), mark?.label ?? ""];
  const endRoom = Math.min(200, Math.max(24, ...texts.map((text) => textWidth(text) + 16)));
  return (
    <ChartFrame caption={caption} wideHeight={400} narrowHeight={380}>
      {({ width, height, narrow }) => {
        const y = { ...yAxis, format: percent };
        const left = tickRoom(y);
        const right = narrow ? Math.min(endRoom, 96) : endRoom;
        const spacing = (width - left - right) / Math.max(1, scale.ticks.length - 1);
        const shown = new Set(ticksThatFit(scale.ticks.map(formatTick), spacing));
        const ticks = scale.ticks.filter((_, index) => shown.has(index));
        return (
          <Plot
            width={width}
            height={height}
            margin={{ top: 40, right, bottom: 62, left }}
            x={{ min: 0, max: scale.max, ticks }}
            y={y}
            title={title}
          >
            {(area) => (
              <g>
                <AxisWords left={left} top={-20} y={yUnit} bottom={area.innerHeight + 54} x={xUnit} />
                {mark ? (
                  <line
                    x1={0}
                    x2={area.innerWidth}
                    y1={area.y(mark.y)}
                    y2={area.y(mark.y)}
                    stroke="var(--color-ink)"
                    strokeWidth={2}
                    strokeDasharray="2 4"
                  />
                ) : null}
                {curves.map((curve, index) => (
                  // biome-ignore lint/suspicious/noArrayIndexKey: two curves may share a series
                  <Steps key={index} curve={curve} start={start} area={area} />
                ))}
                <EndWords
                  words={wordsOf({ curves, start, mark }, area)}
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

export default StepCurve;
