import { linkSync, mkdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { dirname } from "node:path";
import { setTimeout as wait } from "node:timers/promises";
import { Failure } from "./failure.mjs";

/**
 * Locks between runs: a file that names the process holding it. A lock whose process is gone (killed, or the
 * machine was restarted and the number was given to another process) is recognised and taken over.
 */

/**
 * @typedef {{ pid: number, born: string, what: string, note?: string }} Holder
 */

/** What this process holds: let go of at its end, however that comes about. @type {Set<string>} */
const held = new Set();
process.on("exit", () => {
  for (const file of held) unlock(file);
});

/**
 * When a process was started, in clock ticks since boot: with the id it names one process for good.
 *
 * @param {number} pid
 * @returns {string} empty when there is no such process
 */
export function bornOf(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, "utf8");
    // The second field is the program's name in brackets and may hold spaces; the 22nd is the start time.
    const fields = stat.slice(stat.lastIndexOf(")") + 2).split(" ");
    return fields[0] === "Z" ? "" : (fields[19] ?? "");
  } catch {
    return "";
  }
}

/**
 * Who holds a lock, if that process still lives.
 *
 * @param {string} file
 * @returns {Holder | undefined}
 */
export function holderOf(file) {
  try {
    /** @type {Holder} */
    const holder = JSON.parse(readFileSync(file, "utf8"));
    const born = bornOf(holder.pid);
    return born !== "" && born === holder.born ? holder : undefined;
  } catch {
    return undefined;
  }
}

/**
 * Take a lock if it is free or stale.
 *
 * @param {string} file
 * @param {string} what what the holder is doing: "npm start"
 * @param {string} [note] shown to whoever finds the lock taken: an address
 * @returns {Holder | undefined} the living holder when it is taken; undefined when it is ours now
 */
export function tryLock(file, what, note) {
  mkdirSync(dirname(file), { recursive: true });
  /** @type {Holder} */
  const own = { pid: process.pid, born: bornOf(process.pid), what, ...(note === undefined ? {} : { note }) };
  const draft = `${file}.${process.pid}`;
  writeFileSync(draft, JSON.stringify(own));
  try {
    for (let attempt = 0; attempt < 3; attempt++) {
      try {
        held.add(file);
        // A link is made whole or not at all: nobody ever reads a half-written lock.
        linkSync(draft, file);
        return undefined;
      } catch (error) {
        if (/** @type {NodeJS.ErrnoException} */ (error).code !== "EEXIST") throw error;
      }
      const holder = holderOf(file);
      if (holder) return holder;
      rmSync(file, { force: true });
    }
    return holderOf(file) ?? own;
  } finally {
    rmSync(draft, { force: true });
  }
}

/**
 * Let go of a lock, if it is ours.
 *
 * @param {string} file
 */
export function unlock(file) {
  held.delete(file);
  if (holderOf(file)?.pid === process.pid) rmSync(file, { force: true });
}

/**
 * Do something while holding a lock, waiting for another run that holds it.
 *
 * @template T
 * @param {string} file
 * @param {string} what
 * @param {(holder: Holder) => void} onWait called once when it has to wait
 * @param {() => Promise<T>} work
 * @returns {Promise<T>}
 */
export async function withLock(file, what, onWait, work) {
  const until = Date.now() + 15 * 60_000;
  let told = false;
  for (;;) {
    const holder = tryLock(file, what);
    if (!holder) break;
    if (Date.now() > until) {
      throw new Failure(
        `${holder.what} (process ${holder.pid}) has been at work in this folder for 15 minutes.`,
        `Wait for it, or end it with: kill ${holder.pid}`,
      );
    }
    if (!told) onWait(holder);
    told = true;
    await wait(250);
  }
  try {
    return await work();
  } finally {
    unlock(file);
  }
}
