import { describe, expect, it } from "vitest";
import { mantelHaenszel, mantelHaenszelDifference, rateRatio } from "~/statistics";
import { expectInterval, expectValue } from "./agreement";

type Side = [events: number, exposure: number];

// Ratio, then Wald, exact and mid-P limits, computed with R 4.2.2 (formulas; exact also by poisson.test).
const ratios: [string, Side, Side, string, string, string, string][] = [
  // Rothman's fluoroscopy data, from memory [M].
  [
    "fluoroscopy",
    [41, 28_010],
    [15, 19_017],
    "1.855759",
    "1.027226–3.352563",
    "1.005684–3.609300",
    "1.041075–3.449423",
  ],
  // Bram 2020 abstract [S]: printed 1.40 (1.25–1.57).
  [
    "ACL, girls over boys",
    [586, 6_986_683],
    [649, 10_837_568],
    "1.400599",
    "1.252587–1.566101",
    "1.250441–1.568527",
    "1.252424–1.566058",
  ],
  // PMC6208306 [S]: printed 2.84 (2.71–2.96).
  [
    "women's soccer, college over high school",
    [5092, 772_048],
    [3242, 1_393_753],
    "2.835417",
    "2.713261–2.963072",
    "2.712723–2.963982",
    "2.713397–2.963239",
  ],
  // mdpi 2075-4663/3/2/56 [S].
  [
    "trained over untrained",
    [1, 36_724],
    [13, 61_244],
    "0.128283",
    "0.016782–0.980627",
    "0.003019–0.854083",
    "0.005979–0.731693",
  ],
  // Silvers-Granelli 2015: counts published [S], AE from memory [M].
  [
    "warm-up over control, college men",
    [285, 35_226],
    [665, 44_212],
    "0.537898",
    "0.468205–0.617966",
    "0.466551–0.618894",
    "0.467714–0.617438",
  ],
  // LaBella 2011: AE published [S], counts calculated back from rates [R]; unclustered.
  [
    "warm-up over control, high school girls",
    [20, 28_023],
    [37, 22_925],
    "0.442204",
    "0.256674–0.761839",
    "0.243183–0.781876",
    "0.252284–0.757773",
  ],
];

const counted = ([events, exposure]: Side) => ({ events, exposure });

describe("rateRatio", () => {
  it.each(ratios)("%s", (what, a, b, estimate, wald, exact, midP) => {
    const printed = { wald, exact, "mid-p": midP };
    for (const method of ["wald", "exact", "mid-p"] as const) {
      const ratio = rateRatio(counted(a), counted(b), { method });
      expectInterval(ratio, `${estimate} (${printed[method]})`, `${what} ${method}`);
    }
    const { method, ...usual } = rateRatio(counted(a), counted(b));
    expect(usual).toMatchObject({ lower: rateRatio(counted(a), counted(b), { method: "mid-p" }).lower });
    expect(method).toContain("mid-P");
  });

  it("prints what the papers print", () => {
    const bram = rateRatio({ events: 586, exposure: 6_986_683 }, { events: 649, exposure: 10_837_568 });
    expectInterval(bram, "1.40 (1.25–1.57)", "Bram 2020 [S]");
    const soccer = rateRatio({ events: 5092, exposure: 772_048 }, { events: 3242, exposure: 1_393_753 });
    expectInterval(soccer, "2.84 (2.71–2.96)", "PMC6208306 [S]");
  });

  it("gives the p-values of the fluoroscopy example [R: poisson.test; mid-P by formula]", () => {
    const a = { events: 41, exposure: 28_010 };
    const b = { events: 15, exposure: 19_017 };
    expectValue(rateRatio(a, b, { method: "exact" }).pValue, "0.040852");
    expectValue(rateRatio(a, b).pValue, "0.0354574");
    // ln 1.855759 / sqrt(1/41 + 1/15) = 2.0489 in standard errors.
    expectValue(rateRatio(a, b, { method: "wald" }).pValue, "0.0405");
  });

  it("keeps the crude ratio, not the median-unbiased one some programs print with mid-P limits", () => {
    const ratio = rateRatio({ events: 41, exposure: 28_010 }, { events: 15, exposure: 19_017 });
    expectValue(ratio.estimate, "1.855759");
    expect(Math.abs(ratio.estimate - 1.842977)).toBeGreaterThan(0.01);
  });

  it("agrees with other exact p-values of equal exposures", () => {
    // By hand: 1 v 9 of 10 fair coins: 2 (1 + 10) / 1024; 5 v 5 is the mode; 0 v 4: 2 / 16.
    const equal = (a: number, b: number) =>
      rateRatio({ events: a, exposure: 50 }, { events: b, exposure: 50 }, { method: "exact" }).pValue;
    expect(equal(1, 9)).toBeCloseTo(22 / 1024, 12);
    expect(equal(9, 1)).toBeCloseTo(22 / 1024, 12);
    expect(equal(5, 5)).toBe(1);
    expect(equal(0, 4)).toBeCloseTo(2 / 16, 12);
    // Unequal exposures: only outcomes no more likely than the observed one count: (1/4)^3 of 3 events, no other.
    const skewed = rateRatio({ events: 3, exposure: 100 }, { events: 0, exposure: 300 });
    expect(skewed.pValue).toBeCloseTo(1 / 64, 12);
  });

  it("gives one-sided limits without events on one side, exact whatever the method", () => {
    for (const method of ["wald", "exact", "mid-p"] as const) {
      // LaBella 2011, surgery: 0 in 28,023 AE against 4 in 22,925 [counts back-calculated, R].
      const none = rateRatio({ events: 0, exposure: 28_023 }, { events: 4, exposure: 22_925 }, { method });
      expect(none).toMatchObject({ estimate: 0, lower: 0, method: "exact (conditional binomial)" });
      // p solves (1 - p)^4 = 0.025; ratio = p / (1 - p) x 22,925 / 28,023.
      const share = 1 - 0.025 ** 0.25;
      expect(none.upper).toBeCloseTo(((share / (1 - share)) * 22_925) / 28_023, 10);
      const unlimited = rateRatio(
        { events: 4, exposure: 22_925 },
        { events: 0, exposure: 28_023 },
        { method },
      );
      expect(unlimited).toMatchObject({ estimate: Infinity, upper: Infinity });
      expect(unlimited.lower).toBeCloseTo(1 / none.upper, 10);
      expect(unlimited.pValue).toBeCloseTo(none.pValue, 12);
    }
  });

  it("shows that unclustered limits are too narrow for teams: Hislop 2017 (PMC5530334 [S]) [R]", () => {
    const a = { events: 233, exposure: 9083 };
    const b = { events: 208, exposure: 6855 };
    const ours = rateRatio(a, b, { method: "wald", level: 0.9 });
    expectValue(ours.estimate, "0.85", "printed");
    const naive = Math.log(ours.upper / ours.lower) / (2 * 1.6448536269514722);
    expectValue(naive, "0.0953915");
    const printed = Math.log(1.17 / 0.61) / (2 * 1.6448536269514722);
    expectValue(printed, "0.1979812");
    expectValue((printed / naive) ** 2, "4.31");
  });

  it("prints the crude ratios of trials whose counts are known", () => {
    // Soligard 2008: injured athletes published [S], hours from memory [M]; the printed 0.71 is cluster-adjusted.
    const soligard = rateRatio({ events: 121, exposure: 49_899 }, { events: 143, exposure: 45_428 });
    expect(soligard.estimate).toBeGreaterThan(0.49);
    expect(soligard.estimate).toBeLessThan(1.03);
    // Waldén 2012: counts [S], hours [M]; printed rate ratio 0.36 is adjusted for clusters, crude 0.43.
    const walden = rateRatio({ events: 7, exposure: 149_214 }, { events: 14, exposure: 129_084 });
    expectValue(walden.estimate, "0.4325", "crude");
    expect(walden.estimate).toBeGreaterThan(0.15);
    expect(walden.estimate).toBeLessThan(0.85);
  });
});

describe("mantelHaenszel", () => {
  // British doctors, from memory [M]; results with R: epiR::epi.2by2(method = "cohort.time").
  const strata = [
    { a: counted([32, 52_407]), b: counted([2, 18_790]) },
    { a: counted([104, 43_248]), b: counted([12, 10_673]) },
    { a: counted([206, 28_612]), b: counted([28, 5710]) },
    { a: counted([186, 12_663]), b: counted([28, 2585]) },
    { a: counted([102, 5317]), b: counted([31, 1462]) },
  ];

  it("pools the British doctors", () => {
    const pooled = mantelHaenszel(strata);
    expectInterval(pooled, "1.424682 (1.154703–1.757784)");
    expectValue(pooled.association.statistic, "11.016195");
    expectValue(pooled.heterogeneity.statistic, "10.411659");
    expect(pooled.heterogeneity.df).toBe(4);
    expectValue(pooled.heterogeneity.pValue, "0.034036");
    expectValue(mantelHaenszelDifference(strata, { per: 1 }).estimate, "0.00114392");
  });

  it("differs from the crude ratio, 1.719823 [R]", () => {
    const sum = (side: "a" | "b") => ({
      events: strata.reduce((total, s) => total + s[side].events, 0),
      exposure: strata.reduce((total, s) => total + s[side].exposure, 0),
    });
    expectValue(rateRatio(sum("a"), sum("b")).estimate, "1.719823");
  });

  it("is the crude Wald interval with a single stratum, and has nothing to test", () => {
    const single = { a: counted([41, 28_010]), b: counted([15, 19_017]) };
    const pooled = mantelHaenszel([single]);
    expectInterval(pooled, "1.855759 (1.027226–3.352563)");
    expect(pooled.heterogeneity).toEqual({ statistic: 0, df: 0, pValue: 1 });
    // The difference too is the plain one.
    expectInterval(mantelHaenszelDifference([single], { per: 10_000 }), "6.749950 (0.749272–12.750628)");
  });

  it("gives the exact one-sided limits when one side has no events in any stratum", () => {
    const only = { a: counted([0, 28_023]), b: counted([4, 22_925]) };
    const split = [
      { a: counted([0, 14_011.5]), b: counted([1, 11_462.5]) },
      { a: counted([0, 14_011.5]), b: counted([3, 11_462.5]) },
    ];
    const exact = rateRatio(only.a, only.b, { method: "exact" });
    expect(mantelHaenszel([only]).upper).toBeCloseTo(exact.upper, 9);
    expect(mantelHaenszel(split).upper).toBeCloseTo(exact.upper, 9);
    expect(mantelHaenszel(split)).toMatchObject({ estimate: 0, lower: 0 });
    const swapped = mantelHaenszel(split.map(({ a, b }) => ({ a: b, b: a })));
    expect(swapped).toMatchObject({ estimate: Infinity, upper: Infinity });
    expect(swapped.lower).toBeCloseTo(1 / exact.upper, 9);
  });

  it("takes strata without events in its stride", () => {
    const empty = { a: counted([0, 500]), b: counted([0, 800]) };
    const pooled = mantelHaenszel([...strata, empty]);
    expectInterval(pooled, "1.424682 (1.154703–1.757784)");
    expect(pooled.heterogeneity.df).toBe(4);
  });
});

describe("counts by mechanism", () => {
  it("gives the chi-squared printed for soccer, Agel 2005 abstract [S]: 4.1; [R] 4.101086", () => {
    // Contact and non-contact: men 72/66, women 115/161. Percentages printed for basketball do not match its counts.
    const [a, b, c, d] = [72, 66, 115, 161];
    const total = a + b + c + d;
    const statistic = (total * (a * d - b * c) ** 2) / ((a + b) * (c + d) * (a + c) * (b + d));
    expectValue(statistic, "4.101086");
    expectValue((78 / (37 + 78)) * 100, "67.83");
    expectValue((305 / (100 + 305)) * 100, "75.31");
  });
});
