import { chownSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { run } from "../../app/platform/machine/command.mjs";
import { isRoot } from "../../app/platform/machine/debian.mjs";
import { Failure, failureFrom } from "../../app/platform/machine/failure.mjs";
import { logFile } from "../../app/platform/machine/places.mjs";
import { environmentOf } from "./binaries.mjs";

/** Running PostgreSQL's programs as the user they may run as, and giving that user its files. */

/**
 * @param {import("./binaries.mjs").Binaries} binaries
 * @param {string} what
 * @param {string} name
 * @param {readonly string[]} args
 * @param {string} [input]
 */
export async function must(binaries, what, name, args, input) {
  const log = logFile("database");
  const { code, output } = await program(binaries, name, args, {
    log,
    ...(input === undefined ? {} : { input }),
  });
  if (code !== 0 || /^.*(ERROR|FATAL):/m.test(output)) throw failureFrom(what, output, log);
}

/**
 * @param {import("./binaries.mjs").Binaries} binaries
 * @param {string} name
 * @param {readonly string[]} args
 * @param {import("../../app/platform/machine/command.mjs").RunOptions} options
 */
export function program(binaries, name, args, options) {
  const file = join(binaries.folder, name);
  const common = { ...options, cwd: "/", env: environmentOf(binaries) };
  if (!isRoot) return run(file, args, common);
  return run("runuser", ["-u", "postgres", "--", file, ...args], common);
}

/** @param {string} path @param {string} text */
export function writeOwned(path, text) {
  writeFileSync(path, text, { mode: 0o600 });
  handOver(path);
}

/** Give a file to the user that PostgreSQL runs as. @param {string} path */
export function handOver(path) {
  if (!isRoot) return;
  const user = postgresUser();
  if (!user) {
    throw new Failure(
      "PostgreSQL refuses to run as root, and this machine has no user `postgres`.",
      "Install Debian's postgresql (it makes that user), or run this as an ordinary user.",
    );
  }
  chownSync(path, user.uid, user.gid);
}

/** The user that Debian's package makes, from the list of users. */
export function postgresUser() {
  const line = readFileSync("/etc/passwd", "utf8")
    .split("\n")
    .find((entry) => entry.startsWith("postgres:"));
  const [, , uid, gid, , home] = line?.split(":") ?? [];
  return uid && gid && home ? { uid: Number(uid), gid: Number(gid), home } : undefined;
}
