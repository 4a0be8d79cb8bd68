import { beforeAll, describe, expect, it } from "vitest";
import { poissonInterval, rateRatio } from "~/statistics/index.ts";
import { ageOnDay } from "~db/seed/scenario/days.ts";
import { DEMO_SEED } from "~db/seed/scenario/index.ts";
import { ACL_PATTERN, SUDDEN_PATTERNS } from "~db/seed/scenario/injury-patterns.ts";
import {
  ACL_FACTS,
  ACL_RATES,
  AGE_BANDS,
  preventableShare,
  preventableShareOf,
  SUDDEN_RATES,
  shareByArea,
  trueRate,
  WARM_UP_RATE_RATIO,
} from "~db/seed/scenario/true-rates.ts";
import { find, indexByKey, scenarioOf } from "./shared.ts";
import { addUp, isCovered, tabulate } from "./tabulate.ts";

const SEEDS = Array.from({ length: 8 }, (_, index) => `truth ${index + 1}`);

beforeAll(() => {
  for (const seed of SEEDS) scenarioOf(seed);
}, 60_000);

describe("the truth inside the exact interval", { timeout: 30_000 }, () => {
  const byStratum = (facts: { sex: string; band: string; kind: string }) =>
    `${facts.sex} ${facts.band} ${facts.kind}`;

  it("in at least 95 % of strata of sex, age band and session kind, over eight seeds", () => {
    const cells = SEEDS.flatMap((seed) => [...tabulate(scenarioOf(seed), byStratum, "sudden").values()]);
    expect(cells.length).toBeGreaterThan(200);
    expect(cells.filter(isCovered).length / cells.length).toBeGreaterThanOrEqual(0.95);
  });

  it("in the demo's own large strata, all but a few", () => {
    const cells = [...tabulate(scenarioOf(DEMO_SEED), byStratum, "sudden").values()].filter(
      (cell) => cell.expected >= 2,
    );
    expect(cells.length).toBeGreaterThan(8);
    expect(cells.filter((cell) => !isCovered(cell)).length).toBeLessThanOrEqual(2);
  });

  it("for each session kind and sex when all seeds are put together (a bias would show)", () => {
    const cells = addUp(
      SEEDS.map((seed) => tabulate(scenarioOf(seed), (facts) => `${facts.sex} ${facts.kind}`, "sudden")),
    );
    for (const [key, cell] of cells) {
      const { lower, upper } = poissonInterval(cell.events, { level: 0.999 });
      expect(cell.expected, key).toBeGreaterThanOrEqual(lower);
      expect(cell.expected, key).toBeLessThanOrEqual(upper);
    }
  });

  it("for preventable injuries with and without the full warm-up", () => {
    const cells = addUp(
      SEEDS.map((seed) => tabulate(scenarioOf(seed), (facts) => String(facts.warmedUp), "preventable")),
    );
    for (const key of ["true", "false"]) {
      const cell = find(cells, key);
      const { lower, upper } = poissonInterval(cell.events, { level: 0.999 });
      expect(cell.events).toBeGreaterThan(60);
      expect(cell.expected).toBeGreaterThanOrEqual(lower);
      expect(cell.expected).toBeLessThanOrEqual(upper);
    }
    // Held against what the same exposures would have had without any effect, the ratio shows through.
    const warmed = find(cells, "true");
    const plain = find(cells, "false");
    const ratio = rateRatio(
      { events: warmed.events, exposure: warmed.expected / WARM_UP_RATE_RATIO },
      { events: plain.events, exposure: plain.expected },
      { level: 0.99 },
    );
    expect(ratio.lower).toBeLessThan(WARM_UP_RATE_RATIO);
    expect(ratio.upper).toBeGreaterThan(WARM_UP_RATE_RATIO);
    expect(ratio.upper).toBeLessThan(1);
  });
});

/** The trade's rules of thumb: common practice, no source. */
describe("rules of thumb", () => {
  const bands = AGE_BANDS.map((band) => band.label).filter((label) => label !== "under 10");

  it("give girls and women two to six times the rate of anterior cruciate ligament tears", () => {
    for (const band of bands) {
      for (const kind of [0, 1] as const) {
        const ratio = ACL_RATES.female[band][kind] / ACL_RATES.male[band][kind];
        expect(ratio).toBeGreaterThanOrEqual(2);
        expect(ratio).toBeLessThanOrEqual(6);
      }
    }
  });

  it("make most of them non-contact, on a planted foot, between 15 and 25 years", () => {
    const share = (contact: string) => ACL_PATTERN.contacts.find(([each]) => each === contact)?.[1] ?? 0;
    const all = ACL_PATTERN.contacts.reduce((sum, [, weight]) => sum + weight, 0);
    expect(share("non_contact") / all).toBeGreaterThan(0.5);
    const moves = ACL_PATTERN.movements.free ?? [];
    const planted = moves.filter(([move]) => move === "pivoting" || move === "cutting");
    const weigh = (list: typeof moves) => list.reduce((sum, [, weight]) => sum + weight, 0);
    expect(weigh(planted) / weigh(moves)).toBeGreaterThan(0.5);

    let young = 0;
    let total = 0;
    for (const seed of SEEDS) {
      const scenario = scenarioOf(seed);
      const athletes = indexByKey(scenario.athletes);
      for (const injury of scenario.injuries.filter((each) => each.key.endsWith("/acl"))) {
        const age = ageOnDay(find(athletes, injury.athlete).dateOfBirth, injury.at.slice(0, 10));
        total += 1;
        if (age >= 15 && age <= 25) young += 1;
        if (injury.surgeryOn) expect(injury.surgeryOn > injury.at).toBe(true);
      }
    }
    expect(total).toBeGreaterThan(20);
    expect(young / total).toBeGreaterThan(0.5);
  });

  it("add a meniscus injury to at most half and operate within five months", () => {
    expect(ACL_FACTS.withMeniscus).toBeGreaterThan(0);
    expect(ACL_FACTS.withMeniscus).toBeLessThanOrEqual(0.5);
    expect(ACL_FACTS.surgeryDays[1]).toBeLessThanOrEqual(150);
  });

  it("make matches more dangerous than training, at every age", () => {
    for (const sex of ["female", "male"] as const) {
      for (const { label } of AGE_BANDS)
        expect(SUDDEN_RATES[sex][label][1]).toBeGreaterThan(SUDDEN_RATES[sex][label][0]);
    }
  });
});

describe("shares", () => {
  it("add up to one and put sex not stated between the two", () => {
    for (const group of ["soccer", "court"] as const) {
      const shares = [...shareByArea("female", group).values()];
      expect(shares.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 12);
      const [female, male, unsaid] = (["female", "male", "not_stated"] as const).map((sex) =>
        preventableShare(sex, group),
      );
      expect(unsaid).toBeLessThanOrEqual(Math.max(female ?? 0, male ?? 0));
      expect(unsaid).toBeGreaterThanOrEqual(Math.min(female ?? 0, male ?? 0));
    }
  });

  it("count only sudden knee and ankle injuries without a direct blow as preventable", () => {
    const byKey = indexByKey(SUDDEN_PATTERNS);
    expect(preventableShareOf(find(byKey, "thigh-muscle"))).toBe(0);
    expect(preventableShareOf(find(byKey, "knee-contusion"))).toBe(0);
    expect(preventableShareOf(find(byKey, "ankle-sprain"))).toBeCloseTo(0.7, 12);
    expect(preventableShareOf(ACL_PATTERN)).toBeCloseTo(0.85, 12);
  });

  it("take the warm-up's effect from the preventable part alone", () => {
    const stratum = { sex: "female", band: "15-16", kind: "match" } as const;
    const cold = trueRate(stratum, "soccer", false);
    const warm = trueRate(stratum, "soccer", true);
    expect(warm.preventable / cold.preventable).toBeCloseTo(WARM_UP_RATE_RATIO, 12);
    expect(cold.sudden - warm.sudden).toBeCloseTo(cold.preventable - warm.preventable, 12);
    expect(warm.gradual).toBe(cold.gradual);
  });
});
