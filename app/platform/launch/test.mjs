import { openTestCluster, testEnvironment } from "../../../db/local-server/test-cluster.mjs";
import { ensureChromium } from "../machine/chromium.mjs";
import { explain } from "../machine/failure.mjs";
import { ensureBuild } from "./build.mjs";
import { check, complaintOf, complaintOfTypes, runVitest } from "./checks.mjs";
import { say, step } from "./output.mjs";
import { prepareModules, whilePreparing } from "./serving.mjs";
import { onStop } from "./stop.mjs";

/**
 * `npm test`: every check of the project, from a bare clone. Its last line is `N passed, N failed`: the tests (those
 * of the project `unit` twice, the second time in another time zone), and one each for lint, types, architecture and
 * build.
 *
 * `npm test -- <pattern>` runs only the tests whose file matches (anything after `--` goes to Vitest), without lint,
 * types and architecture. The build stays, since the tests of the server and the browser run against it.
 *
 * The tests run against a PostgreSQL cluster of their own that is deleted afterwards. They are told of it, and of
 * the browser, in their environment:
 *
 *   DATABASE_URL, DATABASE_OWNER_URL, DATABASE_AUTH_URL, DATABASE_MAINTENANCE_URL
 *                        the four roles in the database `haleside`, which is empty but for its extensions; the owner
 *                        may use it as a template: CREATE DATABASE x TEMPLATE haleside
 *   TEST_SUPERUSER_URL   the superuser in the database `postgres`, to make and drop databases
 *   CHROMIUM_PATH        the browser's program
 *   HALESIDE_MASTER_KEY, BETTER_AUTH_SECRET, RESEND_*, MAIL_FAKE_PORT, APP_ORIGIN, HALESIDE_LOCAL as for the server
 *
 * To run Vitest by hand: `node db/local-server/cli.mjs up test`, then load `.haleside/test.env`.
 */

export const stoppedCode = 130;
export const stoppedLine = "Stopping; the checks are not complete.";

/** @typedef {import("./checks.mjs").Count} Count */

/**
 * @param {string[]} args for Vitest
 * @returns {Promise<number>}
 */
export async function main(args) {
  const everything = args.length === 0;
  await prepareModules("npm test");
  const env = await prepareTests();

  /** @type {Count[]} */
  const counts = [];
  if (everything) {
    counts.push(await check("lint", () => complaintOf("biome", ["check", "."])));
    counts.push(await whilePreparing("npm test", () => check("types", complaintOfTypes)));
    counts.push(await check("architecture", () => complaintOf("depcruise", ARCHITECTURE)));
  }
  counts.push(await whilePreparing("npm test", () => check("build", complaintOfBuild)));
  const tests = await runVitest(args, env);
  if (everything) {
    say("\nThe same once more at the other side of the date line, without the server and the browser:");
    counts.push(await runVitest(["--project", "unit"], { ...env, TZ: "Pacific/Auckland" }));
  }
  const passed = sum([...counts, tests], "passed");
  // A run in which no test ran has shown nothing, whatever the checks say.
  const failed = sum([...counts, tests], "failed") + (tests.passed + tests.failed === 0 ? 1 : 0);
  say(`\n${passed} passed, ${failed} failed`);
  return failed === 0 ? 0 : 1;
}

/** What `npm run architecture` runs. */
const ARCHITECTURE = ["--config", ".dependency-cruiser.cjs", "app", "db", "imports", "tests"];

/** The browser and the cluster. @returns {Promise<Record<string, string>>} */
async function prepareTests() {
  const browser = await step("browser", "getting Chromium", async () => {
    const { path, how } = await ensureChromium();
    return { done: how === "found" ? path : `${path}, ${how}`, value: path };
  });
  return step("database", "making one for the tests", async () => {
    const cluster = await openTestCluster(onStop);
    const value = { ...(await testEnvironment(cluster)), CHROMIUM_PATH: browser };
    return { done: `PostgreSQL ${cluster.major} on 127.0.0.1:${cluster.port}, for this run`, value };
  });
}

async function complaintOfBuild() {
  try {
    await ensureBuild();
    return undefined;
  } catch (error) {
    const { cause, mend } = explain(error);
    return `${cause}\n${mend}`;
  }
}

/** @param {readonly Count[]} counts @param {keyof Count} key */
function sum(counts, key) {
  return counts.reduce((total, count) => total + count[key], 0);
}
