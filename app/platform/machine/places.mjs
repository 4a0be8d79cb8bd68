import { chmodSync, mkdirSync, realpathSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";

/** The checkout's real path; everything else is found from it, whatever folder the command is started in. */
export const ROOT = realpathSync(join(dirname(fileURLToPath(import.meta.url)), "../../.."));

/** What the commands keep for themselves in the checkout: stamps, locks, logs, unpacked programs. Ignored by git. */
export const PRIVATE = join(ROOT, ".haleside");

/**
 * A folder under `.haleside`, made if it is not there; nobody else may look inside.
 *
 * @param {...string} parts
 * @returns {string}
 */
export function privateFolder(...parts) {
  mkdirSync(PRIVATE, { recursive: true, mode: 0o700 });
  chmodSync(PRIVATE, 0o700);
  const folder = join(PRIVATE, ...parts);
  mkdirSync(folder, { recursive: true });
  return folder;
}

/**
 * The log file of one step.
 *
 * @param {string} name
 * @returns {string}
 */
export function logFile(name) {
  return join(privateFolder("log"), `${name}.log`);
}
