import { createHash } from "node:crypto";
import { existsSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from "node:fs";
import { join, relative } from "node:path";
import { privateFolder, ROOT } from "../machine/places.mjs";

/** Which steps are done already: a stamp holds the hash of what went into the step when it succeeded. */

/**
 * A hash over files and folders of the checkout (names and contents), and over words.
 *
 * @param {readonly string[]} paths relative to the checkout; one that is not there counts as absent
 * @param {readonly string[]} [words]
 * @returns {string}
 */
export function hashOf(paths, words = []) {
  const hash = createHash("sha256");
  for (const word of words) hash.update(`${word}\0`);
  for (const path of paths) addPath(hash, join(ROOT, path));
  return hash.digest("hex");
}

/** @param {import("node:crypto").Hash} hash @param {string} path */
function addPath(hash, path) {
  if (!existsSync(path)) return;
  if (statSync(path).isDirectory()) {
    for (const name of readdirSync(path).sort()) addPath(hash, join(path, name));
    return;
  }
  hash
    .update(`${relative(ROOT, path)}\0`)
    .update(readFileSync(path))
    .update("\0");
}

/** @param {string} step */
function stampFile(step) {
  return join(privateFolder("stamps"), step);
}

/**
 * @param {string} step
 * @returns {string | undefined}
 */
export function readStamp(step) {
  const file = stampFile(step);
  return existsSync(file) ? readFileSync(file, "utf8") : undefined;
}

/** @param {string} step @param {string} hash */
export function writeStamp(step, hash) {
  writeFileSync(stampFile(step), hash);
}

/** Say that a step is not done any more. @param {string} step */
export function clearStamp(step) {
  rmSync(stampFile(step), { force: true });
}
