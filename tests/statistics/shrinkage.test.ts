import { describe, expect, it } from "vitest";
import { shrunkenRates } from "~/statistics";
import { expectInterval, expectValue } from "./agreement";

describe("shrunkenRates", () => {
  const events = [2, 9, 4, 0, 12, 3, 7, 1, 15, 5];
  const exposure = [900, 1500, 1100, 640, 1450, 980, 1320, 760, 1610, 1240];
  const groups = events.map((count, index) => ({ events: count, exposure: exposure[index] ?? 0 }));

  it("agrees with R: MASS::glm.nb(y ~ 1 + offset(log(e)))", () => {
    const { mean, shape, groups: shrunken } = shrunkenRates(groups);
    expectValue(mean, "4.722859795");
    expectValue(shape, "6.108149439");
    const printed = [
      "3.696754",
      "5.408679",
      "4.223492",
      "3.159416",
      "6.600826",
      "4.006548",
      "5.015907",
      "3.461791",
      "7.270359",
      "4.384826",
    ];
    for (const [index, value] of printed.entries())
      expectValue(shrunken[index]?.estimate, value, `group ${index}`);
    expectInterval(shrunken[0] ?? expect.fail(), "1.606876–6.642303", "first");
    expectInterval(shrunken[3] ?? expect.fail(), "1.172410–6.114023", "fourth, without events");
  });

  it("puts every group at the mean when they differ no more than chance would make them", () => {
    const alike = [5, 6, 4, 5].map((count, index) => ({
      events: count,
      exposure: [1000, 1200, 850, 990][index] ?? 0,
    }));
    const result = shrunkenRates(alike);
    expect(result.shape).toBe(Infinity);
    expectValue(result.mean, String((20 / 4040) * 1000));
    for (const group of result.groups) {
      expect(group.estimate).toBe(result.mean);
      expect(group.lower).toBeLessThan(group.estimate);
      expect(group.upper).toBeGreaterThan(group.estimate);
    }
  });

  it("keeps no events at all as a result with an upper limit", () => {
    const none = shrunkenRates([
      { events: 0, exposure: 600 },
      { events: 0, exposure: 600 },
    ]);
    expect(none.mean).toBe(0);
    expectInterval(none.groups[0] ?? expect.fail(), "0 (0–3.074066)");
  });
});
