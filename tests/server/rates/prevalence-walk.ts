import { randomUUID } from "node:crypto";
import { defaultAgeBands } from "~/features/accounts/founding.server";
import type { peopleGroupings } from "~/features/rates/prevalence/prevalence";
import { addDays, weekStart } from "~/platform/clock";
import { type Plan, randomOf } from "./generated-club";
import { stateOn, sum } from "./views-by-hand";

/** Prevalence by walking from day to day and from athlete to athlete, with none of the application's counting. */

/** Illnesses and other reasons beside the injuries, some at the same time; one athlete who left, one never on a roster. */
export function addReasons(plan: Plan, today: string) {
  const random = randomOf(77);
  for (let n = 0; n < 60; n++) {
    const reasonId = randomUUID();
    const athleteId = random.pick(plan.athletes).id;
    const from = addDays(today, -random.int(0, 170));
    const change = (seq: number, fromDay: string, state: string) =>
      plan.changes.push({ reasonId, injuryId: null, athleteId, seq, fromDay, state });
    change(1, from, random.pick(["unavailable", "modified", "modified"]));
    if (random.chance(0.8)) change(2, addDays(from, random.int(1, 12)), "full");
  }
  // A plan for days to come, which must not count yet.
  plan.changes.push({
    ...{ reasonId: randomUUID(), injuryId: null, athleteId: plan.athletes[3]?.id ?? "" },
    ...{ seq: 1, fromDay: addDays(today, 3), state: "unavailable" },
  });
}

type Day = {
  roster: number;
  limited: number;
  unavailable: number;
  modified: number;
  injury: number;
  illness: number;
  other: number;
};
type Walk = Record<string, { days: Day[]; weeks: Record<string, Day[]>; affected: Set<string> }>;

const birthdays = (born: string, day: string) => {
  let years = -1;
  for (let year = Number(born.slice(0, 4)); year <= Number(day.slice(0, 4)); year++) {
    const leap = new Date(Date.UTC(year, 1, 29)).getUTCMonth() === 1;
    if (`${year}-${born.slice(5) === "02-29" && !leap ? "03-01" : born.slice(5)}` <= day) years += 1;
  }
  return years;
};

export type Club = {
  plan: Plan;
  today: string;
  left: { athleteId: string; day: string };
  causes: Map<string, string>;
};
export type Question = {
  by: (typeof peopleGroupings)[number];
  teamIds?: readonly string[];
  sex?: string;
  age?: string;
  sport?: string;
};

const bandOf = (born: string | null, day: string) => {
  const years = born && born <= day ? birthdays(born, day) : null;
  if (years === null) return "unknown";
  return defaultAgeBands.find(({ from, to }) => years >= from && years <= (to ?? 999))?.label ?? "unknown";
};

/** Walks from day to day and from athlete to athlete; "" is the key of the whole. */
export function walkDays(
  { plan, today, left, causes }: Club,
  { by, teamIds, sex, age, sport }: Question,
): Walk {
  const walk: Walk = {};
  const teamOf = new Map(plan.teams.map((team) => [team.id, team]));
  for (let day = plan.season.from; day <= today; day = addDays(day, 1)) {
    const here: Record<string, Day> = {};
    for (const athlete of plan.athletes) {
      if (athlete.id === left.athleteId && day > left.day) continue;
      const teams = plan.roster
        .filter((r) => r.athleteId === athlete.id && r.from <= day && (r.to ?? "9999") >= day)
        .map((r) => teamOf.get(r.teamId))
        .filter(
          (team) => team && (!teamIds || teamIds.includes(team.id)) && (!sport || team.sport === sport),
        );
      if (teams.length === 0 || (sex && athlete.sex !== sex)) continue;
      const band = bandOf(athlete.born, day);
      if (age && band !== age) continue;
      const reasons = new Set(plan.changes.filter((c) => c.athleteId === athlete.id).map((c) => c.reasonId));
      const limiting = [...reasons]
        .map((id) => ({ id, state: stateOn(plan, id, day) }))
        .filter(({ state }) => state !== "full");
      const has = (cause: string) => Number(limiting.some(({ id }) => causes.get(id) === cause));
      const out = Number(limiting.some(({ state }) => state === "unavailable"));
      const keys: Record<Question["by"], (string | undefined)[]> = {
        sex: [athlete.sex],
        age: [band],
        "sex-age": [`${athlete.sex} ${band}`],
        month: [day.slice(0, 7)],
        sport: teams.map((team) => team?.sport),
        team: teams.map((team) => team?.id),
      };
      for (const key of new Set(["", ...keys[by]])) {
        if (key === undefined) continue;
        here[key] ??= { roster: 0, limited: 0, unavailable: 0, modified: 0, injury: 0, illness: 0, other: 0 };
        const limited = Number(limiting.length > 0);
        const add = {
          roster: 1,
          limited,
          unavailable: out,
          modified: limited - out,
          injury: has("injury"),
          illness: has("illness"),
          other: has("other"),
        };
        for (const [name, value] of Object.entries(add)) here[key][name as keyof Day] += value;
        walk[key] ??= { days: [], weeks: {}, affected: new Set() };
        if (limited) walk[key].affected.add(athlete.id);
      }
    }
    for (const [key, counts] of Object.entries(here)) {
      walk[key]?.days.push(counts);
      const week = weekStart(day);
      const weeks = walk[key]?.weeks ?? {};
      weeks[week] = [...(weeks[week] ?? []), counts];
    }
  }
  return walk;
}

export const parts = ["limited", "unavailable", "modified", "injury", "illness", "other"] as const;
export const meanShare = (days: readonly Day[], part: (typeof parts)[number]) =>
  (sum(days.map((day) => day[part] / day.roster)) / days.length) * 100;
