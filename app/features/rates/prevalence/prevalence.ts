import { type Estimate, meanShare } from "~/statistics";
import { stableFrom } from "../coverage";
import type { Grouping, RatesFilters } from "../filters";
import type { Group } from "../groups";

/** Prevalence: the share of athletes not fully available on a day, from the sums of the database. Pure. */

/** Groupings that a person's day belongs to; the others are of sessions or of injuries. */
export const peopleGroupings = ["sex-age", "sex", "age", "sport", "team", "month"] as const;
export type PeopleGrouping = (typeof peopleGroupings)[number];

/** The grouping of the table: people have no session kind, contact or body area, so that those give sex and age. */
export const peopleGroupingOf = (by: Grouping): PeopleGrouping =>
  peopleGroupings.find((known) => known === by) ?? "sex-age";

export const prevalenceParts = ["limited", "unavailable", "modified", "injury", "illness", "other"] as const;
export type PrevalencePart = (typeof prevalenceParts)[number];

/** Sums over the days of a week, or of all weeks together; the shares of each day are from 0 to 1. */
export type PrevalenceSums = Record<PrevalencePart, number> & {
  /** "all": whoever is looked at, each athlete once a day; "group": one group of the grouping. */
  slice: "all" | "group";
  /** As `groupKey` makes it; empty for the whole. */
  key: string;
  /** Monday, ISO; null for all days together. */
  week: string | null;
  /** Days with somebody on the roster. */
  days: number;
  /** Athletes on the roster, summed over the days. */
  roster: number;
  /** Different athletes who were not fully available on a day or more. */
  affected: number;
};

export type Prevalence = {
  /** Athletes on the roster on an average day. */
  roster: number;
  /** Athletes not fully available on an average day. */
  limited: number;
  affected: number;
  /** Per cent of the day's roster, the mean over the days, each with its limits. */
  shares: Record<PrevalencePart, Estimate>;
  /** Fewer athletes affected than a figure can lean on. */
  unstable: boolean;
};

/**
 * The mean share of the days as per cent. The days of a period resemble each other, so that they add nothing to what
 * the limits rest on: n is the roster of an average day.
 */
function percentOf(share: number, roster: number): Estimate {
  const trials = Math.max(1, Math.round(roster));
  const { estimate, lower, upper, ...rest } = meanShare({ sum: Math.min(1, share) * trials, trials });
  return { estimate: estimate * 100, lower: lower * 100, upper: upper * 100, ...rest };
}

/** @param sums of a period with at least one day */
export function prevalenceOf(sums: PrevalenceSums): Prevalence {
  const roster = sums.roster / sums.days;
  const shares = Object.fromEntries(
    prevalenceParts.map((part) => [part, percentOf(sums[part] / sums.days, roster)]),
  ) as Record<PrevalencePart, Estimate>;
  return {
    roster,
    limited: (sums.limited / sums.days) * roster,
    affected: sums.affected,
    shares,
    unstable: sums.affected < stableFrom,
  };
}

export type PrevalenceWeek = Prevalence & { week: string; finished: boolean };
export type PrevalenceGroup = Prevalence & { group: Group };

export type PrevalenceParts = {
  /** Null while nobody stood on a roster. */
  whole: Prevalence | null;
  weeks: PrevalenceWeek[];
  groups: PrevalenceGroup[];
};

/** Monday to Sunday of a week that begins on a Monday; ISO days compare as text. */
type LastDayOf = (week: string) => string;

/**
 * The whole, its weeks and its groups from the database's sums.
 * @param groups every possible group, in order; those without a day on the roster drop out
 * @param today a week whose Sunday lies after it is not finished
 */
export function assemblePrevalence(
  rows: readonly PrevalenceSums[],
  { groups, today, sundayOf }: { groups: readonly Group[]; today: string; sundayOf: LastDayOf },
): PrevalenceParts {
  const whole = rows.find(({ slice, week }) => slice === "all" && week === null);
  const byKey = new Map(rows.flatMap((row) => (row.slice === "group" ? [[row.key, row] as const] : [])));
  return {
    whole: whole ? prevalenceOf(whole) : null,
    weeks: rows.flatMap((row) =>
      row.slice === "all" && row.week !== null
        ? { ...prevalenceOf(row), week: row.week, finished: sundayOf(row.week) < today }
        : [],
    ),
    groups: groups.flatMap((group) => {
      const row = byKey.get(group.key);
      return row ? { ...prevalenceOf(row), group } : [];
    }),
  };
}

/** What of the filters says nothing about prevalence, which counts every cause of a day. */
export const hasInjuryNarrowing = ({ area, side, contact, onset, occurrence }: RatesFilters) =>
  [area, side, contact, onset].some((value) => value !== "any") || occurrence !== "all";
