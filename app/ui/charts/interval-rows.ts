import type { RateEstimate } from "../rate-bar";
import type { SeriesNumber } from "../series";
import { textWidth } from "./chart-frame";

export type IntervalPoint = {
  series: SeriesNumber;
  /** Words of the series, first in its label: "girls". */
  label: string;
  /** Without one, `note` says why. */
  rate: RateEstimate | null;
  unstable?: boolean;
  /** Replaces the figures in the label: "3 injuries: unstable". */
  note?: string;
};

export type IntervalGroup = { label: string; points: IntervalPoint[] };

/** One line of the chart: where it lies and what it says. `y` is in px from the top of the drawing. */
export type IntervalRow = { key: string; y: number; point: IntervalPoint; text: string };
export type IntervalHeading = { key: string; y: number; label: string };

const wide = { line: 22, gap: 28, top: 14 };
const narrow = { heading: 26, line: 50, gap: 10, top: 8 };

/** The label of a point, with its figures and their interval unless a note stands for them. */
export function describePoint({ label, rate, note, unstable }: IntervalPoint, decimals: number): string {
  if (note) return `${label}, ${note}`;
  if (!rate) return `${label}: no figure`;
  const [estimate, lower, upper] = [rate.estimate, rate.lower, rate.upper].map((value) =>
    value.toFixed(decimals),
  );
  return `${label} ${estimate} (${lower} to ${upper})${unstable ? ", unstable" : ""}`;
}

/** Places every heading and line. `height` is that of the drawing without the axis below it. */
export function layoutRows(groups: IntervalGroup[], isNarrow: boolean, decimals: number) {
  const headings: IntervalHeading[] = [];
  const rows: IntervalRow[] = [];
  let y = isNarrow ? narrow.top : wide.top;
  for (const [groupIndex, group] of groups.entries()) {
    const key = `${groupIndex} ${group.label}`;
    if (isNarrow) {
      headings.push({ key, y: y + 12, label: group.label });
      y += narrow.heading;
    } else {
      headings.push({ key, y: y + ((group.points.length - 1) * wide.line) / 2, label: group.label });
    }
    for (const [index, point] of group.points.entries()) {
      const at = isNarrow ? y + 34 : y;
      rows.push({ key: `${key} ${index}`, y: at, point, text: describePoint(point, decimals) });
      y += isNarrow ? narrow.line : wide.line;
    }
    y += isNarrow ? narrow.gap : wide.gap;
  }
  return { headings, rows, height: y };
}

/**
 * Where a label stands: behind its line when there is room up to `right`, else before it, else above it. All in px
 * of the drawing, which starts at 0; `left` is how far a label may reach to the other side of the axis.
 */
export function placeLabel(text: string, from: number, to: number, right: number) {
  const width = textWidth(text);
  if (to + 11 + width <= right) return { x: to + 11, anchor: "start", above: false } as const;
  if (from - 11 - width >= 4) return { x: from - 11, anchor: "end", above: false } as const;
  return { x: Math.max(0, right - width), anchor: "start", above: true } as const;
}
