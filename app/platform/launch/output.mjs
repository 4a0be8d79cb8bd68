import { clearLine, cursorTo } from "node:readline";
import { isStopping } from "./stop.mjs";

/** What the commands say: one calm line for each step, then a block with what a person needs. */

const isTerminal = process.stdout.isTTY === true;
const WIDTH = 14;

// Whoever reads may go away (`npm start | head`); that is no reason to stop serving.
process.stdout.on("error", () => {});
process.stderr.on("error", () => {});

/** @param {string} [text] */
export function say(text = "") {
  process.stdout.write(`${text}\n`);
}

/**
 * One step: its name, and how it ended. At a terminal the line shows at once what is being done.
 *
 * @template T
 * @param {string} name
 * @param {string} doing shown while it lasts: "installing (about a minute)"
 * @param {() => Promise<{ done: string, value: T }>} work
 * @returns {Promise<T>}
 */
export async function step(name, doing, work) {
  const start = `  ${name.padEnd(WIDTH)}`;
  if (isTerminal) process.stdout.write(`${start}${doing} ...`);
  try {
    const { done, value } = await work();
    restart();
    say(`${start}${done}`);
    return value;
  } catch (error) {
    restart();
    if (!isStopping()) say(`${start}failed`);
    throw error;
  }
}

/** A remark between two steps. @param {string} text */
export function note(text) {
  restart();
  say(`  ${"".padEnd(WIDTH)}${text}`);
}

/** Clear a step's unfinished line. */
export function restart() {
  if (!isTerminal) return;
  clearLine(process.stdout, 0);
  cursorTo(process.stdout, 0);
}

/**
 * Lines of a table, each column as wide as its widest cell.
 *
 * @param {readonly (readonly string[])[]} rows
 * @returns {string[]}
 */
export function tableLines(rows) {
  /** @param {number} column */
  const width = (column) => Math.max(...rows.map((row) => row[column]?.length ?? 0));
  return rows.map((row) =>
    row
      .map((cell, column) => cell.padEnd(width(column)))
      .join("   ")
      .trimEnd(),
  );
}

/**
 * How long ago, for a person: "2.4 s".
 *
 * @param {number} since `Date.now()` at the start
 */
export function secondsSince(since) {
  return `${((Date.now() - since) / 1000).toFixed(1)} s`;
}
