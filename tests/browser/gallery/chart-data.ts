import type { ControlPoint } from "~/ui/charts/control-chart";
import type { IntervalGroup } from "~/ui/charts/interval-chart";
import type { BandSeries } from "~/ui/charts/line-with-band";

/** Invented figures, the same at every drawing. */
const wave = (index: number, step: number) => Math.sin(index * step) + Math.sin(index * step * 2.7) * 0.5;
/** Sixty weeks, named by their first day. */
export const weeks = Array.from({ length: 60 }, (_, index) =>
  new Date(Date.UTC(2025, 7, 4 + index * 7)).toLocaleDateString("en-GB", { day: "numeric", month: "short" }),
);

export const controlPoints = weeks.map((_, index): ControlPoint | null => {
  if (index === 20 || index === 21 || index === 45) return null;
  const exposure = 260 + 90 * wave(index, 0.4) - (index === 33 ? 200 : 0);
  const spread = Math.sqrt(3.1 / exposure) * 55;
  const value = Math.max(0, 3.1 + wave(index, 1.3) * 1.7 + (index === 30 || index === 31 ? 8 : 0));
  return {
    value,
    lower: Math.max(0, 3.1 - spread),
    upper: 3.1 + spread,
    signal: value > 3.1 + spread,
    unstable: index % 7 === 3,
  };
});

export const sums = controlPoints.map((point, index) =>
  point === null ? null : Math.max(0, 1.2 + wave(index, 0.17) * 2.2 + (index > 38 && index < 46 ? 4 : 0)),
);

const teams = ["Girls under 12", "Girls under 14", "Girls under 16", "Girls under 18", "Boys under 12"];
const more = [
  "Boys under 14",
  "Boys under 16",
  "Boys under 18",
  "Women",
  "Men",
  "Mixed under 10",
  "Wheelchair",
];
export const funnelPoints = [...teams, ...more].map((label, index) => {
  const exposure = label === "Wheelchair" ? 90 : 600 + ((index * 733) % 3400);
  const rate = index === 2 ? 6.4 : index === 9 ? 1.0 : 3.1 + wave(index, 1.7) * Math.sqrt(900 / exposure);
  return { label, exposure, rate, outside: index === 2 || index === 9, unstable: exposure < 900 };
});
const funnelLimit = (label: string, z: number) => ({
  label,
  points: Array.from({ length: 80 }, (_, index) => {
    const exposure = 50 + index * 50;
    const half = z * Math.sqrt(3.1 / exposure) * 31.6;
    return { exposure, lower: Math.max(0, 3.1 - half), upper: 3.1 + half };
  }),
});
export const funnelLimits = [funnelLimit("95 %", 1.96), funnelLimit("99.8 %", 3.09)];

const ratio = (estimate: number, lower: number, upper: number) => ({ estimate, lower, upper });
export const ratios: IntervalGroup[] = [
  { label: "soccer", points: [{ series: 1, label: "girls", rate: ratio(1.62, 0.98, 2.6) }] },
  { label: "basketball", points: [{ series: 1, label: "girls", rate: ratio(0.74, 0.31, 1.6) }] },
  {
    label: "handball",
    points: [{ series: 1, label: "girls", rate: ratio(3.1, 0.42, Number.POSITIVE_INFINITY), unstable: true }],
  },
  {
    label: "rugby union in the league of the northern counties, second teams",
    points: [{ series: 1, label: "girls", rate: ratio(0.3, 0, 1.9), unstable: true }],
  },
  { label: "volleyball", points: [{ series: 1, label: "girls", rate: ratio(9, 1.4, 61) }] },
  { label: "athletics", points: [{ series: 1, label: "girls", rate: null, note: "no exposure" }] },
];
const band = (series: 1 | 2 | 3, label: string, level: number): BandSeries => ({
  series,
  label,
  points: weeks.map((_, index) => {
    if ((index + series * 9) % 31 === 0) return null;
    const estimate = Math.max(0, level + wave(index + series * 5, 0.5));
    return {
      estimate,
      lower: Math.max(0, estimate - 1.2),
      upper: estimate + 1.7,
      unstable: (index + series) % 6 === 0,
    };
  }),
});
export const bands = [band(1, "girls", 3.4), band(2, "boys", 2.6), band(3, "mixed teams", 3)];
