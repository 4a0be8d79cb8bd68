import { beforeAll, describe, expect, it } from "vitest";
import { countInjuries } from "~/features/rates/counting";
import { caseDefinitions, sessionChoices, units } from "~/features/rates/filters";
import { listInjuryRows } from "~/features/rates/rollups/injury-rows.queries.server";
import { countRolled } from "~/features/rates/rollups/rollups";
import { rollUp } from "~/features/rates/rollups/rollups.server";
import { countInjuriesRolled } from "~/features/rates/rollups/rollups-injuries.queries.server";
import { addDays } from "~/platform/clock";
import { DomainError } from "~/platform/errors";
import { read, type Scope } from "~db/client.server";
import { makeOrganisation, makePerson, makeSeason, memberScope, scopeOf, staffScope } from "../../harness";
import { planClub, plantClub, randomOf } from "./generated-club";
import { actions, type World } from "./rollups-actions";
import { countMarks, expectAgreement, type Range } from "./rollups-agreement";

/** Cleaned after every step, what each one marks is seen alone; cleaned now and then, marks lie over each other. */
const clubs = [
  { seed: 11, cleaned: 1 },
  { seed: 12, cleaned: 0.4 },
];

describe.each(clubs)("roll-ups of a club that people go on writing in ($seed)", ({ seed, cleaned }) => {
  let world: World;
  let job: Scope;
  let ranges: Range[];
  const done = new Set<string>();

  beforeAll(async () => {
    const organisation = await makeOrganisation();
    const staff = staffScope(organisation);
    const plan = planClub(seed, staff.today);
    await makeSeason(staff, { startsOn: plan.season.from, endsOn: plan.season.to });
    await plantClub(staff, plan);
    const person = await makePerson(organisation, { roles: ["admin", "lead"] });
    world = { scope: await memberScope(person, organisation), random: randomOf(seed), undoable: [] };
    job = scopeOf(organisation, ["job"]);
    const [first, second] = plan.teams.map(({ id }) => id);
    ranges = [
      { from: "2000-01-01", to: "2100-01-01", teamIds: null },
      { from: plan.season.from, to: staff.today, teamIds: null },
      {
        from: addDays(staff.today, -75),
        to: addDays(staff.today, -18),
        teamIds: [first ?? "", second ?? ""],
      },
    ];
  });

  /** What a rule of the trade refuses writes nothing. */
  async function attempt(name: string) {
    await actions[name]?.(world).then(
      () => done.add(name),
      (error: unknown) => {
        if (!(error instanceof DomainError)) throw error;
      },
    );
  }

  it("equal the records after every step, clean or not", async () => {
    await expectAgreement(world.scope, ranges, "all marked");
    await rollUp(job);
    const names = Object.keys(actions);
    for (const [step, name] of names.entries()) {
      for (let tries = 0; tries < 8 && !done.has(name); tries++) await attempt(name);
      await expectAgreement(world.scope, ranges, `${step} ${name}`);
      if (!world.random.chance(cleaned)) continue;
      expect(await rollUp(job)).toBe(true);
      expect(await countMarks(job.organisationId)).toBe(0);
      await expectAgreement(world.scope, ranges, `${step} clean`);
    }
    expect(Object.keys(actions).filter((name) => !done.has(name))).toEqual([]);
  }, 300_000);

  it("count injuries by every question as the injuries one by one do", async () => {
    await rollUp(job);
    const range = ranges[1] as Range;
    const rows = await read(world.scope, (tx) => listInjuryRows(tx, range));
    const rolled = await read(world.scope, (tx) => countInjuriesRolled(tx, range));
    let leftOutReasons = 0;
    for (const definition of caseDefinitions)
      for (const sessions of sessionChoices)
        for (const unit of units) {
          const rules = { definition, sessions, unit };
          const expected = countInjuries(rows, rules);
          const { counted, leftOut } = countRolled(rolled, rules);
          const name = JSON.stringify(rules);
          expect(
            counted.reduce((sum, { injuries }) => sum + injuries, 0),
            name,
          ).toBe(expected.counted.length);
          expect(Object.fromEntries(leftOut), name).toEqual(
            Object.fromEntries(expected.leftOut.map(({ reason, count }) => [reason, count])),
          );
          leftOutReasons = Math.max(leftOutReasons, leftOut.size);
        }
    expect(rows.length).toBeGreaterThan(100);
    expect(leftOutReasons).toBeGreaterThan(5);
  });
});
