import type { BurdenPoint } from "~/ui/charts/burden-chart";
import type { GridRow } from "~/ui/charts/period-grid";
import type { Curve, CurveStep } from "~/ui/charts/step-curve";
import type { SideRow } from "~/ui/charts/two-sided-bars";

/** Invented figures, the same at every drawing. */
function curve(series: 1 | 2, label: string, count: number, pace: number): Curve {
  const steps = Array.from({ length: count }, (_, index): CurveStep => {
    const y = 1 - (index + 1) / (count + 2);
    const half = 1.96 * Math.sqrt((y * (1 - y)) / count);
    return {
      x: Math.round(pace * (index + 1) ** 1.5 + (index % 3)),
      y,
      lower: Math.max(0, y - half),
      upper: Math.min(1, y + half),
    };
  });
  return { series, label, steps, censored: [pace * 12, pace * 31, pace * 70].map(Math.round) };
}

export const curves = [curve(1, "girls", 16, 2), curve(2, "boys", 20, 1.1)];

const areas: [string, number, number, number][] = [
  ["ankle", 9, 1.21, 34],
  ["knee", 38, 0.62, 18],
  ["thigh", 14, 0.91, 26],
  ["groin and hip", 16, 0.4, 11],
  ["head", 12, 0.33, 9],
  ["shoulder", 19, 0.2, 6],
  ["lower leg", 11, 0.38, 11],
  ["foot", 13, 0.17, 5],
  ["lower back and pelvis", 18, 0.14, 4],
  ["wrist and hand", 6, 0.3, 8],
  ["elbow", 8, 0.06, 2],
  ["neck", 3, 0.05, 1],
];
export const burdenPoints = areas.map(
  ([label, x, y, events]): BurdenPoint => ({ label, x, y, events, unstable: events < 5 }),
);
export const burdenCurves = [
  { value: 1, label: "1 day lost" },
  { value: 5, label: "5 days lost" },
  { value: 20, label: "20 days lost" },
];

const side = (value: number, events: number) => ({
  value,
  lower: Math.max(0, value - (1.96 * value) / Math.sqrt(events)),
  upper: value + (2.1 * value) / Math.sqrt(events),
  events,
  unstable: events < 5,
});
export const sides: SideRow[] = [
  { label: "ankle", left: side(0.54, 15), right: side(0.67, 19) },
  { label: "knee", left: side(0.36, 10), right: side(0.26, 8), middle: { text: "side unknown: 2" } },
  { label: "thigh", left: side(0.4, 11), right: side(0.52, 15) },
  { label: "groin and hip", left: side(0.15, 4), right: side(0.25, 7) },
  { label: "lower back and pelvis", left: side(0.04, 1), right: null, middle: { text: "without a side: 3" } },
  {
    label: "wrist and hand",
    left: null,
    right: { value: 0, lower: 0, upper: 0.11, events: 0, unstable: true },
  },
];

const gridMonths = ["Aug", "Sep", "Oct", "Nov", "Dec", "Jan", "Feb", "Mar", "Apr", "May"];
export const gridPeriods = Array.from({ length: 42 }, (_, index) => ({
  short: gridMonths[Math.floor((index * 7) / 30.4)] ?? "",
  long: `week ${index + 1}`,
}));
export const gridRows: GridRow[] = [
  "Girls under 14",
  "Girls under 16",
  "Boys under 18, second team",
  "Women",
].map((label, row) => ({
  label,
  href: row === 1 ? undefined : `/teams/${row}`,
  cells: gridPeriods.map((_, index) => {
    if (row === 3 || index === 20 || index === 21 || (index * 7 + row) % 17 === 0) return null;
    const done = Math.max(
      0,
      Math.min(4, Math.round(2.6 + row * 0.5 + 2.4 * Math.sin(index * 0.7 + row * 2))),
    );
    return { share: done / 4, text: `${done} of 4` };
  }),
}));
