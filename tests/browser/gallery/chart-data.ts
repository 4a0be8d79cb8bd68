import type { ControlPoint } from "~/ui/charts/control-chart";

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
