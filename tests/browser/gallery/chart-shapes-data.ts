import type { BurdenPoint } from "~/ui/charts/burden-chart";
import type { Curve, CurveStep } from "~/ui/charts/step-curve";

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
