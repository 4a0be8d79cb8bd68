import { existsSync, mkdirSync, readdirSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { run } from "./command.mjs";
import { Failure, failureFrom } from "./failure.mjs";
import { logFile, privateFolder } from "./places.mjs";

/**
 * Getting programs from Debian's packages: installed where we may (root, or sudo that asks for no password),
 * otherwise downloaded and unpacked under `.haleside/debian`, which needs no rights at all.
 */

const QUIET_APT = {
  DEBIAN_FRONTEND: "noninteractive",
  DEBCONF_NONINTERACTIVE_SEEN: "true",
  LC_ALL: "C.UTF-8",
};

/**
 * Parts of packages that no program here reads. Among the commands is a link to the folder it lies in: tools that
 * look through the checkout and follow links would walk in a circle.
 */
const NOT_TO_RUN = [
  "bin",
  "sbin",
  "var",
  "usr/bin",
  "usr/sbin",
  "usr/share/doc",
  "usr/share/man",
  "usr/share/icons",
];

/** True when this process may do anything on the machine. */
export const isRoot = process.getuid?.() === 0;

/**
 * The words to put before a command so that it runs with the rights to install; undefined without such rights.
 *
 * @returns {Promise<string[] | undefined>}
 */
export async function installerRights() {
  if (isRoot) return [];
  const { code } = await run("sudo", ["-n", "true"]);
  return code === 0 ? ["sudo", "-n"] : undefined;
}

/**
 * Install packages on this machine. Debian's own main PostgreSQL cluster is kept from being made, since this
 * project runs a cluster of its own.
 *
 * @param {readonly string[]} names
 * @param {readonly string[]} rights from `installerRights`
 * @returns {Promise<void>}
 */
export async function installPackages(names, rights) {
  const log = logFile("apt");
  const words = Object.entries(QUIET_APT).map(([key, value]) => `${key}=${value}`);
  /** @param {string[]} args */
  const apt = (args) => {
    const [program = "env", ...rest] = [...rights, "env", ...words, "apt-get", ...args];
    return run(program, rest, { log });
  };
  if (names.some((name) => name.startsWith("postgresql"))) await withoutMainCluster(rights);
  // A third-party list that cannot be reached must not stop us: whether the packages install is what counts.
  const update = await apt(["update", "-o", "DPkg::Lock::Timeout=180"]);
  const options = ["-o", "DPkg::Lock::Timeout=180", "-o", "Dpkg::Options::=--force-confold"];
  const install = await apt(["install", "-y", "--no-install-recommends", ...options, ...names]);
  if (install.code !== 0) {
    throw failureFrom(
      `Installing ${names.join(", ")} from Debian`,
      `${update.output}\n${install.output}`,
      log,
    );
  }
}

/** @param {readonly string[]} rights */
async function withoutMainCluster(rights) {
  const file = "/etc/postgresql-common/createcluster.conf";
  if (existsSync(file)) return;
  const script = `mkdir -p /etc/postgresql-common && printf 'create_main_cluster = false\\n' > ${file}`;
  const [program = "sh", ...rest] = [...rights, "sh", "-c", script];
  await run(program, rest);
}

/**
 * @typedef {object} Unpacking
 * @property {string} name the folder under `.haleside/debian`
 * @property {readonly string[]} packages what is wanted; always unpacked
 * @property {RegExp} [leave] packages of the closure that are not needed to run
 */

/**
 * Download packages, with those they need that this machine lacks, and unpack them without installing. Uses the
 * machine's package lists when they are any good, otherwise fetches lists of its own.
 *
 * @param {Unpacking} unpacking
 * @returns {Promise<string>} the folder that stands for `/`
 */
export async function unpackPackages(unpacking) {
  const target = join(privateFolder("debian"), unpacking.name);
  if (existsSync(target)) return target;
  const log = logFile("apt");
  const aside = `${target}.new`;
  rmSync(aside, { recursive: true, force: true });
  mkdirSync(join(aside, "archives"), { recursive: true });

  let fetched = await fetchClosure(unpacking, [], join(aside, "archives"), log);
  if (fetched.code !== 0) {
    const options = ownLists();
    const update = await run("apt-get", [...options, "update"], { log, env: aptEnvironment() });
    fetched = await fetchClosure(unpacking, options, join(aside, "archives"), log);
    if (fetched.code !== 0) {
      throw failureFrom(
        `Fetching ${unpacking.packages.join(", ")} from Debian`,
        `${update.output}\n${fetched.output}`,
        log,
      );
    }
  }
  for (const archive of readdirSync(join(aside, "archives"))) {
    const unpacked = await run("dpkg", ["-x", join(aside, "archives", archive), aside], { log });
    if (unpacked.code !== 0) throw failureFrom(`Unpacking ${archive}`, unpacked.output, log);
  }
  for (const name of ["archives", ...NOT_TO_RUN]) rmSync(join(aside, name), { recursive: true, force: true });
  renameSync(aside, target);
  return target;
}

/**
 * @param {Unpacking} unpacking
 * @param {readonly string[]} options
 * @param {string} folder
 * @param {string} log
 */
async function fetchClosure({ packages, leave }, options, folder, log) {
  const env = aptEnvironment();
  const wanted = ["install", "--no-install-recommends", "--no-remove", ...packages];
  const plan = await run("apt-get", [...options, "-s", ...wanted], { log, env });
  if (plan.code !== 0) return plan;
  const missing = [...plan.output.matchAll(/^Inst (\S+)/gm)].map((match) => match[1] ?? "");
  const names = [...new Set([...packages, ...missing.filter((name) => !leave?.test(name))])];
  return run("apt-get", [...options, "download", ...names], { cwd: folder, log, env });
}

/** Package lists and cache of our own, for a machine whose lists are empty, old or closed to this user. */
function ownLists() {
  const state = privateFolder("apt");
  for (const folder of ["lists/partial", "cache/archives/partial"])
    mkdirSync(join(state, folder), { recursive: true });
  return ["-o", `Dir::State::lists=${join(state, "lists")}`, "-o", `Dir::Cache=${join(state, "cache")}`];
}

function aptEnvironment() {
  return { ...process.env, ...QUIET_APT };
}

/**
 * Where unpacked libraries lie, as a value for LD_LIBRARY_PATH: `lib/<machine>` and `usr/lib/<machine>`, and the
 * folders below them that programs load parts from.
 *
 * @param {string} folder from `unpackPackages`
 * @param {readonly string[]} [below] names of folders below them
 * @returns {string}
 */
export function libraryPath(folder, below = []) {
  return ["lib", "usr/lib"]
    .map((name) => join(folder, name))
    .filter((base) => existsSync(base))
    .flatMap((base) =>
      readdirSync(base)
        .filter((name) => name.includes("-linux-gnu"))
        .map((name) => join(base, name)),
    )
    .flatMap((base) => [base, ...below.map((name) => join(base, name))])
    .filter((path) => existsSync(path))
    .join(":");
}

/** Refuse a machine that is not Debian or one of its kin, naming what to install by hand. @param {string} what */
export function requireDebian(what) {
  if (existsSync("/usr/bin/apt-get") && existsSync("/usr/bin/dpkg")) return;
  throw new Failure(
    `${what} is not installed, and this machine has no apt-get to install it with.`,
    `Install ${what} with this system's own package manager and run it again.`,
  );
}

/**
 * Write a small shell script that this user may run.
 *
 * @param {string} file
 * @param {readonly string[]} lines
 */
export function writeScript(file, lines) {
  writeFileSync(file, `#!/bin/sh\n${lines.join("\n")}\n`, { mode: 0o755 });
}
