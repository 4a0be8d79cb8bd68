import { describe, expect, it } from "vitest";
import { burden, directlyStandardisedRate, proportion, standardisedIncidenceRatio } from "~/statistics";
import { expectInterval, expectValue } from "./agreement";

// Down syndrome by maternal age. Published: help of epitools::ageadjust.direct and vignette of dsrTest; data from
// Fleiss 1981 [S].
const weights = [319_933, 931_318, 786_511, 488_235, 237_863, 61_313];
const strataOf = (events: number[], exposures: number[]) =>
  events.map((count, index) => ({ events: count, exposure: exposures[index] ?? 0 }));
const fifthAndLater = strataOf([0, 8, 63, 112, 262, 295], [327, 30_666, 123_419, 149_919, 104_088, 34_392]);
const first = strataOf([107, 141, 60, 40, 39, 25], [230_061, 329_449, 114_920, 39_487, 14_208, 3052]);

describe("directlyStandardisedRate", () => {
  it("agrees with the published example, per 100 000 births [S]", () => {
    const rate = directlyStandardisedRate(fifthAndLater, weights, { per: 100_000 });
    expectInterval(rate, "75.529007 (67.702120–188.300173)");
  });

  it("agrees with R: epitools::ageadjust.direct", () => {
    const rate = directlyStandardisedRate(first, weights, { per: 100_000 });
    expectInterval(rate, "92.304526 (80.441750–105.763346)");
  });

  it("adjusts a small season [R]", () => {
    const strata = strataOf([4, 11, 6], [5200, 8300, 3100]);
    expectInterval(directlyStandardisedRate(strata, [6, 6, 4]), "1.269320 (0.770778–1.993561)");
    expectValue((21 / 16_600) * 1000, "1.265060", "crude");
  });

  it("keeps no events as a result: lower 0, upper that of the heaviest stratum", () => {
    const rate = directlyStandardisedRate(strataOf([0, 0], [1000, 2000]), [1, 1]);
    expect(rate).toMatchObject({ estimate: 0, lower: 0 });
    // -ln(0.025) x the largest weight over exposure, 0.5 / 1000.
    expectValue(rate.upper, "1.844440");
  });

  it("is the exact crude rate when there is one stratum", () => {
    expectInterval(
      directlyStandardisedRate([{ events: 10, exposure: 1000 }], [7]),
      "10 (4.795389–18.390356)",
    );
  });
});

describe("standardisedIncidenceRatio", () => {
  it("agrees on 4 observed, 3.3 expected [S: defaults in the source of epiR::epi.smr; R: poisson.test]", () => {
    const counts = { observed: 4, expected: 3.3 };
    expectInterval(standardisedIncidenceRatio(counts), "1.212121 (0.330262–3.103512)");
    expectInterval(standardisedIncidenceRatio(counts, { method: "byar" }), "1.212121 (0.326106–3.103258)");
    // The root with 40 digits. epiR prints 0.385140–2.923766, whose search stops at the fifth digit.
    expectInterval(standardisedIncidenceRatio(counts, { method: "mid-p" }), "1.212121 (0.385135–2.923770)");
    expectInterval(standardisedIncidenceRatio(counts, { method: "mid-p" }), "1.2121 (0.3851–2.9238)");
  });

  it("agrees on 22 observed, 13.2 expected [R]", () => {
    const counts = { observed: 22, expected: 13.2 };
    expectInterval(standardisedIncidenceRatio(counts), "1.666667 (1.044491–2.523353)");
    expectInterval(standardisedIncidenceRatio(counts, { method: "byar" }), "1.666667 (1.044128–2.523468)");
  });

  it("names its method", () => {
    const counts = { observed: 0, expected: 2 };
    const methods = (["exact", "byar", "mid-p"] as const).map((method) =>
      standardisedIncidenceRatio(counts, { method }),
    );
    expect(new Set(methods.map(({ method }) => method)).size).toBe(3);
    for (const ratio of methods) expect(ratio).toMatchObject({ estimate: 0, lower: 0 });
  });
});

describe("burden", () => {
  it("gives days lost per 1000 hours with limits that widen with long injuries [R]", () => {
    const result = burden({ daysLost: [4, 9, 0, 21, 2], exposureHours: 1800 });
    expectInterval(result, "20 (5.63073652–71.03866405)");
    expect(result.largestShare).toBeCloseTo(21 / 36, 12);
  });

  it("gives the burdens of Hislop 2017 (PMC5530334 [S]: 715 and 862) [R]", () => {
    expectValue(burden({ daysLost: [6499], exposureHours: 9083 }).estimate, "715.512496");
    expectValue(burden({ daysLost: [5907], exposureHours: 6855 }).estimate, "861.706783");
  });

  it("is 0 with no interval when no days were lost", () => {
    for (const daysLost of [[], [0, 0]]) {
      const result = burden({ daysLost, exposureHours: 100 });
      expect(result).toMatchObject({ estimate: 0, lower: null, upper: null, largestShare: 0 });
    }
  });
});

describe("proportion", () => {
  it("agrees on 18 of 24 [R]", () => {
    const counts = { successes: 18, trials: 24 };
    expectInterval(proportion(counts, { method: "clopper-pearson" }), "0.75 (0.532887–0.902270)");
    expectInterval(proportion(counts, { method: "wilson" }), "0.75 (0.551006–0.880006)");
    expect(proportion(counts)).toEqual(proportion(counts, { method: "wilson" }));
  });

  it("agrees on the warm-ups of LaBella 2011, 1425 of 1773 practices [S; R]", () => {
    const counts = { successes: 1425, trials: 1773 };
    expectInterval(proportion(counts, { method: "clopper-pearson" }), "0.803723 (0.784457–0.821978)");
    expectInterval(proportion(counts), "0.803723 (0.784587–0.821545)");
    expectValue(proportion(counts).estimate * 100, "80.4", "printed per cent");
  });

  it("reaches exactly 0 and 1 at the ends and not beyond", () => {
    for (const method of ["wilson", "clopper-pearson"] as const) {
      expect(proportion({ successes: 0, trials: 7 }, { method })).toMatchObject({ estimate: 0, lower: 0 });
      expect(proportion({ successes: 7, trials: 7 }, { method })).toMatchObject({ estimate: 1, upper: 1 });
    }
  });
});
