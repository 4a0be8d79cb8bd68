import { type SeverityBand, severityBand, severityBands } from "~/statistics";
import type { ExposureCell, InjuryRow } from "../counting";
import { type Grouping, splitsExposure } from "../filters";
import { groupKey, listGroups, placeCell, placeInjury } from "../groups";
import type { Counts, Selection } from "../selection";

/** The records behind one figure of the rates. Pure. */
export type FigurePart = {
  by: Grouping;
  /** Key of one group of the grouping; null: all of them. */
  group: string | null;
  severity: SeverityBand | null;
  /** Only injuries whose time loss still runs. */
  ongoing: boolean;
};

const isBand = (text: string | null): text is SeverityBand =>
  (severityBands as readonly string[]).includes(text ?? "");

/** Reads the part of an address that names one figure. What it does not know it leaves out. */
export function figurePartOf(params: URLSearchParams, by: Grouping): FigurePart {
  const severity = params.get("severity");
  return {
    by,
    group: params.get("group"),
    severity: isBand(severity) ? severity : null,
    ongoing: params.get("lost") === "ongoing",
  };
}

/** The name of the group, as its table writes it; null for all of them or for one that there is not. */
export const groupLabel = ({ by, group }: FigurePart, counts: Counts) =>
  listGroups(by, counts).find(({ key }) => key === group)?.label ?? null;

/** The counted injuries behind a figure. */
export function injuriesBehind(
  { by, group, severity, ongoing }: FigurePart,
  counts: Counts,
  { counted }: Pick<Selection, "counted">,
): InjuryRow[] {
  const keyOf = groupKey(by, counts);
  return counted.filter(
    (injury) =>
      (group === null || keyOf(placeInjury(injury)) === group) &&
      (severity === null || severityBand(injury.daysLost) === severity) &&
      (!ongoing || injury.ongoing),
  );
}

export type SessionExposure = Pick<ExposureCell, "teamId" | "day" | "kind" | "grade" | "aes" | "hours">;

/** The exposure behind a figure, by team, day, kind and grade; of groups of injuries it is that of all. */
export function exposureBehind(
  { by, group }: FigurePart,
  counts: Counts,
  { cells }: Pick<Selection, "cells">,
): SessionExposure[] {
  const keyOf = groupKey(by, counts);
  const sums = new Map<string, SessionExposure>();
  for (const cell of cells) {
    if (group !== null && splitsExposure(by) && keyOf(placeCell(cell)) !== group) continue;
    const { teamId, day, kind, grade, aes, hours } = cell;
    const key = `${day} ${teamId} ${kind} ${grade}`;
    const known = sums.get(key);
    sums.set(key, {
      ...{ teamId, day, kind, grade },
      aes: (known?.aes ?? 0) + aes,
      hours: (known?.hours ?? 0) + hours,
    });
  }
  return [...sums.values()].sort((a, b) => (a.day < b.day ? 1 : a.day > b.day ? -1 : 0));
}
