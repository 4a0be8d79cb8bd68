import type { RateEstimate } from "../rate-bar";
import type { SeriesNumber } from "../series";
import { textWidth } from "./chart-frame";
import { wrapWords } from "./end-labels";
import { intervalWords } from "./interval-words";

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

/**
 * One line of the chart: where it lies and what it says, wrapped for a narrow screen in `lines`. `y` is in px from the
 * top of the drawing, of a heading that of its first line.
 */
export type IntervalRow = { key: string; y: number; point: IntervalPoint; text: string; lines: string[] };
export type IntervalHeading = { key: string; y: number; lines: string[] };

/** Widths of words in px by the estimate of `textWidth`; a heading is a little larger than that allows for. */
const wide = { line: 22, gap: 28, top: 14, words: 280 };
const narrow = { heading: 26, line: 50, gap: 10, top: 8, words: 300, headingWords: 265 };
/** From one line of words to the next. */
export const wordLine = 19;

/** The label of a point, with its figures and their interval unless a note stands for them. */
export function describePoint(
  { label, rate, note, unstable }: IntervalPoint,
  decimals: number,
  ratios = false,
): string {
  if (note) return `${label}, ${note}`;
  if (!rate || !Number.isFinite(rate.estimate)) return `${label}: no figure`;
  const words = `${rate.estimate.toFixed(decimals)} (${intervalWords(rate, decimals, ratios)})`;
  return `${label} ${words}${unstable ? ", unstable" : ""}`;
}

/** Places every heading and line. `height` is that of the drawing without the axis below it. */
export function layoutRows(groups: IntervalGroup[], isNarrow: boolean, decimals: number, ratios = false) {
  const headings: IntervalHeading[] = [];
  const rows: IntervalRow[] = [];
  let y = isNarrow ? narrow.top : wide.top;
  for (const [groupIndex, group] of groups.entries()) {
    const key = `${groupIndex} ${group.label}`;
    const words = wrapWords(group.label, isNarrow ? narrow.headingWords : wide.words);
    const more = (words.length - 1) * wordLine;
    if (isNarrow) {
      headings.push({ key, y: y + 12, lines: words });
      y += narrow.heading + more;
    } else {
      // A heading of several lines stands around the middle of its group, which is made as high as it needs.
      const short = Math.max(0, more - (group.points.length - 1) * wide.line - wide.gap / 2);
      y += short / 2;
      headings.push({ key, y: y + ((group.points.length - 1) * wide.line - more) / 2, lines: words });
    }
    for (const [index, point] of group.points.entries()) {
      const text = describePoint(point, decimals, ratios);
      const lines = isNarrow ? wrapWords(text, narrow.words) : [text];
      const above = (lines.length - 1) * wordLine;
      const at = isNarrow ? y + 34 + above : y;
      rows.push({ key: `${key} ${index}`, y: at, point, text, lines });
      y += isNarrow ? narrow.line + above : wide.line;
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
