import { stopChildren } from "../machine/command.mjs";

/** Ending well: whatever was started is stopped, the last first, when the work ends or somebody asks us to stop. */

/** @type {(() => Promise<void>)[]} */
const hooks = [];
let stopping = false;

/**
 * Do something when this process ends, before what was registered earlier.
 *
 * @param {() => Promise<void>} hook
 */
export function onStop(hook) {
  hooks.push(hook);
}

/** True once a stop has begun: whatever fails from then on is a consequence of it. */
export function isStopping() {
  return stopping;
}

/**
 * Stop everything and end the process. Only the first call counts: a Ctrl-C arrives twice, from the terminal and
 * from npm.
 *
 * @param {number} code
 * @returns {Promise<never>}
 */
export async function stopAll(code) {
  if (!stopping) {
    stopping = true;
    await stopChildren();
    for (const hook of hooks.toReversed()) {
      await hook().catch((error) => process.stderr.write(`Stopping: ${error.message}\n`));
    }
    process.exit(code);
  }
  return new Promise(() => {});
}

/**
 * Stop at Ctrl-C, at a kill, when the terminal closes, and when the npm that started us is gone (npm passes only
 * some signals on).
 *
 * @param {(signal: string) => number} onSignal says what is happening and gives the exit code
 */
export function listenForStop(onSignal) {
  for (const signal of /** @type {const} */ (["SIGINT", "SIGTERM", "SIGHUP"])) {
    process.on(signal, () => {
      if (!stopping) void stopAll(onSignal(signal));
    });
  }
  if (!process.env.npm_execpath) return;
  // The scripts in package.json say `exec`, so the parent is npm itself and not a shell that keeps signals back.
  const npm = process.ppid;
  setInterval(() => {
    if (!stopping && process.ppid !== npm) void stopAll(onSignal("SIGHUP"));
  }, 500).unref();
}
