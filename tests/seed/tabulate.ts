import { poissonInterval } from "~/statistics/index.ts";
import { ageOnDay } from "~db/seed/scenario/days.ts";
import { sportGroupOf } from "~db/seed/scenario/injuries.ts";
import { ageBandOf, trueRate } from "~db/seed/scenario/true-rates.ts";
import type { Scenario } from "~db/seed/scenario/types.ts";
import { find, indexByKey } from "./shared.ts";

/** Counts of a scenario beside what its truth expects of the same exposures. */

export type Cell = { exposures: number; expected: number; events: number };

/** Who did the full warm-up, from the records and, where they are silent, from the truth. */
function listWarmedUp(scenario: Scenario): (session: string, athlete: string) => boolean {
  const records = new Map(scenario.warmUps.map((each) => [each.session, each]));
  return (session, athlete) => {
    const record = records.get(session);
    return record?.outcome === "full" && !record.notWarmedUp.includes(athlete);
  };
}

/**
 * Counts sudden injuries over recorded athlete-exposures, with the number the truth expects. Sessions whose full
 * warm-up nobody wrote down are left out, since who did it is not kept.
 */
export function tabulate(
  scenario: Scenario,
  keyOf: (facts: { sex: string; band: string; kind: string; warmedUp: boolean; team: string }) => string,
  measure: "sudden" | "preventable",
): Map<string, Cell> {
  const athletes = indexByKey(scenario.athletes);
  const sessions = indexByKey(scenario.sessions);
  const teams = indexByKey(scenario.teams);
  const unrecorded = new Set(scenario.truth.warmedUpWithoutRecord);
  const warmedUp = listWarmedUp(scenario);
  const cells = new Map<string, Cell>();
  const factsOf = (sessionKey: string, athleteKey: string) => {
    const session = find(sessions, sessionKey);
    const athlete = find(athletes, athleteKey);
    const band = ageBandOf(ageOnDay(athlete.dateOfBirth, session.day));
    const group = sportGroupOf(find(teams, session.team).sport);
    return {
      sex: athlete.sex,
      band,
      kind: session.kind,
      group,
      team: session.team,
      warmedUp: warmedUp(sessionKey, athleteKey),
    };
  };
  for (const { session, athlete, presence } of scenario.participations) {
    if (presence !== "took_part" || unrecorded.has(session)) continue;
    const facts = factsOf(session, athlete);
    const key = keyOf(facts);
    const cell = cells.get(key) ?? { exposures: 0, expected: 0, events: 0 };
    cell.exposures += 1;
    cell.expected += trueRate(facts, facts.group, facts.warmedUp)[measure] / 1000;
    cells.set(key, cell);
  }
  for (const injury of scenario.injuries) {
    if (injury.session === null || unrecorded.has(injury.session)) continue;
    if (find(sessions, injury.session).grade !== "recorded") continue;
    const free = injury.contact === "non_contact" || injury.contact.startsWith("indirect");
    if (measure === "preventable" && !((injury.area === "knee" || injury.area === "ankle") && free)) continue;
    find(cells, keyOf(factsOf(injury.session, injury.athlete))).events += 1;
  }
  return cells;
}

export function addUp(tables: readonly ReadonlyMap<string, Cell>[]): Map<string, Cell> {
  const sum = new Map<string, Cell>();
  for (const [key, cell] of tables.flatMap((table) => [...table])) {
    const so = sum.get(key) ?? { exposures: 0, expected: 0, events: 0 };
    sum.set(key, {
      exposures: so.exposures + cell.exposures,
      expected: so.expected + cell.expected,
      events: so.events + cell.events,
    });
  }
  return sum;
}

export function isCovered({ events, expected }: Cell): boolean {
  const { lower, upper } = poissonInterval(events);
  return lower <= expected && expected <= upper;
}
