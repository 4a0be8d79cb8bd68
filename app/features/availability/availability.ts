import { addDays } from "~/platform/clock";
import { type TimeLoss, timeLoss } from "~/statistics";
import type { AvailabilityState, Restriction } from "~db/schema/codes";

/** What one reason allows, from a day to a day. Days are ISO dates; `toDay` is inclusive, null while it still holds. */
export type Contribution = {
  fromDay: string;
  toDay: string | null;
  state: AvailabilityState;
  restrictions: readonly Restriction[];
  minutesLimit: number | null;
  expectedOn: string | null;
};

/** The state of an athlete on a day: no reason in it, so that it may be shown to whoever picks the team. */
export type DayState = {
  state: AvailabilityState;
  restrictions: Restriction[];
  /** Minutes allowed; null without a limit. */
  minutesLimit: number | null;
  /** The day on which full availability is expected; null when unknown for any of the reasons. */
  expectedOn: string | null;
};

const order: Record<AvailabilityState, number> = { full: 0, modified: 1, unavailable: 2 };

export const fullState = (): DayState => ({
  state: "full",
  restrictions: [],
  minutesLimit: null,
  expectedOn: null,
});

/** Whether a contribution holds on a day. */
export const holdsOn = (part: Pick<Contribution, "fromDay" | "toDay">, day: string) =>
  part.fromDay <= day && (part.toDay === null || part.toDay >= day);

/**
 * The state of a day from the contributions of all reasons: the most restrictive one. Restrictions add up, the
 * smallest minutes limit counts, and full availability is expected when the last reason is expected to end.
 */
export function stateFromContributions(parts: readonly Contribution[], day: string): DayState {
  const limiting = parts.filter((part) => part.state !== "full" && holdsOn(part, day));
  if (limiting.length === 0) return fullState();
  const worst = limiting.reduce((a, b) => (order[b.state] > order[a.state] ? b : a));
  const limits = limiting.map(({ minutesLimit }) => minutesLimit).filter((limit) => limit !== null);
  const expected = limiting.map(({ expectedOn }) => expectedOn);
  const known = expected.filter((date) => date !== null);
  return {
    state: worst.state,
    restrictions: [...new Set(limiting.flatMap(({ restrictions }) => restrictions))],
    minutesLimit: limits.length > 0 ? Math.min(...limits) : null,
    expectedOn: known.length === expected.length ? (known.sort().at(-1) ?? null) : null,
  };
}

/**
 * Time loss of one injury from its own contributions: the days after the onset on which it kept the athlete from
 * taking full part (the onset is day 0; leaving a session and taking full part in the next is 0 days). While such a
 * day has no end yet the days are counted to `asOf` and ongoing. A setback after full availability counts again,
 * without the full days between. Without any contribution the injury cost no time.
 * @param onsetDay ISO date
 * @param parts the injury's contributions; they do not overlap
 * @param asOf the day up to which the records go, normally today
 */
export function timeLossOf(
  onsetDay: string,
  parts: readonly Pick<Contribution, "fromDay" | "toDay" | "state">[],
  asOf: string,
): TimeLoss {
  let days = 0;
  let ongoing = false;
  for (const run of runsNotFull(parts)) {
    if (run.fromDay > asOf) continue;
    if (run.toDay !== null && run.toDay < onsetDay) continue;
    // A run that begins later is counted as if the injury had begun on the day before it: that day was still full.
    const start = run.fromDay > onsetDay ? addDays(run.fromDay, -1) : onsetDay;
    const fullOn = run.toDay === null ? null : addDays(run.toDay, 1);
    const loss = timeLoss({ onset: start, fullOn, asOf });
    days += loss.days;
    ongoing ||= loss.ongoing;
  }
  return { days, ongoing };
}

/**
 * The first day of full availability after an injury: the onset day when it never cost any, null while it still does.
 */
export function returnDayOf(
  onsetDay: string,
  parts: readonly Pick<Contribution, "fromDay" | "toDay" | "state">[],
): string | null {
  const last = runsNotFull(parts).at(-1);
  if (!last) return onsetDay;
  return last.toDay === null ? null : addDays(last.toDay, 1);
}

/** Neighbouring contributions that are not full, joined into runs, in order of their days. */
function runsNotFull(parts: readonly Pick<Contribution, "fromDay" | "toDay" | "state">[]) {
  const runs: { fromDay: string; toDay: string | null }[] = [];
  for (const { state, fromDay, toDay } of [...parts].sort((a, b) => (a.fromDay < b.fromDay ? -1 : 1))) {
    if (state === "full") continue;
    const last = runs.at(-1);
    if (last && last.toDay !== null && addDays(last.toDay, 1) === fromDay) last.toDay = toDay;
    else runs.push({ fromDay, toDay });
  }
  return runs;
}
