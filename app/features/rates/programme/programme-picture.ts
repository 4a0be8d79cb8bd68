import type { IntervalGroup } from "~/ui/charts/interval-chart";
import type { SeriesNumber } from "~/ui/series";
import type { Figure, TableData, TableRow } from "../tables";
import { isFigure } from "../tables";

/** The rates of a comparison as its picture shows them: session kinds one under the other, groups side by side. */

export type ContrastPicture = { groups: IntervalGroup[]; max: number };

/** What a group is called in the picture, by the beginning of its row's key, in the order of the series. */
export type ShortNames = readonly (readonly [group: string, label: string])[];

/** Behind the longest interval there is room for its words. */
const roomForWords = 1.3;

const rateOf = ({ cells }: TableRow): Figure | null => (isFigure(cells.rate) ? cells.rate : null);

/**
 * The end of the axis: a group with next to no exposure has an interval many times longer than the others'. Made for rates
 * from two injuries or more, where there are any.
 */
function endOf(rows: readonly TableRow[]): number {
  const reach = (list: readonly TableRow[]) => Math.max(0, ...list.map((row) => rateOf(row)?.upper ?? 0));
  const several = reach(rows.filter(({ cells }) => Number(cells.injuries) >= 2));
  return (several > 0 ? several : reach(rows)) * roomForWords;
}

function pointOf(row: TableRow, series: SeriesNumber, label: string, max: number) {
  const rate = rateOf(row);
  if (!rate || rate.lower === null || rate.upper === null)
    return { series, label, rate: null, note: "no rate" };
  if (rate.upper > max)
    return { series, label, rate: null, note: "too little exposure for this axis: see the table" };
  const { estimate, lower, upper, unstable = false } = rate;
  return { series, label, rate: { estimate, lower, upper }, unstable };
}

/** @param names every group that is drawn; others stand in the table only */
export function contrastPicture({ rows }: TableData, names: ShortNames): ContrastPicture {
  const drawn = rows.filter(({ key }) => names.some(([id]) => key.startsWith(`${id} `)));
  const max = endOf(drawn);
  const sessions = [...new Set(drawn.map(({ cells }) => String(cells.sessions)))];
  return {
    max,
    groups: sessions.map((label) => ({
      label,
      points: names.flatMap(([id, name], index) => {
        const row = drawn.find(({ key, cells }) => key.startsWith(`${id} `) && cells.sessions === label);
        return row ? [pointOf(row, (index + 1) as SeriesNumber, name, max)] : [];
      }),
    })),
  };
}
