import { explain, Failure } from "../machine/failure.mjs";
import { restart, say } from "./output.mjs";
import { isStopping, listenForStop, stopAll } from "./stop.mjs";

/** @typedef {{ main: (args: string[]) => Promise<number>, stoppedCode: number, stoppedLine: string }} Command */

/** @type {Record<string, () => Promise<Command>>} */
const COMMANDS = {
  start: () => import("./start.mjs"),
  dev: () => import("./dev.mjs"),
  test: () => import("./test.mjs"),
  reset: () => import("./reset.mjs"),
  with: () => import("./with.mjs"),
};

/**
 * Run one command to its end, then stop whatever it started.
 *
 * @param {string | undefined} name
 * @param {string[]} args
 */
export async function runCommand(name, args) {
  const code = await attempt(name, args);
  await stopAll(code);
}

/** @param {string | undefined} name @param {string[]} args */
async function attempt(name, args) {
  try {
    const load = name === undefined ? undefined : COMMANDS[name];
    if (!load)
      throw new Failure(
        `There is no command ${name ?? "without a name"}.`,
        `Say one of: ${Object.keys(COMMANDS).join(", ")}.`,
      );
    const command = await load();
    listenForStop((signal) => {
      restart();
      if (command.stoppedLine !== "") say(`\n${command.stoppedLine}`);
      if (signal === "SIGINT" || command.stoppedCode === 0) return command.stoppedCode;
      return signal === "SIGTERM" ? 143 : 129;
    });
    return await command.main(args);
  } catch (error) {
    // What fails while everything is being stopped fails because of it.
    if (isStopping()) return new Promise(() => {});
    const { cause, mend } = explain(error);
    process.stderr.write(`\n${cause}\n${mend}\n`);
    if (process.env.HALESIDE_DEBUG === "1") console.error(error);
    return 1;
  }
}
