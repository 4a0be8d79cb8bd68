import Papa from "papaparse";
import { defaultAgeBands, defaultSportRules } from "~/features/accounts/founding.server";
import type { RatesFilters } from "~/features/rates/filters";
import { parseRatesQuery } from "~/features/rates/rates.schema";
import { isFigure, type TableData } from "~/features/rates/tables";
import { openView, type RatesView } from "~/features/rates/view.server";
import { read, type Scope, type Tx } from "~db/client.server";
import { makeOrganisation, makePerson, makeSeason, memberScope, staffScope } from "../../harness";
import { countByHand, daysLost, type World } from "./brute-force";
import { type Plan, planClub, plantClub } from "./generated-club";

/** What the tests of single views share: a planted club, its pages and files, and its injuries found one by one. */

const addressOf = (search: string) => new URL(`http://localhost/club/rates/view${search}`);

export function open<T>(
  scope: Scope,
  search: string,
  run: (tx: Tx, view: RatesView, url: URL) => Promise<T>,
) {
  const url = addressOf(search);
  return read(scope, async (tx) => {
    const view = await openView(tx, url, parseRatesQuery(url.searchParams));
    if (!view) throw new Error("no season");
    return run(tx, view, url);
  });
}

export const cellsOf = ({ rows }: TableData, key: string) => rows.find((row) => row.key === key)?.cells ?? {};
export const figureOf = (table: TableData, key: string, column: string) => {
  const cell = cellsOf(table, key)[column];
  return isFigure(cell) ? cell : null;
};

export const linesOf = (text: string) =>
  Papa.parse<Record<string, string>>(text.replace("\ufeff", ""), { header: true, skipEmptyLines: true }).data;

/** The state of one reason on a day: of the changes from that day or earlier, the one entered last. */
export function stateOn(plan: Plan, reasonId: string, day: string) {
  const known = plan.changes.filter((change) => change.reasonId === reasonId && change.fromDay <= day);
  return known.sort((a, b) => b.seq - a.seq)[0]?.state ?? "full";
}

export async function plant(seed: number, alter: (plan: Plan, today: string) => void = () => {}) {
  const organisation = await makeOrganisation();
  const staff = staffScope(organisation);
  const plan = planClub(seed, staff.today);
  alter(plan, staff.today);
  const season = await makeSeason(staff, { startsOn: plan.season.from, endsOn: plan.season.to });
  await plantClub(staff, plan);
  const lead = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
  const rules = defaultSportRules.map(([sport, fromAge, players, minutes]) => ({
    sport,
    fromAge,
    players,
    minutes,
  }));
  const world: World = { plan, rules, bands: defaultAgeBands, today: staff.today, seasonId: season.id };
  return { organisation, plan, lead, world, today: staff.today };
}

export type Counted = { key: string; days: number; ongoing: boolean };

/** Each injury that counts, found by counting a club in which it is the only one. */
export function countedByHand(world: World, filters: RatesFilters): Counted[] {
  return world.plan.injuries.flatMap((injury): Counted[] => {
    const alone = countByHand({ ...world, plan: { ...world.plan, injuries: [injury] } }, filters);
    const key = Object.entries(alone).find(([, row]) => row.injuries === 1)?.[0];
    if (!key) return [];
    const reasons = new Set(
      world.plan.changes
        .filter(({ injuryId }) => injuryId === injury.injuryId)
        .map(({ reasonId }) => reasonId),
    );
    const days = daysLost(world, injury.injuryId, injury.onsetDay);
    const isLimited = [...reasons].some((reason) => stateOn(world.plan, reason, world.today) !== "full");
    return [{ key, days, ongoing: isLimited }];
  });
}

export const sum = (list: readonly number[]) => list.reduce((all, value) => all + value, 0);
export const hoursOf = (row: { recorded: number; headcount: number; estimated: number } | undefined) =>
  row ? row.recorded + row.headcount + row.estimated : 0;

/** The smallest number of days by which half are back, as a product over the days on which somebody came back. */
export function medianByHand(list: readonly Counted[]) {
  let left = 1;
  for (const day of [...new Set(list.map(({ days }) => days))].sort((a, b) => a - b)) {
    const atRisk = list.filter(({ days }) => days >= day).length;
    const back = list.filter(({ days, ongoing }) => days === day && !ongoing).length;
    left *= (atRisk - back) / atRisk;
    if (left <= 0.5 + 1e-12) return day;
  }
  return null;
}
