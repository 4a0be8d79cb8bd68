import type { IntervalGroup } from "~/ui/charts/interval-chart";
import type { SeriesNumber } from "~/ui/series";
import type { CountedSex } from "./counting";
import type { RatesFilters } from "./filters";
import type { RateRow } from "./rates";

/** The series of a row: each sex has its own colour, marker and dash; anything else is of one kind. */
export function seriesOf({ sex }: RateRow): SeriesNumber {
  if (sex === "male") return 2;
  if (sex === "not_stated") return 3;
  return sex === "unknown" ? 4 : 1;
}

/** The name of a sex in the picture of a band. */
const pictureName = (sex: CountedSex, label: string) =>
  sex === "unknown" ? "above the roster" : (label.split(",")[0] ?? "").toLowerCase();

const injuries = (count: number) => `${count} ${count === 1 ? "injury" : "injuries"}`;

function pointOf(row: RateRow, label: string): IntervalGroup["points"][number] {
  const series = seriesOf(row);
  if (!row.rate)
    return {
      series,
      label: label || "no rate",
      rate: null,
      note: row.reason?.split(":")[0] ?? "not computed",
    };
  if (!row.unstable) return { series, label, rate: row.rate };
  const note = `${row.injuries === 0 ? "no injuries" : injuries(row.injuries ?? 0)}: unstable`;
  return label
    ? { series, label, rate: row.rate, unstable: true, note }
    : { series, label: note, rate: row.rate, unstable: true };
}

/** The rows as the picture groups them: the sexes side by side in each age band, anything else a line of its own. */
export function pictureGroups(rows: readonly RateRow[], by: RatesFilters["by"]): IntervalGroup[] {
  if (by !== "sex-age") {
    return rows.map((row) => {
      const point = pointOf(row, "");
      const figures = row.unstable && row.rate ? { ...point, label: "", note: undefined } : point;
      return { label: row.label, points: [figures] };
    });
  }
  const bands = [...new Set(rows.flatMap(({ band }) => band ?? []))];
  return bands.map((band) => ({
    label: band,
    points: rows
      .filter((row) => row.band === band)
      .map((row) => pointOf(row, row.sex ? pictureName(row.sex, row.label) : "")),
  }));
}

/** The middle of the upper limits: what an axis is made for where no figure is stable; 0 without any. */
export function medianUpper(uppers: readonly number[]): number {
  const finite = uppers.filter((upper) => upper > 0 && Number.isFinite(upper)).sort((a, b) => a - b);
  return finite[Math.floor(finite.length / 2)] ?? 0;
}

/**
 * The end of the axis. One injury in a handful of sessions has an interval many times longer than the others', so the
 * axis is made for groups of two injuries or more, and never beyond four times the stable ones.
 */
export function axisEnd(rows: readonly RateRow[]): number {
  const reach = (list: readonly RateRow[]) => Math.max(0, ...list.map(({ rate }) => rate?.upper ?? 0));
  const stable = reach(rows.filter(({ unstable }) => !unstable));
  const several = reach(rows.filter(({ injuries: count }) => (count ?? 0) >= 2));
  if (several === 0) return Math.min(reach(rows), 2 * medianUpper(rows.map(({ rate }) => rate?.upper ?? 0)));
  return stable === 0 ? several : Math.min(several, stable * 4);
}

/** The rows that the picture can show: the others' intervals run over its axis, and stand in the table. */
export function picturedRows(rows: readonly RateRow[]): RateRow[] {
  const end = axisEnd(rows);
  return rows.filter(({ rate, denominator: exposure }) => (rate ? rate.upper <= end : (exposure ?? 0) > 0));
}

/**
 * The name of the rate that groups are held against. Of some teams, without the club's own rate beside it, it must not
 * go by the name of all.
 */
export const referenceNameOf = (
  { isPart, club }: { isPart: boolean; club: RateRow | null },
  scopeName: string,
) => (isPart && !club ? scopeName : "all teams");
