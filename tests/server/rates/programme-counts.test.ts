import { beforeAll, describe, expect, it } from "vitest";
import { defaultAgeBands } from "~/features/accounts/founding.server";
import { recordPlan } from "~/features/rates/programme/programme-plans.server";
import { programmeViewOf } from "~/features/rates/programme/programme-view.server";
import { parseRatesQuery } from "~/features/rates/rates.schema";
import { isFigure, type TableData } from "~/features/rates/tables";
import { openView } from "~/features/rates/view.server";
import { clusterRobustRateRatio } from "~/statistics";
import { read } from "~db/client.server";
import { makeOrganisation, makePerson, makeSeason, memberScope, staffScope } from "../../harness";
import type { World } from "./brute-force";
import { planClub, plantClub } from "./generated-club";
import { type Cell, programmeByHand, type Wanted } from "./programme-brute";
import { plantWarmUps, planWarmUps, type WarmUpPlan } from "./programme-club";

type Scope = Awaited<ReturnType<typeof memberScope>>;

/** The view of an address, as the page and its files are given it. */
const viewOf = (scope: Scope, search: string) => {
  const url = new URL(`http://x/club/rates/programme${search}`);
  return read(scope, async (tx) => {
    const view = await openView(tx, url, parseRatesQuery(url.searchParams));
    if (!view) throw new Error("No season.");
    return programmeViewOf(tx, view, url);
  });
};

/** Injuries and exposure by group and session kind, over all teams. */
function sumsOf(cells: readonly Cell[]) {
  const sums: Record<string, [events: number, aes: number]> = {};
  for (const { group, kind, events, aes } of cells) {
    const [before, exposure] = sums[`${group} ${kind}`] ?? [0, 0];
    sums[`${group} ${kind}`] = [before + events, exposure + aes];
  }
  return sums;
}

const shownIn = (table: TableData | undefined) =>
  Object.fromEntries(
    (table?.rows ?? [])
      .filter(({ key }) => !key.endsWith(" all"))
      .map(({ key, cells }) => [key, [cells.injuries, cells.aes]]),
  );

/** The robust ratio made from the counts by hand; cells without exposure cannot enter. */
const ratioOf = (cells: readonly Cell[], a: string, b: string) =>
  clusterRobustRateRatio(
    cells
      .filter(({ group, aes }) => (group === a || group === b) && aes > 0)
      .map(({ group, events, aes, teamId, kind }) => ({
        events,
        exposure: aes,
        cluster: teamId,
        stratum: kind,
        group: group === a ? "a" : "b",
      })),
  );

const both = ["training", "match"];
const views: [search: string, wanted: Wanted][] = [
  ["", { area: "knee", timeLoss: true, withoutContact: true, kinds: both }],
  ["?injuries=medical-attention", { area: "knee", timeLoss: false, withoutContact: true, kinds: both }],
  [
    "?sessions=match&injuries=medical-attention",
    { area: "knee", timeLoss: false, withoutContact: true, kinds: ["match"] },
  ],
  ["?sex=female", { area: "knee", timeLoss: true, withoutContact: true, kinds: both, sex: "female" }],
  [
    "?sport=soccer&sessions=training",
    { area: "knee", timeLoss: true, withoutContact: true, kinds: ["training"], sport: "soccer" },
  ],
];

describe.each([1, 2])("the programme of a generated club (seed %i)", (seed) => {
  let scope: Scope;
  let world: World;
  let warm: WarmUpPlan;

  beforeAll(async () => {
    const organisation = await makeOrganisation();
    const staff = staffScope(organisation);
    const plan = planClub(seed, staff.today);
    warm = planWarmUps(seed, plan, staff.today);
    const season = await makeSeason(staff, { startsOn: plan.season.from, endsOn: plan.season.to });
    await plantClub(staff, plan);
    await plantWarmUps(staff, warm);
    scope = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
    await recordPlan(scope, {
      area: "knee",
      contact: "without",
      onset: "sudden",
      caseDefinition: "time-loss",
      comparison: "warmed-up",
      words: "Knees of athletes who warmed up against the others'.",
    });
    world = { plan, rules: [], bands: defaultAgeBands, today: staff.today, seasonId: season.id };
  });

  const teamView = () =>
    [
      `?team=${world.plan.teams[0]?.id}`,
      {
        area: "knee",
        timeLoss: true,
        withoutContact: true,
        kinds: both,
        teamId: world.plan.teams[0]?.id ?? "",
      },
    ] as const;

  it("equals the count by hand, in every view", async () => {
    for (const [search, wanted] of [...views, teamView()]) {
      const byHand = programmeByHand(world, warm, wanted);
      const { result, tables } = await viewOf(scope, search);
      const table = (id: string) => tables.find((each) => each.id === id);
      expect(shownIn(table("warmed-up")), search).toEqual(sumsOf(byHand.classes));
      expect(result?.injuries.counted, search).toBe(byHand.counted);
      expect(result?.injuries.unplaced, search).toEqual({ ...byHand.left, noSession: 0 });
      expect(result?.injuries.outside, search).toEqual({
        beforeStart: byHand.beforeStart,
        noProgramme: byHand.noProgramme,
      });
      if (byHand.cuts[0] === byHand.cuts[1]) expect(result?.injuries.thirds.contrast, search).toBeNull();
      else expect(shownIn(table("thirds")), search).toEqual(sumsOf(byHand.thirds));
    }
  });

  it("makes the ratios from the counts of each team", async () => {
    const [search, wanted] = ["?injuries=medical-attention", views[1]?.[1] as Wanted];
    const byHand = programmeByHand(world, warm, wanted);
    const { result, tables } = await viewOf(scope, search);
    for (const [id, cells, a, b] of [
      ["warmed-up-ratios", byHand.classes, "warmed_up", "not_warmed_up"],
      ["thirds-ratios", byHand.thirds, "highest", "lowest"],
    ] as const) {
      const expected = ratioOf(cells, a, b);
      const cell = tables.find((each) => each.id === id)?.rows[0]?.cells.ratio;
      expect(isFigure(cell) ? cell.estimate : null, id).toBeCloseTo(expected.estimate, 10);
      expect(isFigure(cell) ? cell.lower : null, id).toBeCloseTo(expected.lower, 10);
    }
    expect(result?.injuries.classes.contrast.robust?.clusters).toBeLessThanOrEqual(3);
  });

  it("is of a club in which every rule has something to decide", () => {
    const { corners, beforeStart, noProgramme, left, thirds } = programmeByHand(world, warm, {
      area: "any",
      timeLoss: false,
      withoutContact: false,
      kinds: both,
    });
    for (const [name, count] of Object.entries({ ...corners, ...left, beforeStart, noProgramme }))
      expect([name, count > 0]).toEqual([name, true]);
    expect(new Set(thirds.map(({ group }) => group)).size).toBe(4);
  });
});
