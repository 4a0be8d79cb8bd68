import { cusumReference, poissonCusum } from "~/statistics";

/** The running sum that finds a lasting rise, over weeks of unequal exposure. Pure. */

/** How many times the usual rate it is tuned to find. */
export const soughtRise = 2;
/** With no change at all it crosses its threshold at most once in so many weeks, on average. */
export const falseAlarmWeeks = 104;
/** So many weeks in a row without a figure are a break between seasons: the sum begins anew. */
const breakWeeks = 4;

/**
 * Threshold, in injuries, that keeps false alarms at least `weeks` apart on average, whatever the exposure of each
 * week: the sum is the log likelihood ratio in units of ln(rise), and the mean time to a false alarm of that is at
 * least the exponential of its threshold.
 * Source: Lorden G, Annals of Mathematical Statistics 1971;42:1897-1908 (from memory).
 */
export const cusumThreshold = (weeks = falseAlarmWeeks, rise = soughtRise) =>
  Math.log(weeks) / Math.log(rise);

/**
 * Weeks until a true rise is found, about: the threshold over what a week adds on average then.
 * @param expected injuries in a usual week, above 0
 */
export function weeksToFind(expected: number, threshold: number, rise = soughtRise): number {
  const drift = rise * expected - cusumReference({ inControl: expected, outOfControl: rise * expected });
  return threshold / drift;
}

export type CusumWeek = { events: number; expected: number };

/** Runs of weeks between breaks, as first index and length. */
function runsOf(weeks: readonly (CusumWeek | null)[]): { from: number; to: number }[] {
  const runs: { from: number; to: number }[] = [];
  let missing = breakWeeks;
  for (const [index, week] of weeks.entries()) {
    if (!week) {
      missing += 1;
      continue;
    }
    const last = runs.at(-1);
    if (last && missing < breakWeeks) last.to = index;
    else runs.push({ from: index, to: index });
    missing = 0;
  }
  return runs;
}

/**
 * The sum after each week and the weeks in which it crossed the threshold. It begins at 0, again after each crossing
 * and after a break between seasons. Null weeks have no figure and leave the sum as it is.
 */
export function restartingCusum(weeks: readonly (CusumWeek | null)[], threshold: number) {
  const sums: (number | null)[] = weeks.map(() => null);
  const crossings: number[] = [];
  for (const { from, to } of runsOf(weeks)) {
    const known = weeks.flatMap((week, index) =>
      week && index >= from && index <= to ? [{ ...week, index }] : [],
    );
    let start = 0;
    while (start < known.length) {
      const part = known.slice(start);
      const { path, signalAt } = poissonCusum(
        part.map(({ events }) => events),
        {
          threshold,
          // A week whose sessions had no injury ever before expects next to none, not nothing.
          reference: part.map(({ expected }) => {
            const usual = Math.max(expected, 1e-6);
            return cusumReference({ inControl: usual, outOfControl: soughtRise * usual });
          }),
        },
      );
      const length = signalAt ?? part.length;
      for (const [offset, value] of path.slice(0, length).entries()) {
        const week = part[offset];
        if (week) sums[week.index] = value;
      }
      const crossed = signalAt === null ? undefined : part[signalAt - 1];
      if (crossed) crossings.push(crossed.index);
      start += length;
    }
  }
  return { sums, crossings };
}
