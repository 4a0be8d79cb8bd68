import { spawn } from "node:child_process";
import { appendFileSync, existsSync } from "node:fs";

/**
 * Running other programs, so that a stop reaches every one of them.
 *
 * Each child leads a process group of its own: a Ctrl-C at the terminal reaches only the launcher, which then
 * stops its children in order, grandchildren included.
 */

/** What is kept of a command's output, in characters; the log file has all of it. */
const KEPT_OUTPUT = 400_000;
/** How long a tool and a server may take to end after SIGTERM before they are killed, in milliseconds. */
const TOOL_PATIENCE = 2_000;
const SERVER_PATIENCE = 15_000;

const diesWithUs = existsSync("/usr/bin/setpriv");

/** The running children, each with its patience. @type {Map<import("node:child_process").ChildProcess, number>} */
const children = new Map();
let stopping = false;

/**
 * @typedef {object} RunOptions
 * @property {string} [cwd]
 * @property {NodeJS.ProcessEnv} [env] the whole environment; the launcher's own when left out
 * @property {string} [input] text for standard input
 * @property {string} [log] file that the output is appended to
 * @property {boolean} [show] let the child write to this terminal instead of keeping its output
 * @property {boolean} [tool] it may be cut off: what it makes counts only when it is whole
 * @property {boolean} [untouched] a stop neither ends this child nor forbids to start it (used to stop things)
 */

/**
 * Run a program to its end. Never throws for a program that fails: look at `code` (127: there is no such
 * program). Once a stop has begun it does not resolve any more, so that nothing goes on behind the stop.
 *
 * @param {string} command
 * @param {readonly string[]} args
 * @param {RunOptions} [options]
 * @returns {Promise<{ code: number, output: string }>}
 */
export function run(command, args, options = {}) {
  if (stopping && !options.untouched) return new Promise(() => {});
  const { child, output } = launch(command, args, { ...options, tool: true });
  return new Promise((resolve) => {
    child.on("error", (error) => resolve({ code: 127, output: `${output.text}${error.message}` }));
    child.on("close", (code, signal) => {
      if (stopping && !options.untouched) return;
      resolve({ code: code ?? (signal ? 128 : 1), output: output.text });
    });
  });
}

/**
 * Start a program that goes on running, a server.
 *
 * @param {string} command
 * @param {readonly string[]} args
 * @param {RunOptions} [options]
 */
export function launch(command, args, options = {}) {
  const show = options.show ? "inherit" : "pipe";
  const [program, words] = diesWithUs && !options.untouched ? mortal(command, args) : [command, args];
  const child = spawn(program, words, {
    cwd: options.cwd,
    env: options.env ?? process.env,
    stdio: [options.input === undefined ? "ignore" : "pipe", show, show],
    detached: true,
  });
  const output = { text: "" };
  /** @param {Buffer} chunk */
  const keep = (chunk) => {
    output.text = (output.text + chunk.toString()).slice(-KEPT_OUTPUT);
    if (options.log) appendFileSync(options.log, chunk);
  };
  child.stdout?.on("data", keep);
  child.stderr?.on("data", keep);
  if (child.stdin) {
    // A program that ends before it has read everything is reported by its exit code.
    child.stdin.on("error", () => {});
    child.stdin.end(options.input);
  }
  if (!options.untouched) {
    children.set(child, options.tool ? TOOL_PATIENCE : SERVER_PATIENCE);
    child.on("close", () => children.delete(child));
    child.on("error", () => children.delete(child));
  }
  return { child, output };
}

/**
 * The words that start a program so that it gets SIGTERM when this process is killed: nobody else would stop it.
 *
 * @param {string} command
 * @param {readonly string[]} args
 * @returns {[string, string[]]}
 */
function mortal(command, args) {
  return ["/usr/bin/setpriv", ["--pdeathsig", "TERM", "--", command, ...args]];
}

/**
 * End every child that is still running, with all that it started, and wait until they are gone.
 *
 * @returns {Promise<void>}
 */
export async function stopChildren() {
  stopping = true;
  await Promise.all([...children].map(([child, patience]) => stopChild(child, patience)));
}

/**
 * End one child with all that it started, and wait until it is gone.
 *
 * @param {import("node:child_process").ChildProcess} child
 * @param {number} patience milliseconds
 * @returns {Promise<void>}
 */
function stopChild(child, patience) {
  if (child.exitCode !== null || child.signalCode !== null || child.pid === undefined)
    return Promise.resolve();
  return new Promise((resolve) => {
    const hard = setTimeout(() => signalGroup(child, "SIGKILL"), patience);
    child.once("close", () => {
      clearTimeout(hard);
      // What the child left behind in its group goes with it.
      signalGroup(child, "SIGKILL");
      resolve();
    });
    signalGroup(child, "SIGTERM");
  });
}

/**
 * @param {import("node:child_process").ChildProcess} child
 * @param {NodeJS.Signals} signal
 */
function signalGroup(child, signal) {
  if (child.pid === undefined) return;
  try {
    process.kill(-child.pid, signal);
  } catch {
    // The group is gone already, which is what was wanted.
  }
}
