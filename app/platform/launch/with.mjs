import { openLocalServer, otherServer } from "../../../db/local-server/environment.mjs";
import { run } from "../machine/command.mjs";
import { Failure } from "../machine/failure.mjs";
import { ROOT } from "../machine/places.mjs";
import { ensureModules, tool, toolEnvironment } from "./modules.mjs";
import { requireFile } from "./programs.mjs";
import { whilePreparing } from "./serving.mjs";
import { onStop } from "./stop.mjs";

export const stoppedCode = 130;
export const stoppedLine = "";

/**
 * Run one TypeScript program of the project with its environment, the local database up: `with db/migrate.ts`.
 *
 * @param {string[]} args the file, then its arguments
 * @returns {Promise<number>} its exit code
 */
export async function main([file, ...args]) {
  if (!file)
    throw new Failure(
      "No program was named.",
      "Name one: node app/platform/launch/main.mjs with db/migrate.ts",
    );
  requireFile(file);
  await whilePreparing("npm run", ensureModules);
  const env =
    otherServer() ?? (await openLocalServer({ onStart: onStop, onNote: (line) => console.error(line) })).env;
  const { code } = await run(tool("tsx"), [file, ...args], {
    cwd: ROOT,
    env: toolEnvironment(env),
    show: true,
  });
  return code;
}
