import { existsSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as wait } from "node:timers/promises";
import { launch, run } from "../machine/command.mjs";
import { Failure, failureFrom } from "../machine/failure.mjs";
import { logFile, ROOT } from "../machine/places.mjs";
import { tool, toolEnvironment } from "./modules.mjs";

/** The project's own programs that the commands run. */

/** How long a server may take to answer for the first time, in milliseconds. */
const READY_WITHIN = 60_000;

/** @typedef {{ role: string, name: string, email: string, password: string }} Person */

/** @param {Record<string, string>} env */
export async function migrate(env) {
  const { code, output } = await runScript("db/migrate.ts", [], env, "migrations");
  if (code !== 0) throw failureFrom("Bringing the database up to date", output, logFile("migrations"));
}

/** Load the demo unless it is there. @param {Record<string, string>} env */
export async function seed(env) {
  const { code, output } = await runScript("db/seed/run.ts", [], env, "seed");
  if (code !== 0) throw failureFrom("Loading the demo", output, logFile("seed"));
}

/**
 * Whom one may sign in as. The passwords stay out of every log.
 *
 * @param {Record<string, string>} env
 * @returns {Promise<Person[]>}
 */
export async function demoPeople(env) {
  const { code, output } = await runScript("db/seed/run.ts", ["--people"], env);
  const begin = output.indexOf("[");
  if (code !== 0 || begin === -1) throw failureFrom("Reading the demo's people", output);
  return JSON.parse(output.slice(begin, output.lastIndexOf("]") + 1));
}

/**
 * @param {string} file
 * @param {readonly string[]} args
 * @param {Record<string, string>} env
 * @param {string} [log]
 */
function runScript(file, args, env, log) {
  requireFile(file);
  return run(tool("tsx"), [file, ...args], {
    cwd: ROOT,
    env: toolEnvironment(env),
    ...(log === undefined ? {} : { log: logFile(log) }),
  });
}

/**
 * Start the application's server and wait until it answers.
 *
 * @param {Record<string, string>} env
 * @param {object} wish
 * @param {"production" | "development"} wish.mode
 * @param {boolean} wish.show let it write to this terminal, else to its log file
 * @returns {Promise<{ ended: Promise<Failure> }>} `ended` resolves when it ends by itself
 */
export async function startServer(env, { mode, show }) {
  requireFile("app/serve.mjs");
  const log = logFile("server");
  const { child, output } = launch(process.execPath, ["app/serve.mjs"], {
    cwd: ROOT,
    env: toolEnvironment({ ...env, NODE_ENV: mode }),
    ...(show ? { show } : { log }),
  });
  const ended = new Promise((/** @type {(failure: Failure) => void} */ resolve) => {
    child.on("error", (error) => resolve(failureFrom("The server", error.message)));
    child.on("close", () =>
      resolve(failureFrom("The server ended by itself: it", output.text, show ? undefined : log)),
    );
  });
  const failure = await Promise.race([ended, answers(env, log)]);
  if (failure) throw failure;
  return { ended };
}

/**
 * @param {Record<string, string>} env
 * @param {string} log
 * @returns {Promise<Failure | undefined>} undefined once it answers
 */
async function answers(env, log) {
  const host = !env.HOST || env.HOST === "0.0.0.0" || env.HOST === "::" ? "127.0.0.1" : env.HOST;
  const address = `http://${host.includes(":") ? `[${host}]` : host}:${env.PORT}/`;
  const until = Date.now() + READY_WITHIN;
  while (Date.now() < until) {
    const answer = await fetch(address, { redirect: "manual", signal: AbortSignal.timeout(20_000) }).catch(
      () => undefined,
    );
    if (answer) return undefined;
    await wait(50);
  }
  return new Failure(
    "The server did not answer within a minute.",
    `Look into ${log}, or run it again with HALESIDE_DEBUG=1.`,
  );
}

/** @param {string} file */
export function requireFile(file) {
  if (existsSync(join(ROOT, file))) return;
  throw new Failure(`This checkout has no ${file}.`, `Get it back with: git checkout -- ${file}`);
}
