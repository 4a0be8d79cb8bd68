import { accessSync, constants, existsSync, readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { run } from "../../app/platform/machine/command.mjs";
import {
  installerRights,
  installPackages,
  isRoot,
  libraryPath,
  requireDebian,
  unpackPackages,
} from "../../app/platform/machine/debian.mjs";
import { Failure, lastLine } from "../../app/platform/machine/failure.mjs";

/** PostgreSQL's server programs: found on the machine, installed from Debian, or unpacked into the checkout. */

/**
 * @typedef {object} Binaries
 * @property {string} folder holds `initdb`, `pg_ctl`, `postgres`
 * @property {number} major PostgreSQL's major version
 * @property {string} [libraries] LD_LIBRARY_PATH that the unpacked programs need
 * @property {"found" | "installed" | "unpacked"} how
 */

const OLDEST = 11;
const NEEDED = ["initdb", "pg_ctl", "postgres"];
/** Not needed to run a server: the just-in-time compiler (switched off), helpers of Debian's own cluster tools. */
const LEFT_OUT =
  /llvm|^libclang|^perl|-perl$|^libperl|-common$|^ssl-cert|^adduser|^logrotate|^sysstat|^debconf|^locales|^tzdata/;

/**
 * The server programs, got from Debian if there are none.
 *
 * HALESIDE_IGNORE_SYSTEM_POSTGRES=1 unpacks a copy although the machine has its own (that is how the unpacking
 * is tried).
 *
 * @param {object} [wish]
 * @param {number} [wish.major] the version that an existing cluster was made by
 * @returns {Promise<Binaries>}
 */
export async function ensureBinaries({ major } = {}) {
  const ignored = process.env.HALESIDE_IGNORE_SYSTEM_POSTGRES === "1";
  const found = ignored ? undefined : pick("/usr", major);
  if (found) return checked({ ...found, how: "found" });

  requireDebian("PostgreSQL");
  const rights = ignored ? undefined : await installerRights();
  if (rights) {
    await installPackages(major ? [`postgresql-${major}`] : ["postgresql"], rights);
    const installed = pick("/usr", major);
    if (installed) return checked({ ...installed, how: "installed" });
    throw new Failure(
      "PostgreSQL was installed, but its server is not under /usr/lib/postgresql.",
      "Install Debian's postgresql.",
    );
  }
  if (isRoot) {
    throw new Failure(
      "PostgreSQL refuses to run as root, and unpacked programs in this folder are closed to its own user.",
      "Unset HALESIDE_IGNORE_SYSTEM_POSTGRES, or run this as an ordinary user.",
    );
  }
  const version = major ?? (await offeredVersion());
  const folder = await unpackPackages({
    name: `postgresql-${version}`,
    packages: [`postgresql-${version}`, `postgresql-client-${version}`, "libpq5"],
    leave: LEFT_OUT,
  });
  const unpacked = pick(join(folder, "usr"), version);
  if (!unpacked)
    throw new Failure(
      `The unpacked postgresql-${version} holds no server.`,
      "Delete .haleside/debian and run it again.",
    );
  return checked({ ...unpacked, libraries: libraryPath(folder), how: "unpacked" });
}

/**
 * The newest complete set of programs below a prefix, or the set of one version.
 *
 * @param {string} prefix
 * @param {number} [major]
 */
function pick(prefix, major) {
  const base = join(prefix, "lib/postgresql");
  if (!existsSync(base)) return undefined;
  return readdirSync(base)
    .map((name) => ({ major: Number(name), folder: join(base, name, "bin") }))
    .filter((set) => set.major >= OLDEST && (major === undefined || set.major === major))
    .filter((set) => NEEDED.every((name) => isRunnable(join(set.folder, name))))
    .sort((a, b) => b.major - a.major)
    .at(0);
}

/** @param {string} file */
function isRunnable(file) {
  try {
    accessSync(file, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

/** The version that Debian's `postgresql` stands for here. */
async function offeredVersion() {
  for (const query of [
    ["show", "postgresql"],
    ["search", "--names-only", "^postgresql-[0-9]+$"],
  ]) {
    const { output } = await run("apt-cache", query);
    const versions = [...output.matchAll(/\bpostgresql-(\d+)\b/g)].map((match) => Number(match[1]));
    if (versions.length > 0) return Math.max(...versions);
  }
  return releaseVersion();
}

/** Without package lists: what each Debian release carries, as its release notes say. */
function releaseVersion() {
  /** @type {Record<string, number>} */
  const carried = { 10: 11, 11: 13, 12: 15, 13: 17 };
  const release = existsSync("/etc/os-release") ? readFileSync("/etc/os-release", "utf8") : "";
  return carried[/^VERSION_ID="?(\d+)/m.exec(release)?.[1] ?? ""] ?? 17;
}

/** @param {Binaries} binaries */
async function checked(binaries) {
  const { code, output } = await run(join(binaries.folder, "postgres"), ["--version"], {
    env: environmentOf(binaries),
  });
  if (code === 0) return binaries;
  throw new Failure(
    `PostgreSQL in ${binaries.folder} does not start: ${lastLine(output)}`,
    binaries.how === "unpacked"
      ? "Delete .haleside/debian and run it again."
      : "Install Debian's postgresql again.",
  );
}

/**
 * The environment to run the programs in: without the person's own PG* variables, in plain English.
 *
 * @param {Binaries} binaries
 * @returns {NodeJS.ProcessEnv}
 */
export function environmentOf(binaries) {
  const kept = Object.entries(process.env).filter(
    ([name]) => !name.startsWith("PG") && !name.startsWith("LC_"),
  );
  const libraries = [binaries.libraries, process.env.LD_LIBRARY_PATH].filter(Boolean).join(":");
  return {
    ...Object.fromEntries(kept),
    LC_ALL: "C",
    TZ: "UTC",
    ...(libraries ? { LD_LIBRARY_PATH: libraries } : {}),
  };
}
