import { group as groupBy } from "d3-array";
import { type RateRatio, rateRatio } from "~/statistics";
import type { BodyArea, Side } from "~db/schema/codes";
import { bodyAreaWords, sentenceCase, sideWords } from "../../vocabulary";
import { denominator, type InjuryRow } from "../counting";
import { type Coverage, stableFrom } from "../coverage";
import type { RatesFilters } from "../filters";
import type { Group } from "../groups";
import { type RateRow, rateRow } from "../rates";
import { type Counts, type Selection, select } from "../selection";

/** Injuries and days lost by body area and side. Pure. Every area and each side has the whole exposure under it. */

type Lost = {
  injuries: number;
  daysLost: number;
  /** Of the days lost of every area and side, from 0 to 1; null while none were. */
  daysShare: number | null;
  /** The longest injury's share of the row's own days; 0 without days. */
  largestShare: number;
};
export type AreaRow = Omit<RateRow, "injuries"> & Lost & { area: BodyArea };
export type SideRow = AreaRow & { side: Side };

export type AreaWithSides = AreaRow & {
  /** A side without an injury is a rate of 0; null where no injury of the area is of the left or the right. */
  left: SideRow | null;
  right: SideRow | null;
  /** What has both sides, none, or one that is not known. */
  middle: SideRow[];
  /** Left against right over the same exposure; null with fewer than 5 injuries of both, or withheld. */
  ratio: RateRatio | null;
};

export type BodyAreas = {
  /** Those with injuries: the most days lost first, then the most injuries. */
  areas: AreaWithSides[];
  total: RateRow & Lost;
  /** Of every area and side, also where the view is narrowed to some. */
  allDays: number;
  coverage: Coverage;
  /** Nobody looked at has reported: that is not the same as no injuries. */
  unreported: boolean;
};

const middleSides = ["both", "none", "unknown"] as const satisfies readonly Side[];

const sumDays = (injuries: readonly InjuryRow[]) => injuries.reduce((sum, { daysLost }) => sum + daysLost, 0);

const asGroup = (key: string, label: string): Group => ({ key, label, sex: null, band: null, teamId: null });

/** Counts some of the injuries over the exposure of all. */
function rowMaker({ exposure, coverage }: Selection, unit: RatesFilters["per"], all: number) {
  return (group: Group, injuries: readonly InjuryRow[]): RateRow & Lost => {
    const days = sumDays(injuries);
    return {
      ...rateRow({ group, events: injuries.length, exposure, unit, coverage }),
      injuries: injuries.length,
      daysLost: days,
      daysShare: all === 0 ? null : days / all,
      largestShare: days === 0 ? 0 : Math.max(...injuries.map(({ daysLost }) => daysLost)) / days,
    };
  };
}

/** Left over right. Both sides are exposed in the same sessions, so the exposures are equal and the counts decide. */
function compareSides(left: number, right: number, exposure: number): RateRatio | null {
  if (left + right < stableFrom || exposure <= 0) return null;
  return rateRatio({ events: left, exposure }, { events: right, exposure });
}

/** Body areas of a view. */
export function bodyAreasOf(counts: Counts, filters: RatesFilters): BodyAreas {
  const selection = select(counts, filters);
  const { counted, exposure, coverage } = selection;
  const allDays = sumDays(select(counts, { ...filters, area: "any", side: "any" }).counted);
  const make = rowMaker(selection, filters.per, allDays);
  const amount = denominator(exposure, filters.per);
  const isWithheld = coverage.state === "withheld";
  const areas = [...groupBy(counted, ({ bodyArea }) => bodyArea)].map(([area, injuries]): AreaWithSides => {
    const words = bodyAreaWords[area];
    const ofSide = (side: Side) => injuries.filter((injury) => injury.side === side);
    const sideRow = (side: Side): SideRow => ({
      ...make(asGroup(`${area} ${side}`, sentenceCase(`${words}, ${sideWords[side]}`)), ofSide(side)),
      ...{ area, side },
    });
    const [left, right] = [sideRow("left"), sideRow("right")];
    const hasSides = left.injuries + right.injuries > 0;
    const isOneSided = filters.side === "left" || filters.side === "right";
    return {
      ...make(asGroup(area, sentenceCase(words)), injuries),
      area,
      left: hasSides ? left : null,
      right: hasSides ? right : null,
      middle: middleSides.map(sideRow).filter((row) => row.injuries > 0),
      ratio: isOneSided || isWithheld ? null : compareSides(left.injuries, right.injuries, amount),
    };
  });
  return {
    areas: areas.sort(
      (a, b) => b.daysLost - a.daysLost || b.injuries - a.injuries || (a.area < b.area ? -1 : 1),
    ),
    total: make(asGroup("total", "All together"), counted),
    allDays,
    coverage,
    unreported: selection.cells.length === 0 && selection.silent.length > 0,
  };
}
