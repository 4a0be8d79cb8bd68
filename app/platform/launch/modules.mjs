import { existsSync, readFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { run } from "../machine/command.mjs";
import { failureFrom } from "../machine/failure.mjs";
import { logFile, ROOT } from "../machine/places.mjs";
import { clearStamp, hashOf, readStamp, writeStamp } from "./stamps.mjs";

/** The packages of `package-lock.json` in `node_modules`. */

/** npm writes it last: there is none after an install that was cut off. */
const INSTALLED = join(ROOT, "node_modules/.package-lock.json");

/**
 * Install with `npm ci` unless what is installed is what the lock says.
 *
 * @returns {Promise<"up to date" | "installed">}
 */
export async function ensureModules() {
  const hash = hashOf(["package-lock.json", ".npmrc"], [process.versions.modules, process.arch]);
  const stamp = readStamp("modules");
  if (existsSync(INSTALLED) && (stamp === hash || (stamp === undefined && isWhatLockSays()))) {
    writeStamp("modules", hash);
    return "up to date";
  }
  clearStamp("modules");
  const log = logFile("npm");
  // NODE_ENV=production in the shell would leave out what builds and tests.
  const args = ["ci", "--include=dev", "--no-audit", "--no-fund", "--loglevel=error"];
  const npm = process.env.npm_execpath;
  const { code, output } = await (npm?.endsWith(".js")
    ? run(process.execPath, [npm, ...args], { cwd: ROOT, log, env: toolEnvironment() })
    : run("npm", args, { cwd: ROOT, log, env: toolEnvironment() }));
  if (code !== 0) throw failureFrom("Installing the packages with npm ci", output, log);
  writeStamp("modules", hash);
  return "installed";
}

/** Whether every package of the lock that this machine needs is installed in that very version. */
function isWhatLockSays() {
  const wanted = packagesOf(join(ROOT, "package-lock.json"));
  const installed = packagesOf(INSTALLED);
  return Object.entries(wanted).every(
    ([path, { version, optional }]) => path === "" || optional || installed[path]?.version === version,
  );
}

/** @param {string} file @returns {Record<string, { version?: string, optional?: boolean }>} */
function packagesOf(file) {
  return JSON.parse(readFileSync(file, "utf8")).packages ?? {};
}

/**
 * The shell's environment with this very Node first in the path, for tools that begin with `env node`.
 *
 * @param {Record<string, string>} [more]
 * @returns {NodeJS.ProcessEnv}
 */
export function toolEnvironment(more = {}) {
  return {
    ...process.env,
    ...more,
    PATH: `${dirname(process.execPath)}:${process.env.PATH ?? "/usr/bin:/bin"}`,
  };
}

/** A program of an installed package. @param {string} name */
export function tool(name) {
  return join(ROOT, "node_modules/.bin", name);
}
