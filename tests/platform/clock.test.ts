import fc from "fast-check";
import { DateTime } from "luxon";
import { expect, it } from "vitest";
import { addDays, weekStart } from "~/platform/clock";

it("begins every week on its Monday, as the time-zone library counts it", () => {
  fc.assert(
    fc.property(fc.integer({ min: -40_000, max: 40_000 }), (shift) => {
      const day = addDays("2026-12-01", shift);
      expect(weekStart(day)).toBe(DateTime.fromISO(day, { zone: "utc" }).startOf("week").toISODate());
    }),
  );
  expect(["2024-02-29", "2026-03-29", "2026-10-25", "2027-01-01"].map(weekStart)).toEqual([
    "2024-02-26",
    "2026-03-23",
    "2026-10-19",
    "2026-12-28",
  ]);
});
