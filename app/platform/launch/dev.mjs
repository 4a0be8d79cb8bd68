import { say, step } from "./output.mjs";
import { startServer } from "./programs.mjs";
import { announce, claimPort, prepareDatabase, prepareModules } from "./serving.mjs";

export const stoppedCode = 0;
export const stoppedLine = "Stopping ...";

/**
 * `npm run dev`: the same server on the sources, which it follows as they change.
 *
 * @returns {Promise<number>} only when the server ends by itself
 */
export async function main() {
  say("Haleside, development\n");
  const port = await claimPort("npm run dev");
  await prepareModules("npm run dev");
  const stage = await prepareDatabase(port);
  const server = await step("server", "starting", async () => {
    const value = await startServer(stage.env, { mode: "development", show: true });
    return { done: "ready", value };
  });
  await announce(stage);
  throw await server.ended;
}
