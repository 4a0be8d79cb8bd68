import { sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { defaultAgeBands, defaultSportRules } from "~/features/accounts/founding.server";
import { incidenceOf } from "~/features/rates/rates.server";
import {
  caseDefinitions,
  groupings,
  type RatesFilters,
  sessionChoices,
  units,
} from "~/features/rates/rates.schema";
import { ageInYears } from "~/features/rates/rates.queries.server";
import { ageOn } from "~/statistics";
import { read, type Scope } from "~db/client.server";
import { makeOrganisation, makePerson, makeSeason, memberScope, staffScope } from "../../harness";
import { type Brute, countByHand, type World } from "./brute-force";
import { planClub, plantClub } from "./generated-club";

const everyFilter = caseDefinitions.flatMap((injuries) =>
  sessionChoices.flatMap((sessions) =>
    groupings.flatMap((by) => units.map((per): RatesFilters => ({ injuries, sessions, by, per }))),
  ),
);

async function countedBy(scope: Scope, filters: RatesFilters): Promise<{ groups: Brute; total: number | null }> {
  const { rates } = await read(scope, (tx) => incidenceOf(tx, new URL("http://x/rates"), filters));
  const groups: Brute = {};
  for (const { key, injuries, exposure, reason } of rates?.rows ?? []) {
    const graded = exposure?.[filters.per] ?? { recorded: 0, headcount: 0, estimated: 0 };
    // A silent team reads "not reported" instead of 0.
    groups[key] = { injuries: injuries ?? (reason?.startsWith("not reported") ? 0 : Number.NaN), ...graded };
  }
  return { groups, total: rates?.total.injuries ?? null };
}

/** Groups in which nothing at all happened may or may not be listed. */
const filled = (groups: Brute) =>
  Object.entries(groups)
    .filter(([, row]) => Object.values(row).some((value) => value !== 0))
    .sort(([a], [b]) => a.localeCompare(b));

describe.each([1, 2, 3])("counts of a generated club (seed %i)", (seed) => {
  let scope: Scope;
  let world: World;

  beforeAll(async () => {
    const organisation = await makeOrganisation();
    const staff = staffScope(organisation);
    const plan = planClub(seed, staff.today);
    await makeSeason(staff, { startsOn: plan.season.from, endsOn: plan.season.to });
    await plantClub(staff, plan);
    scope = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
    const rules = defaultSportRules.map(([sport, fromAge, players, minutes]) => ({ sport, fromAge, players, minutes }));
    world = { plan, rules, bands: defaultAgeBands, today: staff.today };
  });

  it("equal those made by hand, in every view", async () => {
    for (const filters of everyFilter) {
      const { groups, total } = await countedBy(scope, filters);
      const [found, expected] = [filled(groups), filled(countByHand(world, filters))];
      const name = JSON.stringify(filters);
      expect(found.map(([key]) => key), name).toEqual(expected.map(([key]) => key));
      for (const [index, [key, row]] of found.entries()) {
        const by = expected[index]?.[1];
        expect(row.injuries, `${name} ${key}`).toBe(by?.injuries);
        expect(row.recorded, `${name} ${key}`).toBeCloseTo(by?.recorded ?? Number.NaN, 8);
        expect(row.headcount, `${name} ${key}`).toBeCloseTo(by?.headcount ?? Number.NaN, 8);
        expect(row.estimated, `${name} ${key}`).toBeCloseTo(by?.estimated ?? Number.NaN, 8);
      }
      expect(total, name).toBe(expected.reduce((sum, [, row]) => sum + row.injuries, 0));
    }
  });

  it("are of a club in which every rule has something to decide", () => {
    const views = everyFilter.map((filters) => countByHand(world, filters));
    for (const grade of ["injuries", "recorded", "headcount", "estimated"] as const)
      expect(views.some((groups) => Object.values(groups).some((row) => row[grade] > 0)), grade).toBe(true);
    const reported = countByHand(world, { injuries: "medical-attention", sessions: "training-and-matches", by: "sex-age", per: "hours" });
    expect(Object.keys(reported).length).toBeGreaterThan(8);
  });
});

it("count an age in SQL as the statistics do, 29 February too", async () => {
  const organisation = await makeOrganisation();
  const scope = staffScope(organisation);
  const births = ["2008-02-29", "2008-03-01", "2008-02-28", "2010-12-31", "2011-01-01", "2012-07-14"];
  const days = ["2025-02-28", "2025-03-01", "2024-02-28", "2024-02-29", "2024-12-31", "2025-01-01", "2025-07-13", "2025-07-14"];
  const rows = await read(scope, (tx) =>
    tx.execute<{ born: string; day: string; age: number | null }>(sql`
      select b::text as born, d::text as day, ${ageInYears(sql`b`, sql`d`)} as age
      from unnest(${sql.raw(`array['${births.join("','")}']`)}::date[]) b,
        unnest(${sql.raw(`array['${days.join("','")}']`)}::date[]) d`),
  );
  expect(rows).toHaveLength(births.length * days.length);
  for (const { born, day, age } of rows) expect(age, `${born} on ${day}`).toBe(ageOn(born, day));
});
