import type { BurdenPoint } from "~/ui/charts/burden-chart";
import type { Curve } from "~/ui/charts/step-curve";
import type { SeriesNumber } from "~/ui/series";
import type { CountedSex } from "../counting";
import { decimalsFor, formatRate } from "../figures";
import type { ReturnCurve, Severity } from "./severity";

/** What the pictures of severity draw. Pure. */

/** Days per injury against injuries per 1000 hours; without injuries or days a group has no place in it. */
export function burdenPoints({ rows }: Pick<Severity, "rows">): BurdenPoint[] {
  return rows.flatMap((row) => {
    const { rate, injuries, daysLost, label, unstable } = row;
    if (!rate || !injuries || daysLost === 0) return [];
    return [{ label, x: rate.estimate, y: daysLost / injuries, unstable, events: injuries }];
  });
}

/** Round figures: 1, 2 or 5 times a power of ten. */
function roundFigures(from: number, to: number): number[] {
  const figures: number[] = [];
  for (let power = Math.floor(Math.log10(from)); power <= Math.ceil(Math.log10(to)); power++)
    for (const lead of [1, 2, 5]) figures.push(Number(`${lead}e${power}`));
  return figures.filter((figure) => figure >= from && figure <= to);
}

/** At most four lines of equal burden through the points, each with its words. */
export function equalBurdens(points: readonly BurdenPoint[]): { value: number; label: string }[] {
  const burdens = points.map(({ x, y }) => x * y);
  if (burdens.length === 0) return [];
  // A little beyond the points, so that one line lies on each side of them.
  const figures = roundFigures(Math.min(...burdens) / 2, Math.max(...burdens) * 2);
  const every = Math.ceil(figures.length / 4);
  return figures
    .filter((_, index) => index % every === 0)
    .map((value) => ({ value, label: `${formatRate(value, value >= 1 ? 0 : decimalsFor([value]))} days` }));
}

const drawn = (label: string, series: SeriesNumber, { steps, censored }: ReturnCurve): Curve => ({
  series,
  label,
  steps: steps.map(({ time, survival, lower, upper }) => ({ x: time, y: survival, lower, upper })),
  censored,
});

const seriesOfSex: Record<CountedSex, SeriesNumber> = { female: 1, male: 2, not_stated: 3, unknown: 4 };

/** The curve of all injuries, and those of two or three large groups. */
export function returnCurves({ total, comparison }: Severity): { whole: Curve[]; groups: Curve[] } {
  const groups = comparison?.groups ?? [];
  // Sexes keep their series wherever they are drawn; other groups are told apart by their place.
  const isOfSexes = new Set(groups.map(({ group }) => group.sex)).size === groups.length;
  return {
    whole: total.curve ? [drawn("all injuries", 1, total.curve)] : [],
    groups: groups.map(({ group, curve }, index) => {
      const series = isOfSexes && group.sex ? seriesOfSex[group.sex] : ((index + 1) as SeriesNumber);
      return drawn(group.label, series, curve);
    }),
  };
}
