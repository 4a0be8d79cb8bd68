import { describe, expect, it } from "vitest";
import { countOf } from "~/platform/launch/checks.mjs";

const file = (status: string, tests: string[]) => ({
  status,
  assertionResults: tests.map((one) => ({ status: one })),
});

describe("the count of a test run", () => {
  it("is the report's", () => {
    const report = {
      numPassedTests: 2,
      numFailedTests: 1,
      testResults: [file("failed", ["passed", "passed", "failed"])],
    };
    expect(countOf(report, 1)).toEqual({ passed: 2, failed: 1 });
  });

  it("counts a file that could not be loaded as one failure", () => {
    const report = {
      numPassedTests: 1,
      numFailedTests: 0,
      testResults: [file("passed", ["passed"]), file("failed", [])],
    };
    expect(countOf(report, 1)).toEqual({ passed: 1, failed: 1 });
  });

  it("counts a run that failed without naming a test as one failure", () => {
    const report = { numPassedTests: 1, numFailedTests: 0, testResults: [file("passed", ["passed"])] };
    expect(countOf(report, 1)).toEqual({ passed: 1, failed: 1 });
    expect(countOf(report, 0)).toEqual({ passed: 1, failed: 0 });
  });

  it("counts a run without a report as one failure, whatever its exit code", () => {
    expect(countOf(undefined, 0)).toEqual({ passed: 0, failed: 1 });
  });
});
