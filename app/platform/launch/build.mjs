import { existsSync, renameSync, rmSync } from "node:fs";
import { join } from "node:path";
import { run } from "../machine/command.mjs";
import { failureFrom } from "../machine/failure.mjs";
import { logFile, privateFolder, ROOT } from "../machine/places.mjs";
import { tool, toolEnvironment } from "./modules.mjs";
import { clearStamp, hashOf, readStamp, writeStamp } from "./stamps.mjs";

/** The production build. */

const INPUTS = [
  ...["app", "db", "imports", "public"],
  ...["package-lock.json", "package.json", "react-router.config.ts", "tsconfig.json", "vite.config.ts"],
];

/**
 * Build unless the build is of the files as they are now. It is made aside and then put in place, so that a server
 * that runs from the old one never meets half of the new.
 *
 * @returns {Promise<"up to date" | "built">}
 */
export async function ensureBuild() {
  const place = join(ROOT, "build");
  const hash = hashOf(INPUTS, [process.versions.node]);
  if (existsSync(join(place, "server/index.js")) && readStamp("build") === hash) return "up to date";
  const aside = join(privateFolder(), "build");
  const log = logFile("build");
  rmSync(aside, { recursive: true, force: true });
  const env = toolEnvironment({ NODE_ENV: "production", BUILD_FOLDER: ".haleside/build" });
  const { code, output } = await run(tool("react-router"), ["build"], { cwd: ROOT, log, env });
  if (code !== 0) throw failureFrom("The build", output, log);
  clearStamp("build");
  const old = join(privateFolder(), "build.old");
  rmSync(old, { recursive: true, force: true });
  if (existsSync(place)) renameSync(place, old);
  renameSync(aside, place);
  rmSync(old, { recursive: true, force: true });
  writeStamp("build", hash);
  return "built";
}
