import { describe, expect, it } from "vitest";
import {
  exceedance,
  incidenceRate,
  poissonByarInterval,
  poissonInterval,
  poissonMidPInterval,
  rateDifference,
} from "~/statistics";
import { expectInterval, expectValue } from "./agreement";

// Counts: published sources named a row. Third column: exact limits computed with R 4.2.2 (poisson.test).
// Fourth: the estimate as the source prints it.
const publishedRows: [string, number, number, number, string, string][] = [
  [
    "ACL adolescents, all: Bram 2020 abstract",
    1235,
    17_824_251,
    1000,
    "0.069288 (0.065477–0.073262)",
    "0.069",
  ],
  ["ACL girls: Bram 2020 abstract", 586, 6_986_683, 1000, "0.083874 (0.077220–0.090948)", "0.084"],
  ["ACL boys: Bram 2020 abstract", 649, 10_837_568, 1000, "0.059884 (0.055365–0.064674)", "0.060"],
  [
    "high school ACL: Joseph 2013, PMC3867093",
    617,
    9_452_180,
    100_000,
    "6.527595 (6.022626–7.063599)",
    "6.5",
  ],
  ["college first non-contact ACL: PMC6604059", 48, 320_719, 1000, "0.149664 (0.110350–0.198432)", "0.150"],
  ["high school, same: PMC6604059", 53, 873_057, 1000, "0.060706 (0.045473–0.079405)", "0.061"],
  ["college men's soccer, all: PMC8293884 t01", 2821, 331_678, 1000, "8.505237 (8.194245–8.825011)", "8.51"],
  ["practice: PMC8293884 t01", 1463, 251_225, 1000, "5.823465 (5.528847–6.129705)", "5.82"],
  ["competition: PMC8293884 t01", 1358, 80_453, 1000, "16.879420 (15.993500–17.801645)", "16.88"],
  ["Division I competition: PMC8293884 t01", 442, 22_981, 1000, "19.233280 (17.481802–21.112715)", "19.23"],
  ["high school girls' soccer: PMC6208306", 3242, 1_393_753, 1000, "2.326094 (2.246706–2.407571)", "2.33"],
  ["college women's soccer: PMC6208306", 5092, 772_048, 1000, "6.595445 (6.415521–6.779136)", "6.60"],
  ["overuse, girls: PMC9205548 t01", 713, 924_245, 10_000, "7.714405 (7.158474–8.302045)", "7.7"],
  ["overuse, girls' soccer: PMC9205548 t01", 85, 119_045, 10_000, "7.140157 (5.703304–8.828915)", "7.1"],
  ["overuse, boys' soccer: PMC9205548 t01", 61, 177_656, 10_000, "3.433602 (2.626433–4.410605)", "3.4"],
  ["field hockey, time loss: PMC9205548 t01", 9, 19_844, 10_000, "4.535376 (2.073863–8.609556)", "4.5"],
  [
    "non-contact ACL, trained: mdpi 2075-4663/3/2/56",
    1,
    36_724,
    1000,
    "0.027230 (0.000689–0.151717)",
    "0.03",
  ],
  ["untrained: mdpi 2075-4663/3/2/56", 13, 61_244, 1000, "0.212266 (0.113023–0.362981)", "0.21"],
];

// Published limits that are exact, so that they can be checked without R.
const publishedExactLimits: [string, number, number, number, string][] = [
  ["Bram 2020, all", 1235, 17_824_251, 1000, "0.069 (0.065–0.073)"],
  ["Bram 2020, girls", 586, 6_986_683, 1000, "0.084 (0.077–0.091)"],
  ["Bram 2020, boys", 649, 10_837_568, 1000, "0.060 (0.055–0.065)"],
  ["PMC9205548 t01, girls", 713, 924_245, 10_000, "7.7 (7.2–8.3)"],
  ["PMC9205548 t01, girls' soccer", 85, 119_045, 10_000, "7.1 (5.7–8.8)"],
  ["PMC9205548 t01, boys' soccer", 61, 177_656, 10_000, "3.4 (2.6–4.4)"],
  ["PMC9205548 t01, field hockey", 9, 19_844, 10_000, "4.5 (2.1–8.6)"],
];

// R 4.2.2, stats::poisson.test.
const garwood: [number, string, string][] = [
  [0, "0", "3.688879"],
  [1, "0.025318", "5.571643"],
  [2, "0.242209", "7.224688"],
  [3, "0.618672", "8.767273"],
  [4, "1.089865", "10.241589"],
  [5, "1.623486", "11.668332"],
  [6, "2.201894", "13.059474"],
  [7, "2.814363", "14.422675"],
  [8, "3.453832", "15.763189"],
  [9, "4.115373", "17.084803"],
  [10, "4.795389", "18.390356"],
  [12, "6.200575", "20.961585"],
  [15, "8.395386", "24.740219"],
  [20, "12.216520", "30.888378"],
];

describe("incidenceRate", () => {
  it.each(publishedRows)("%s", (what, events, exposure, per, exact, printed) => {
    const rate = incidenceRate({ events, exposure }, { per });
    expectInterval(rate, exact, what);
    expectValue(rate.estimate, printed, "printed by the source");
    expect(rate.method).toBe("exact Poisson (Garwood)");
    expect(rate.level).toBe(0.95);
  });

  it.each(publishedExactLimits)(
    "agrees with the limits printed by %s",
    (what, events, exposure, per, printed) => {
      expectInterval(incidenceRate({ events, exposure }, { per }), printed, what);
    },
  );

  it("gives the match incidence of Hislop 2017 per 1000 hours (PMC5530334 [S]: 26 and 30) [R]", () => {
    expectValue(incidenceRate({ events: 233, exposure: 9083 }).estimate, "25.652318");
    expectValue(incidenceRate({ events: 208, exposure: 6855 }).estimate, "30.342815");
  });

  it("keeps no events as a result: 0 to 3.074066 per 1000 in 1200 AE [R: poisson.test]", () => {
    expectInterval(incidenceRate({ events: 0, exposure: 1200 }), "0 (0–3.074066)");
  });

  it.each([
    ["all", 2821, 331_678, "8.51 (8.19–8.82)"],
    ["practice", 1463, 251_225, "5.82 (5.53–6.12)"],
    ["competition", 1358, 80_453, "16.88 (15.98–17.78)"],
    ["Division I competition", 442, 22_981, "19.23 (17.44–21.03)"],
  ])("explains the normal limits printed by PMC8293884 t01 [S], %s", (what, events, exposure, printed) => {
    const { estimate } = incidenceRate({ events, exposure });
    const margin = ((1.959963985 * Math.sqrt(events)) / exposure) * 1000;
    expectInterval({ estimate, lower: estimate - margin, upper: estimate + margin }, printed, what);
  });

  it.each([
    // LaBella 2011 (jamapediatrics 1107636): rates and AE [S], counts calculated back [R].
    ["LaBella 2011, gradual onset, warm-up", 12, 28_023, "0.43"],
    ["LaBella 2011, gradual onset, control", 28, 22_925, "1.22"],
    ["LaBella 2011, acute non-contact, warm-up", 20, 28_023, "0.71"],
    ["LaBella 2011, acute non-contact, control", 37, 22_925, "1.61"],
    ["LaBella 2011, non-contact ankle, warm-up", 7, 28_023, "0.25"],
    ["LaBella 2011, non-contact ankle, control", 17, 22_925, "0.74"],
    ["LaBella 2011, surgery, warm-up", 0, 28_023, "0"],
    ["LaBella 2011, surgery, control", 4, 22_925, "0.17"],
    // Counts and rates [S], AE from memory [M].
    ["Silvers-Granelli 2015, warm-up", 285, 35_226, "8.09"],
    ["Silvers-Granelli 2015, control", 665, 44_212, "15.04"],
  ])("%s: %i in %i AE is %s per 1000", (what, events, exposure, printed) => {
    expectValue(incidenceRate({ events, exposure }).estimate, printed, what);
  });

  it("differs from the normal limits some papers print (rate ± 1.96 √n / AE) [R]", () => {
    const { estimate, lower, upper } = incidenceRate({ events: 2821, exposure: 331_678 });
    const margin = (1.959963985 * Math.sqrt(2821)) / 331.678;
    expectValue(estimate - margin, "8.191379");
    expectValue(estimate + margin, "8.819095");
    expect(lower).toBeGreaterThan(8.194);
    expect(upper).toBeGreaterThan(8.825);
  });

  it("uses the level it is given", () => {
    const wide = incidenceRate({ events: 5, exposure: 1000 }, { level: 0.99 });
    const narrow = incidenceRate({ events: 5, exposure: 1000 }, { level: 0.9 });
    // Sums of Poisson terms with 60 digits.
    expectInterval(narrow, "5 (1.970150–10.513035)", "90 %");
    expect(wide.lower).toBeLessThan(narrow.lower);
    expect(wide.upper).toBeGreaterThan(narrow.upper);
    expect(wide.level).toBe(0.99);
  });
});

describe("limits of a count", () => {
  it.each(garwood)("exact limits of %i events", (events, lower, upper) => {
    const interval = poissonInterval(events);
    expectValue(interval.lower, lower);
    expectValue(interval.upper, upper);
  });

  it("gives the other methods' limits of 10 events [R]", () => {
    expectInterval(poissonMidPInterval(10), "5.079522–17.824854", "mid-P");
    expectInterval(poissonByarInterval(10), "4.787450–18.391459", "Byar");
  });

  it("keeps the lower limit at 0 without events whatever the method", () => {
    expect(poissonMidPInterval(0).lower).toBe(0);
    expect(poissonByarInterval(0).lower).toBe(0);
    // Half of P(X = 0) is alpha / 2 at -ln(0.05).
    expectValue(poissonMidPInterval(0).upper, "2.995732");
  });
});

describe("limits of large counts", () => {
  // Sums of Poisson terms with 60 digits. The packaged gamma distribution is wrong here from the fourth digit on.
  it.each([
    [1235, "1167.073825", "1305.848253"],
    [2821, "2717.850629", "2927.062079"],
    [5092, "4953.089947", "5233.818065"],
  ])("%i events", (events, lower, upper) => {
    expectInterval(poissonInterval(events), `${lower}–${upper}`);
  });

  it("joins the two ways of computing without a step", () => {
    // Neighbouring counts differ smoothly: the second difference of the upper limit is tiny and negative.
    for (let events = 490; events < 510; events++) {
      const [before, here, after] = [events - 1, events, events + 1].map((n) => poissonInterval(n).upper);
      const bend = Number(after) - 2 * Number(here) + Number(before);
      expect(bend).toBeLessThan(0);
      expect(bend).toBeGreaterThan(-1e-4);
    }
  });

  it("keeps the tail of a large mean", () => {
    // By definition of the limits.
    for (const events of [900, 1300, 20_000]) {
      const { lower, upper } = poissonInterval(events);
      expect(exceedance(events, lower)).toBeCloseTo(0.025, 10);
      expect(1 - exceedance(events + 1, upper)).toBeCloseTo(0.025, 10);
    }
  });
});

describe("rateDifference", () => {
  const exposed = { events: 41, exposure: 28_010 };
  const unexposed = { events: 15, exposure: 19_017 };

  it("gives the fluoroscopy example, per 10 000 [M: Rothman; R]", () => {
    expectInterval(rateDifference(exposed, unexposed, { per: 10_000 }), "6.749950 (0.749272–12.750628)");
  });

  it("says which limits it used when one side has no events, and never gives a width of 0", () => {
    const none = { events: 0, exposure: 1000 };
    const usual = rateDifference(exposed, unexposed);
    const empty = rateDifference(none, none);
    expect(empty.method).not.toBe(usual.method);
    expect(empty.estimate).toBe(0);
    expectInterval(empty, "0 (-3.688879–3.688879)");
  });
});

describe("exceedance", () => {
  it("gives the chance of as many or more [R: ppois]", () => {
    expectValue(exceedance(7, 2.1), "0.005862118");
    // Month 6 of the u chart: 15 injuries in 1.73 thousand AE at 4.830918 per thousand.
    expectValue(exceedance(15, (60 / 12.42) * 1.73), "0.024162");
    expect(exceedance(0, 3)).toBe(1);
  });
});
