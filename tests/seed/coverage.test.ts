import { beforeAll, describe, expect, it } from "vitest";
import { clusterRobustRateRatio, incidenceRate, mantelHaenszel, rateRatio } from "~/statistics/index.ts";
import { buildScenario } from "~db/seed/scenario/index.ts";
import { TODAY } from "./shared.ts";
import { addUp, type Cell, tabulate } from "./tabulate.ts";

/**
 * Two hundred demos, each from a seed of its own: how often the intervals hold the truth that the demo was drawn
 * from. What is asked is what an interval promises, less three standard errors of a share of so many trials.
 */
const seeds = Array.from({ length: 200 }, (_, index) => `interval ${index + 1}`);

type Key = { sex: string; band: string; kind: string; team: string };
const readKey = (key: string) => {
  const [sex = "", band = "", kind = "", team = ""] = key.split("|");
  return { sex, band, kind, team };
};

/** One demo, by the finest groups that are looked at. */
type Demo = ReadonlyMap<string, Cell>;
const demos: Demo[] = [];

beforeAll(() => {
  for (const seed of seeds) {
    const scenario = buildScenario({ seed, today: TODAY });
    demos.push(
      tabulate(scenario, ({ sex, band, kind, team }) => [sex, band, kind, team].join("|"), "sudden"),
    );
  }
}, 300_000);

/** Cells of a demo put together by a coarser key. */
function coarsen(demo: Demo, keyOf: (key: Key) => string) {
  return addUp([...demo].map(([key, cell]) => new Map([[keyOf(readKey(key)), cell]])));
}

const holds = ({ lower, upper }: { lower: number; upper: number }, truth: number) =>
  lower <= truth && truth <= upper;

/** The least share of trials that a 95 % interval may hold, three standard errors below what it promises. */
const least = (promised: number, trials: number) =>
  promised - 3 * Math.sqrt((promised * (1 - promised)) / trials);

function rateHolds({ events, exposures, expected }: Cell) {
  return holds(incidenceRate({ events, exposure: exposures }), (1000 * expected) / exposures);
}

const counted = ({ events, exposures }: Cell) => ({ events, exposure: exposures });
const trueRatio = (a: Cell, b: Cell) => a.expected / a.exposures / (b.expected / b.exposures);
const share = (list: readonly boolean[]) => list.filter(Boolean).length / list.length;

describe("over 200 demos, the true rate lies inside the exact interval", () => {
  it.each<[string, (key: Key) => string]>([
    ["the whole club's", () => "all"],
    ["of each sex", ({ sex }) => sex],
    ["of each session kind", ({ kind }) => kind],
    ["of each age band", ({ band }) => band],
    ["of each team", ({ team }) => team],
    ["of sex, age band and session kind", ({ sex, band, kind }) => `${sex} ${band} ${kind}`],
  ])("%s rate, as often as it should", (_, keyOf) => {
    const held = demos.flatMap((demo) => [...coarsen(demo, keyOf).values()].map(rateHolds));
    expect(held.length).toBeGreaterThanOrEqual(200);
    expect(share(held)).toBeGreaterThanOrEqual(least(0.95, held.length));
  });

  it("and would not if the rates were a fifth higher than the truth", () => {
    const inflated = demos.map((demo) => {
      const cell = coarsen(demo, () => "all").get("all");
      if (!cell) throw new Error("an empty demo");
      return rateHolds({ ...cell, expected: cell.expected / 1.2 });
    });
    expect(share(inflated)).toBeLessThan(least(0.95, 200));
  });
});

describe("over 200 demos, the true ratio lies inside", () => {
  const pairs = () =>
    demos.map((demo) => {
      const bySex = coarsen(demo, ({ sex }) => sex);
      const [girls, boys] = [bySex.get("female"), bySex.get("male")];
      if (!girls || !boys) throw new Error("a demo without girls or boys");
      return { demo, girls, boys };
    });

  it("the mid-P interval of girls against boys", () => {
    const held = pairs().map(({ girls, boys }) =>
      holds(rateRatio(counted(girls), counted(boys)), trueRatio(girls, boys)),
    );
    expect(share(held)).toBeGreaterThanOrEqual(least(0.95, held.length));
  });

  it("the interval that allows for teams, whose optimism with few teams is bounded", () => {
    const held = pairs().map(({ demo, girls, boys }) => {
      const rows = [...coarsen(demo, ({ sex, team }) => `${sex}|||${team}`)].flatMap(([key, cell]) => {
        const { sex, team } = readKey(key);
        const group = sex === "female" ? ("a" as const) : ("b" as const);
        return sex === "not_stated" ? [] : [{ ...counted(cell), group, cluster: team }];
      });
      return holds(clusterRobustRateRatio(rows), trueRatio(girls, boys));
    });
    expect(share(held)).toBeGreaterThanOrEqual(least(0.9, held.length));
  });

  it("the Mantel-Haenszel interval of matches against training within sex and age band", () => {
    const held = demos.map((demo) => {
      const cells = coarsen(demo, ({ sex, band, kind }) => `${sex}|${band}|${kind}`);
      const strata = [...cells.keys()].flatMap((key) => {
        const { sex, band, kind } = readKey(key);
        const [match, training] = [cells.get(key), cells.get(`${sex}|${band}|training`)];
        return kind === "match" && match && training ? [{ match, training }] : [];
      });
      const observed = mantelHaenszel(
        strata.map(({ match, training }) => ({ a: counted(match), b: counted(training) })),
      );
      // The same weights over what the truth expects.
      const weigh = (pick: (stratum: (typeof strata)[number]) => number) =>
        strata.reduce((sum, stratum) => sum + pick(stratum), 0);
      const total = ({ match, training }: (typeof strata)[number]) => match.exposures + training.exposures;
      const truth =
        weigh((s) => (s.match.expected * s.training.exposures) / total(s)) /
        weigh((s) => (s.training.expected * s.match.exposures) / total(s));
      return holds(observed, truth);
    });
    expect(share(held)).toBeGreaterThanOrEqual(least(0.95, held.length));
  });
});
