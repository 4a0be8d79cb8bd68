import { sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { defaultAgeBands, defaultSportRules } from "~/features/accounts/founding.server";
import { resolveViewing } from "~/features/accounts/viewing.server";
import { timeLossOf } from "~/features/availability/availability";
import {
  caseDefinitions,
  defaultFilters,
  groupings,
  type RatesFilters,
  sessionChoices,
  units,
} from "~/features/rates/filters";
import { type Counts, computeRates, type Rates } from "~/features/rates/rates";
import { ratesQuery } from "~/features/rates/rates.schema";
import { incidenceOf } from "~/features/rates/rates.server";
import { ageInYears } from "~/features/rates/rollups/exposure.queries.server";
import { countSeasons, openView } from "~/features/rates/view.server";
import { addDays } from "~/platform/clock";
import { ageOn } from "~/statistics";
import { read, type Scope } from "~db/client.server";
import type { AvailabilityState } from "~db/schema/codes";
import { makeOrganisation, makePerson, makeSeason, memberScope, staffScope } from "../../harness";
import { type Brute, countByHand, daysLost, type World } from "./brute-force";
import { planClub, plantClub } from "./generated-club";

const everyFilter = caseDefinitions.flatMap((injuries) =>
  sessionChoices.flatMap((sessions) =>
    groupings.flatMap((by) =>
      units.map((per): RatesFilters => ({ ...defaultFilters, injuries, sessions, by, per })),
    ),
  ),
);

const narrowings: Partial<RatesFilters>[] = [
  { sex: "female", area: "knee", contact: "without" },
  { sex: "not_stated" },
  { sport: "soccer", onset: "sudden" },
  { sport: "volleyball", side: "left", contact: "indirect" },
  { age: "15-16", onset: "gradual" },
  { age: "unknown" },
  { contact: "unknown", occurrence: "index" },
  { contact: "direct", area: "ankle" },
  { contact: "non_contact", side: "none" },
  { occurrence: "recurrent", sex: "male" },
];
/** Each narrowing in both units, by a grouping that shares out the exposure and one that does not. */
const narrowedFilters = narrowings.flatMap((narrowing) =>
  units.flatMap((per) =>
    (["sex-age", "team", "area"] as const).map(
      (by): RatesFilters => ({ ...defaultFilters, injuries: "medical-attention", ...narrowing, by, per }),
    ),
  ),
);

function groupsOf({ rows, total }: Pick<Rates, "rows" | "total">, filters: RatesFilters) {
  const groups: Brute = {};
  for (const { key, injuries, exposure, reason } of rows) {
    const graded = exposure?.[filters.per] ?? { recorded: 0, headcount: 0, estimated: 0 };
    // A silent team reads "not reported" instead of 0.
    groups[key] = { injuries: injuries ?? (reason?.startsWith("not reported") ? 0 : Number.NaN), ...graded };
  }
  return { groups, total: total.injuries };
}

/** Groups in which nothing at all happened may or may not be listed. */
const filled = (groups: Brute) =>
  Object.entries(groups)
    .filter(([, row]) => Object.values(row).some((value) => value !== 0))
    .sort(([a], [b]) => a.localeCompare(b));

describe.each([1, 2])("counts of a generated club (seed %i)", (seed) => {
  let scope: Scope;
  let world: World;
  let counts: Counts;

  beforeAll(async () => {
    const organisation = await makeOrganisation();
    const staff = staffScope(organisation);
    const plan = planClub(seed, staff.today);
    const season = await makeSeason(staff, { startsOn: plan.season.from, endsOn: plan.season.to });
    await plantClub(staff, plan);
    scope = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
    const rules = defaultSportRules.map(([sport, fromAge, players, minutes]) => ({
      sport,
      fromAge,
      players,
      minutes,
    }));
    world = { plan, rules, bands: defaultAgeBands, today: staff.today, seasonId: season.id };
    counts = await read(scope, async (tx) => {
      const { seasons } = await resolveViewing(tx, new URL("http://x/rates"));
      return countSeasons(tx, seasons, null);
    });
  });

  it.each([
    ["every view", everyFilter],
    ["narrowed views", narrowedFilters],
  ])("equal those made by hand, in %s", (_, list) => {
    for (const filters of list) {
      const { groups, total } = groupsOf(computeRates(counts, filters), filters);
      const [found, expected] = [filled(groups), filled(countByHand(world, filters))];
      const name = JSON.stringify(filters);
      expect(
        found.map(([key]) => key),
        name,
      ).toEqual(expected.map(([key]) => key));
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

  it("are what the page is given", async () => {
    const query = ratesQuery.parse({});
    const found = await read(scope, async (tx) => {
      const view = await openView(tx, new URL("http://x/rates"), query);
      return view && incidenceOf(tx, view);
    });
    const { counted: _counted, reportedWeeks, ...expected } = computeRates(counts, query);
    expect(found?.rates).toEqual(expected);
    expect(found?.reportedWeeks).toEqual(reportedWeeks);
  });

  it("hold the days lost that a walk from day to day finds, as the injury's own page says them", () => {
    expect(counts.injuries.length).toBeGreaterThan(100);
    for (const { id, daysLost: found, ongoing } of counts.injuries) {
      const { onsetDay } = world.plan.injuries.find(({ injuryId }) => injuryId === id) ?? { onsetDay: "" };
      expect(found, id).toBe(daysLost(world, id, onsetDay));
      const changes = world.plan.changes
        .filter(({ injuryId }) => injuryId === id)
        .sort((a, b) => a.seq - b.seq);
      const kept = changes.filter(
        ({ seq, fromDay }) => !changes.some((c) => c.seq > seq && c.fromDay <= fromDay),
      );
      const parts = kept
        .sort((a, b) => a.fromDay.localeCompare(b.fromDay))
        .map(({ fromDay, state }, index) => {
          const next = kept[index + 1];
          return {
            fromDay,
            toDay: next ? addDays(next.fromDay, -1) : null,
            state: state as AvailabilityState,
          };
        });
      expect({ days: found, ongoing }, id).toEqual(timeLossOf(onsetDay, parts, world.today));
    }
  });

  it("are of a club in which every rule has something to decide", () => {
    const views = everyFilter.map((filters) => countByHand(world, filters));
    for (const grade of ["injuries", "recorded", "headcount", "estimated"] as const)
      expect(
        views.some((groups) => Object.values(groups).some((row) => row[grade] > 0)),
        grade,
      ).toBe(true);
    const reported = countByHand(world, {
      ...defaultFilters,
      injuries: "medical-attention",
      sessions: "training-and-matches",
      by: "sex-age",
      per: "hours",
    });
    expect(Object.keys(reported).length).toBeGreaterThan(8);
  });
});

it("count an age in SQL as the statistics do, 29 February too", async () => {
  const organisation = await makeOrganisation();
  const scope = staffScope(organisation);
  const births = ["2008-02-29", "2008-03-01", "2008-02-28", "2010-12-31", "2011-01-01", "2012-07-14"];
  const days = [
    "2025-02-28",
    "2025-03-01",
    "2024-02-28",
    "2024-02-29",
    "2024-12-31",
    "2025-01-01",
    "2025-07-13",
    "2025-07-14",
  ];
  const rows = await read(scope, (tx) =>
    tx.execute<{ born: string; day: string; age: number | null }>(sql`
      select b::text as born, d::text as day, ${ageInYears(sql`b`, sql`d`)} as age
      from unnest(${sql.raw(`array['${births.join("','")}']`)}::date[]) b,
        unnest(${sql.raw(`array['${days.join("','")}']`)}::date[]) d`),
  );
  expect(rows).toHaveLength(births.length * days.length);
  for (const { born, day, age } of rows) expect(age, `${born} on ${day}`).toBe(ageOn(born, day));
});
