import { existsSync, readFileSync } from "node:fs";
import { connect } from "node:net";
import { dirname, join } from "node:path";
import { run } from "../machine/command.mjs";
import { failureFrom } from "../machine/failure.mjs";
import { logFile, ROOT } from "../machine/places.mjs";
import { clearStamp, hashOf, readStamp, writeStamp } from "./stamps.mjs";

/** The packages of `package-lock.json` in `node_modules`. */

/** npm writes it last: there is none after an install that was cut off. */
const INSTALLED = join(ROOT, "node_modules/.package-lock.json");

/** How long the package server may take to take a connection, in milliseconds. */
const REACH_WITHIN = 15_000;

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
  const where = (await npm(["config", "get", "registry"])).output.trim();
  // Without a network npm asks for every package in vain, for many minutes; its own store may still have them all.
  const offline = (await canReach(where)) ? [] : ["--offline"];
  // NODE_ENV=production in the shell would leave out what builds and tests.
  const args = ["ci", "--include=dev", "--no-audit", "--no-fund", "--loglevel=error", ...offline];
  const { code, output } = await npm(args, log);
  if (code !== 0) throw failureFrom("Installing the packages with npm ci", output, log);
  writeStamp("modules", hash);
  return "installed";
}

/**
 * Run the npm that started us, else the one in the path.
 *
 * @param {readonly string[]} args
 * @param {string} [log]
 */
function npm(args, log) {
  const options = { cwd: ROOT, env: toolEnvironment(), ...(log === undefined ? {} : { log }) };
  const own = process.env.npm_execpath;
  return own?.endsWith(".js") ? run(process.execPath, [own, ...args], options) : run("npm", args, options);
}

/**
 * Whether a server takes a connection. Behind a proxy that cannot be told, and npm is left to find out.
 *
 * @param {string} address
 * @returns {Promise<boolean>}
 */
function canReach(address) {
  const proxies = [
    "HTTPS_PROXY",
    "https_proxy",
    "HTTP_PROXY",
    "http_proxy",
    "npm_config_proxy",
    "npm_config_https_proxy",
  ];
  if (!URL.canParse(address) || proxies.some((name) => process.env[name])) return Promise.resolve(true);
  const { hostname, port, protocol } = new URL(address);
  return new Promise((resolve) => {
    const socket = connect({ host: hostname, port: Number(port) || (protocol === "http:" ? 80 : 443) });
    /** @param {boolean} answer */
    const end = (answer) => {
      clearTimeout(limit);
      socket.destroy();
      resolve(answer);
    };
    const limit = setTimeout(() => end(false), REACH_WITHIN);
    socket.once("connect", () => end(true));
    socket.once("error", () => end(false));
  });
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
