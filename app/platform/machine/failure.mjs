/**
 * A failure that a person can mend: one line says what went wrong, one line says what to do.
 * The launchers print exactly those two lines; the stack shows only with HALESIDE_DEBUG=1.
 */
export class Failure extends Error {
  /**
   * @param {string} cause what went wrong, one line
   * @param {string} mend what the person can do about it, one line
   */
  constructor(cause, mend) {
    super(cause);
    this.name = "Failure";
    this.mend = mend;
  }
}

const NETWORK =
  /could not resolve|temporary failure resolving|name resolution|enotfound|eai_again|econnrefused|econnreset|etimedout|could not connect|unable to connect|connection timed out|network is unreachable|enotcached|failed to fetch|unable to locate package|has no installation candidate/i;
const DISK = /enospc|no space left on device|not enough free space/i;
const RIGHTS = /eacces|eperm|permission denied|are you root|operation not permitted/i;
const APT_LOCK = /could not get lock|unable to acquire the dpkg frontend lock|unable to lock/i;

/**
 * Turn the output of a command that failed into a cause and a mend.
 *
 * @param {string} what what was being done, to start the sentence: "Installing the packages"
 * @param {string} output everything the command said
 * @param {string} [log] the file that holds the whole output
 * @returns {Failure}
 */
export function failureFrom(what, output, log) {
  const see = log ? ` The whole output is in ${log}.` : "";
  if (DISK.test(output)) {
    return new Failure(
      `${what} failed: the disk is full.`,
      `Free some space (about 2 GB are needed) and run it again.${see}`,
    );
  }
  if (APT_LOCK.test(output)) {
    return new Failure(
      `${what} failed: another package manager is at work.`,
      `Wait until it has finished and run it again.${see}`,
    );
  }
  if (NETWORK.test(output)) {
    return new Failure(
      `${what} failed: the package server cannot be reached, or does not have what was asked for.`,
      `Check the network (and the proxy, if there is one) and run it again.${see}`,
    );
  }
  if (RIGHTS.test(output)) {
    return new Failure(
      `${what} failed: this user may not do that (${lastLine(output)}).`,
      `Run it as the user who owns this folder, or give that user the folder.${see}`,
    );
  }
  return new Failure(
    `${what} failed: ${lastLine(output)}`,
    see.trim() || "Run it again with HALESIDE_DEBUG=1 to see more.",
  );
}

/**
 * The line of an output that most likely says why: the last error line, else the last line.
 *
 * @param {string} output
 * @returns {string}
 */
export function lastLine(output) {
  const lines = output
    .split("\n")
    .map((line) => line.trim())
    .filter((line) => line !== "");
  const said = lines.filter((line) => /^(E:|npm error|error\b|fatal:|FATAL:|ERROR:|.*Error:)/i.test(line));
  return (said.at(-1) ?? lines.at(-1) ?? "it said nothing").slice(0, 300);
}

/**
 * Cause and mend of anything thrown.
 *
 * @param {unknown} error
 * @returns {{ cause: string, mend: string }}
 */
export function explain(error) {
  if (error instanceof Failure) return { cause: error.message, mend: error.mend };
  const text = error instanceof Error ? error.message : String(error);
  if (DISK.test(text) || RIGHTS.test(text)) return explain(failureFrom("Writing a file", text));
  return {
    cause: `Something unforeseen happened: ${text}`,
    mend: "Run it again with HALESIDE_DEBUG=1 to see where.",
  };
}
