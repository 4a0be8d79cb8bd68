import { describe, expect, it } from "vitest";
import { ageBand, ageOn, limbSymmetryIndex, severityBand, timeLoss } from "~/statistics";

describe("timeLoss", () => {
  // Onset, first day of full availability, days, band.
  it.each([
    ["2025-03-05", "2025-03-05", 0, "0"],
    ["2025-03-05", "2025-03-06", 0, "0"],
    ["2025-03-05", "2025-03-13", 7, "1-7"],
    ["2025-03-05", "2025-03-14", 8, "8-28"],
    ["2024-02-28", "2024-03-01", 1, "1-7"],
    ["2025-03-01", "2025-03-30", 28, "8-28"],
    ["2025-03-01", "2025-03-31", 29, ">28"],
    // Across the change of clocks and of the year.
    ["2025-03-29", "2025-03-31", 1, "1-7"],
    ["2024-12-30", "2025-01-02", 2, "1-7"],
  ])("from %s to %s: %i days, band %s", (onset, fullOn, days, band) => {
    expect(timeLoss({ onset, fullOn, asOf: "2025-12-31" })).toEqual({ days, ongoing: false });
    expect(severityBand(days)).toBe(band);
  });

  it("counts an open injury up to and with the day the records go to", () => {
    expect(timeLoss({ onset: "2025-03-05", fullOn: null, asOf: "2025-03-05" })).toEqual({
      days: 0,
      ongoing: true,
    });
    expect(timeLoss({ onset: "2025-03-05", fullOn: null, asOf: "2025-03-12" })).toEqual({
      days: 7,
      ongoing: true,
    });
  });

  it("never counts more for an open injury than it ends with when the athlete is back the next day", () => {
    const open = timeLoss({ onset: "2025-03-05", fullOn: null, asOf: "2025-03-12" });
    const closed = timeLoss({ onset: "2025-03-05", fullOn: "2025-03-13", asOf: "2025-03-13" });
    expect(open.days).toBe(closed.days);
  });

  it("treats a return planned for later as ongoing", () => {
    const planned = timeLoss({ onset: "2025-03-05", fullOn: "2025-04-01", asOf: "2025-03-10" });
    expect(planned).toEqual({ days: 5, ongoing: true });
  });

  it.each([
    [{ onset: "2025-02-30", fullOn: null, asOf: "2025-03-10" }, /^onset/],
    [{ onset: "2025-03-05T10:00", fullOn: null, asOf: "2025-03-10" }, /^onset/],
    [{ onset: "", fullOn: null, asOf: "2025-03-10" }, /^onset/],
    [{ onset: "2025-03-05", fullOn: "5/3/2025", asOf: "2025-03-10" }, /^fullOn/],
    [{ onset: "2025-03-05", fullOn: "2025-03-04", asOf: "2025-03-10" }, /^fullOn/],
    [{ onset: "2025-03-05", fullOn: null, asOf: "2025-03-04" }, /^asOf/],
    [{ onset: "2025-03-05", fullOn: null, asOf: "2025-13-01" }, /^asOf/],
  ])("refuses %o", (input, message) => {
    expect(() => timeLoss(input)).toThrow(RangeError);
    expect(() => timeLoss(input)).toThrow(message);
  });

  it("refuses days that are none", () => {
    for (const days of [-1, 0.5, Number.NaN, Infinity]) expect(() => severityBand(days)).toThrow(/^days/);
  });
});

describe("ageOn", () => {
  it.each([
    ["2010-06-15", "2025-06-14", 14],
    ["2010-06-15", "2025-06-15", 15],
    ["2010-06-15", "2025-12-01", 15],
    ["2010-06-15", "2025-01-31", 14],
    ["2012-02-29", "2025-02-28", 12],
    ["2012-02-29", "2025-03-01", 13],
    ["2012-02-29", "2024-02-28", 11],
    ["2012-02-29", "2024-02-29", 12],
    ["2012-02-29", "2012-02-29", 0],
  ])("born %s is on %s %i", (dateOfBirth, on, age) => {
    expect(ageOn(dateOfBirth, on)).toBe(age);
  });

  it("refuses days before birth and days that are none", () => {
    expect(() => ageOn("2010-06-15", "2010-06-14")).toThrow(/^on/);
    expect(() => ageOn("2011-02-29", "2020-01-01")).toThrow(/^dateOfBirth/);
    expect(() => ageOn("2010-06-15", "yesterday")).toThrow(/^on/);
  });
});

describe("ageBand", () => {
  const bands = [
    { label: "under 10", from: 0, to: 9 },
    { label: "10-12", from: 10, to: 12 },
    { label: "13-14", from: 13, to: 14 },
    { label: "15-16", from: 15, to: 16 },
    { label: "17-18", from: 17, to: 18 },
    { label: "19-25", from: 19, to: 25 },
    { label: "over 25", from: 26, to: null },
  ];

  it("finds the band at both of its ends", () => {
    const labels = [0, 9, 10, 12, 13, 14, 15, 18, 19, 25, 26, 80].map((age) => ageBand(age, bands).label);
    expect(labels).toEqual([
      "under 10",
      "under 10",
      "10-12",
      "10-12",
      "13-14",
      "13-14",
      "15-16",
      "17-18",
      "19-25",
      "19-25",
      "over 25",
      "over 25",
    ]);
  });

  it("refuses an age no band holds, and bands that are not bands", () => {
    expect(() => ageBand(5, bands.slice(1))).toThrow(/^age/);
    expect(() => ageBand(14.5, bands)).toThrow(/^age/);
    expect(() => ageBand(5, [])).toThrow(/^bands/);
    expect(() => ageBand(5, [{ from: 9, to: 4 }])).toThrow(/^bands\[0\]\.to/);
    expect(() => ageBand(12, [...bands, { label: "12-13", from: 12, to: 13 }])).toThrow(/^bands/);
  });
});

describe("limbSymmetryIndex", () => {
  it("is injured over uninjured for strength and distances", () => {
    expect(limbSymmetryIndex({ injured: 135, uninjured: 150, better: "higher" })).toBeCloseTo(90, 12);
    expect(limbSymmetryIndex({ injured: 0, uninjured: 150, better: "higher" })).toBe(0);
    expect(limbSymmetryIndex({ injured: 160, uninjured: 150, better: "higher" })).toBeGreaterThan(100);
  });

  it("is uninjured over injured for timed tests, so that slower is below 100", () => {
    expect(limbSymmetryIndex({ injured: 2.5, uninjured: 2, better: "lower" })).toBeCloseTo(80, 12);
  });

  it("refuses what cannot be compared", () => {
    expect(() => limbSymmetryIndex({ injured: 1, uninjured: 0, better: "higher" })).toThrow(/^uninjured/);
    expect(() => limbSymmetryIndex({ injured: -1, uninjured: 2, better: "higher" })).toThrow(/^injured/);
    expect(() => limbSymmetryIndex({ injured: 0, uninjured: 2, better: "lower" })).toThrow(/^injured/);
  });
});
