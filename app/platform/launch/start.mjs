import { logFile } from "../machine/places.mjs";
import { ensureBuild } from "./build.mjs";
import { say, secondsSince, step } from "./output.mjs";
import { startServer } from "./programs.mjs";
import { announce, claimPort, prepareDatabase, prepareModules, whilePreparing } from "./serving.mjs";

export const stoppedCode = 0;
export const stoppedLine = "Stopping ...";

/**
 * `npm start`: everything from a bare clone to a running server, doing only what is not done already.
 *
 * @returns {Promise<number>} only when the server ends by itself
 */
export async function main() {
  const since = Date.now();
  say("Haleside\n");
  const port = await claimPort("npm start");
  await prepareModules("npm start");
  const stage = await prepareDatabase(port);
  await whilePreparing("npm start", () =>
    step("build", "building, about ten seconds", async () => ({
      done: await ensureBuild(),
      value: undefined,
    })),
  );
  const server = await step("server", "starting", async () => {
    const show = process.env.HALESIDE_DEBUG === "1";
    const value = await startServer(stage.env, { mode: "production", show });
    return { done: `ready after ${secondsSince(since)}; its log is ${logFile("server")}`, value };
  });
  await announce(stage);
  throw await server.ended;
}
