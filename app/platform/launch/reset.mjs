import { existsSync, readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { clusterHome, deleteCluster, stopCluster } from "../../../db/local-server/cluster.mjs";
import { readEnvFile } from "../../../db/local-server/env-file.mjs";
import { ENV_FILE } from "../../../db/local-server/environment.mjs";
import { Failure } from "../machine/failure.mjs";
import { holderOf } from "../machine/lock.mjs";
import { PRIVATE, ROOT } from "../machine/places.mjs";
import { say } from "./output.mjs";
import { serveLock } from "./serving.mjs";

export const stoppedCode = 130;
export const stoppedLine = "";

const KEPT = "dev-before-reset";

/**
 * `npm run reset`: begin again. The local database is put aside rather than deleted, with the key that opens it;
 * the one put aside before goes. A database elsewhere is never touched.
 *
 * @returns {Promise<number>}
 */
export async function main() {
  const holder = holderOf(serveLock());
  if (holder) {
    throw new Failure(
      `${holder.what} runs in this folder (process ${holder.pid}).`,
      `Stop it first, with Ctrl-C or: kill ${holder.pid}`,
    );
  }
  const home = clusterHome("dev");
  await stopCluster("dev");
  if (existsSync(join(home, "data"))) {
    deleteCluster(KEPT);
    renameSync(home, clusterHome(KEPT));
    say(`The local database is put aside in ${clusterHome(KEPT)} until the next reset.`);
  }
  deleteCluster("dev");
  forgetMadeLines();
  for (const name of ["stamps", "log", "build", "build.old"])
    rmSync(join(PRIVATE, name), { recursive: true, force: true });
  for (const name of ["build", ".react-router"]) rmSync(join(ROOT, name), { recursive: true, force: true });
  say("The next npm start begins with a new database, new secrets and the demo.");
  return 0;
}

/** Take the made part out of `.env`; the person's own lines stay. */
function forgetMadeLines() {
  if (!existsSync(ENV_FILE)) return;
  const { ownText } = readEnvFile(ENV_FILE);
  if (ownText === readFileSync(ENV_FILE, "utf8")) return;
  if (ownText.trim() === "") rmSync(ENV_FILE);
  else writeFileSync(ENV_FILE, ownText, { mode: 0o600 });
}
