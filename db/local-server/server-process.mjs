import { createHash } from "node:crypto";
import { existsSync, readFileSync, rmSync, statSync, truncateSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { failureFrom } from "../../app/platform/machine/failure.mjs";
import { bornOf } from "../../app/platform/machine/lock.mjs";
import { findFreePort, isPortFree } from "./ports.mjs";
import { program, writeOwned } from "./programs.mjs";

/** Starting and stopping the server of a cluster, and telling whether it runs. */

/** The longest path of a Unix socket on Linux (`sun_path`, 108 bytes with the closing zero). */
const LONGEST_SOCKET = 107;
const LARGEST_LOG = 10_000_000;

/**
 * Start the server on its port, or on another if that one is taken by now.
 *
 * @param {import("./binaries.mjs").Binaries} binaries
 * @param {string} home
 * @param {boolean} lasting
 * @returns {Promise<number>} its port
 */
export async function startServer(binaries, home, lasting) {
  const data = join(home, "data");
  const log = join(data, "server.log");
  if (existsSync(log) && statSync(log).size > LARGEST_LOG) truncateSync(log);
  const wanted = rememberedPort(home);
  const port = (await isPortFree(wanted)) ? wanted : await findFreePort(wanted + 1);
  writeFileSync(join(home, "port"), `${port}\n`);
  const socketFits = Buffer.byteLength(join(data, `.s.PGSQL.${port}`)) <= LONGEST_SOCKET;
  writeOwned(
    join(data, "haleside.conf"),
    [
      "listen_addresses = '127.0.0.1'",
      `port = ${port}`,
      `unix_socket_directories = '${socketFits ? data.replaceAll("'", "''") : ""}'`,
      "password_encryption = 'scram-sha-256'",
      "max_connections = 200",
      "timezone = 'UTC'",
      "log_timezone = 'UTC'",
      // Its library is large and not unpacked; the queries here are too short to gain from it.
      "jit = off",
      ...(lasting ? [] : ["fsync = off", "synchronous_commit = off", "full_page_writes = off"]),
      "",
    ].join("\n"),
  );
  forgetOtherProcess(data);
  const args = ["start", "-D", data, "-l", log, "-w", "-t", "120", "-s"];
  const { code, output } = await program(binaries, "pg_ctl", args, { untouched: true });
  if (code !== 0) {
    const said = existsSync(log) ? readFileSync(log, "utf8").split("\n").slice(-40).join("\n") : "";
    throw failureFrom("Starting the local database", `${output}\n${said}`, log);
  }
  return port;
}

/**
 * @param {import("./binaries.mjs").Binaries} binaries
 * @param {string} home
 */
export async function stopServer(binaries, home) {
  const args = ["stop", "-D", join(home, "data"), "-m", "fast", "-w", "-t", "60", "-s"];
  const { code } = await program(binaries, "pg_ctl", args, { untouched: true });
  if (code !== 0 && isRunning(join(home, "data"))) {
    await program(binaries, "pg_ctl", ["stop", "-D", join(home, "data"), "-m", "immediate", "-w", "-s"], {
      untouched: true,
    });
  }
}

/** Whether the server of a data folder runs: the process it names must really be that server. @param {string} data */
export function isRunning(data) {
  return namedProcess(data)?.includes(data) ?? false;
}

/**
 * A killed server leaves a file that names its process. When that number belongs to another program by now,
 * PostgreSQL would believe itself running and refuse to start.
 *
 * @param {string} data
 */
function forgetOtherProcess(data) {
  const words = namedProcess(data);
  if (words && !words.includes(data)) rmSync(join(data, "postmaster.pid"), { force: true });
}

/** The command line of the living process that `postmaster.pid` names. @param {string} data */
function namedProcess(data) {
  const file = join(data, "postmaster.pid");
  if (!existsSync(file)) return undefined;
  const pid = Number(readFileSync(file, "utf8").split("\n")[0]);
  if (bornOf(pid) === "") return undefined;
  try {
    return readFileSync(`/proc/${pid}/cmdline`, "utf8").split("\0");
  } catch {
    return undefined;
  }
}

/** @param {string} home */
export function rememberedPort(home) {
  const file = join(home, "port");
  const port = existsSync(file) ? Number(readFileSync(file, "utf8")) : Number.NaN;
  if (Number.isInteger(port) && port > 1023 && port < 65_536) return port;
  // Spread over a range, so that two checkouts seldom meet; below the range that the system hands out itself.
  return 25_000 + (createHash("sha256").update(home).digest().readUInt16BE() % 5000);
}
