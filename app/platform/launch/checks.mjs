import { readFileSync, rmSync } from "node:fs";
import { join } from "node:path";
import { run } from "../machine/command.mjs";
import { privateFolder, ROOT } from "../machine/places.mjs";
import { tool, toolEnvironment } from "./modules.mjs";
import { say, secondsSince, step } from "./output.mjs";

/** The checks of `npm test`, each of which comes back as a count. */

/** @typedef {{ passed: number, failed: number }} Count */

/**
 * A check that passes or fails as a whole. It says nothing but its result when it passes, and everything the tool
 * said when it fails.
 *
 * @param {string} name
 * @param {() => Promise<string | undefined>} work what it complains of; undefined when it passes
 * @returns {Promise<Count>}
 */
export async function check(name, work) {
  const since = Date.now();
  const complaint = await step(name, "checking", async () => {
    const value = await work();
    return { done: `${value === undefined ? "passed" : "failed"} (${secondsSince(since)})`, value };
  });
  if (complaint !== undefined) say(`\n${complaint.trimEnd()}\n`);
  return complaint === undefined ? { passed: 1, failed: 0 } : { passed: 0, failed: 1 };
}

/**
 * Run an installed tool; its output is the complaint when it fails.
 *
 * @param {string} name
 * @param {readonly string[]} args
 * @returns {Promise<string | undefined>}
 */
export async function complaintOf(name, args) {
  const { code, output } = await run(tool(name), args, { cwd: ROOT, env: toolEnvironment() });
  return code === 0 ? undefined : output || `${name} ended with code ${code}`;
}

/** The routes' types are generated first: they are part of what is checked. */
export async function complaintOfTypes() {
  return (await complaintOf("react-router", ["typegen"])) ?? complaintOf("tsc", ["--noEmit"]);
}

/**
 * Run Vitest on this terminal and count what its report says.
 *
 * @param {readonly string[]} args patterns and options for Vitest
 * @param {Record<string, string>} env
 * @returns {Promise<Count>}
 */
export async function runVitest(args, env) {
  const report = join(privateFolder(), `test-results.${process.pid}.json`);
  const reporters = ["--reporter=default", "--reporter=json", `--outputFile.json=${report}`];
  const words = ["run", "--config", "tests/vitest.config.ts", ...reporters, ...args];
  try {
    const { code } = await run(tool("vitest"), words, { cwd: ROOT, env: toolEnvironment(env), show: true });
    return countOf(readReport(report), code);
  } finally {
    rmSync(report, { force: true });
  }
}

/**
 * @typedef {object} Report the part of Vitest's JSON report that is read
 * @property {number} numPassedTests
 * @property {number} numFailedTests
 * @property {{ status: string, assertionResults: { status: string }[] }[]} testResults
 */

/** @param {string} file @returns {Report | undefined} */
function readReport(file) {
  try {
    return JSON.parse(readFileSync(file, "utf8"));
  } catch {
    return undefined;
  }
}

/**
 * A file that failed before or beside its tests counts as one failure, and so does a run that failed without
 * naming a test: an unhandled error, a crash, no report.
 *
 * @param {Report | undefined} report
 * @param {number} code Vitest's exit code
 * @returns {Count}
 */
export function countOf(report, code) {
  if (!report) return { passed: 0, failed: 1 };
  const broken = report.testResults.filter(
    ({ status, assertionResults }) =>
      status === "failed" && !assertionResults.some((test) => test.status === "failed"),
  );
  const failed = report.numFailedTests + broken.length;
  return { passed: report.numPassedTests, failed: failed === 0 && code !== 0 ? 1 : failed };
}
