import { addDays } from "./days.ts";
import { openStream } from "./random.ts";
import type { Availability, AvailabilityState, Day, Restriction, RosterEntry } from "./types.ts";

export type CurrentAvailability = {
  state: AvailabilityState;
  restrictions: readonly Restriction[];
  minutesLimit: number | null;
};

const FULL: CurrentAvailability = { state: "full", restrictions: [], minutesLimit: null };

/** Every athlete's contributions, with the most restrictive one of a day. */
export function createAvailabilityBook() {
  const byAthlete = new Map<string, Availability[]>();
  return {
    add(contributions: readonly Availability[]): void {
      for (const each of contributions) {
        const own = byAthlete.get(each.athlete);
        if (own) own.push(each);
        else byAthlete.set(each.athlete, [each]);
      }
    },
    on(athlete: string, day: Day): CurrentAvailability {
      const today = (byAthlete.get(athlete) ?? []).filter(
        (each) => each.from <= day && (each.to === null || each.to >= day),
      );
      if (today.length === 0) return FULL;
      const limits = today.flatMap((each) => (each.minutesLimit === null ? [] : [each.minutesLimit]));
      return {
        state: today.some((each) => each.state === "unavailable") ? "unavailable" : "modified",
        restrictions: [...new Set(today.flatMap((each) => each.restrictions))],
        minutesLimit: limits.length > 0 ? Math.min(...limits) : null,
      };
    },
    list: (): Availability[] => [...byAthlete.values()].flat(),
  };
}
export type AvailabilityBook = ReturnType<typeof createAvailabilityBook>;

/** Coughs, colds and stomach upsets between October and March, for about a fifth of the athletes of a season. */
export function drawIllnesses(seed: string, roster: readonly RosterEntry[], year: number): Availability[] {
  const contributions: Availability[] = [];
  const athletes = new Set<string>();
  for (const entry of roster.filter(
    (each) => each.from >= `${year}-08-01` && each.from < `${year + 1}-07-01`,
  )) {
    if (athletes.has(entry.athlete)) continue;
    athletes.add(entry.athlete);
    const random = openStream(seed, `illness ${entry.athlete} ${year}`);
    const from = addDays(`${year}-10-01`, random.int(0, 180));
    if (!random.chance(0.2) || from < entry.from || (entry.to !== null && from > entry.to)) continue;
    const out = random.int(1, 6);
    const { organisation, athlete } = entry;
    const base = { organisation, athlete, reason: "illness", injury: null } as const;
    contributions.push({
      ...base,
      from,
      to: addDays(from, out),
      state: "unavailable",
      restrictions: [],
      minutesLimit: null,
    });
    if (out >= 4) {
      contributions.push({
        ...base,
        from: addDays(from, out + 1),
        to: addDays(from, out + 3),
        state: "modified",
        restrictions: ["minutes_limit"],
        minutesLimit: 30,
      });
    }
  }
  return contributions;
}

/** What is known of contributions at the end of a day: later ones are not made yet, running ones have no end. */
export function asKnownOn(contributions: readonly Availability[], today: Day): Availability[] {
  return contributions
    .filter((each) => each.from <= today)
    .map((each) => ({ ...each, to: each.to !== null && each.to >= today ? null : each.to }));
}
