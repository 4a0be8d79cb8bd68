import { describe, expect, it } from "vitest";
import { equalValues, mergeFields } from "~/platform/merge-fields";

describe("merging an operation field by field", () => {
  it("writes what nobody else touched and leaves other fields alone", () => {
    expect(mergeFields({ a: 1, b: 2 }, { a: { base: 1, value: 5 } })).toEqual({
      write: { a: 5 },
      agreed: [],
      conflicts: [],
    });
  });

  it("agrees when somebody else gave the same answer", () => {
    expect(mergeFields({ a: 5 }, { a: { base: 1, value: 5 } })).toEqual({
      write: {},
      agreed: ["a"],
      conflicts: [],
    });
  });

  it("names both values when the answers differ", () => {
    expect(mergeFields({ a: 7 }, { a: { base: 1, value: 5 } }).conflicts).toEqual([
      { field: "a", base: 1, stored: 7, value: 5 },
    ]);
  });

  it("takes a field that is not stored for nothing", () => {
    expect(mergeFields({}, { a: { base: null, value: true } }).write).toEqual({ a: true });
    expect(mergeFields({}, { a: { base: true, value: false } }).conflicts).toHaveLength(1);
  });

  it("neither writes nor agrees when nothing changes", () => {
    expect(mergeFields({ a: 1 }, { a: { base: 1, value: 1 } })).toEqual({
      write: {},
      agreed: [],
      conflicts: [],
    });
  });

  it("takes a change from a value to itself for a condition", () => {
    expect(mergeFields({ a: 2 }, { a: { base: 1, value: 1 } }).conflicts).toHaveLength(1);
  });

  it("compares by content, whatever the order of keys", () => {
    expect(equalValues({ presence: "took_part", minutes: 90 }, { minutes: 90, presence: "took_part" })).toBe(
      true,
    );
    expect(equalValues({ minutes: 90 }, { minutes: 45 })).toBe(false);
    expect(equalValues(null, {})).toBe(false);
    expect(equalValues(false, null)).toBe(false);
  });
});
