#!/usr/bin/env node
/**
 * The local database by hand, for work on the code.
 *
 *   node db/local-server/cli.mjs up dev      bring the development database up and leave it running; writes .env
 *   node db/local-server/cli.mjs up test     bring a test cluster up and leave it running; writes .haleside/test.env
 *   node db/local-server/cli.mjs down dev    stop it (or `test`), whoever uses it
 *   node db/local-server/cli.mjs drop test   stop it and delete everything in it
 *
 * `up` prints nothing when all is well and takes a second when the database runs already. Load the file it wrote
 * with `node --env-file=.env ...`. The test cluster's file also holds TEST_SUPERUSER_URL (its superuser, in the
 * database `postgres`); what it keeps is lost if the machine fails (fsync is off).
 */
import { writeFileSync } from "node:fs";
import { join } from "node:path";
import { explain, Failure } from "../../app/platform/machine/failure.mjs";
import { privateFolder } from "../../app/platform/machine/places.mjs";
import { dropCluster, openCluster, stopCluster } from "./cluster.mjs";
import { openLocalServer } from "./environment.mjs";
import { testEnvironment } from "./test-cluster.mjs";

const [deed, name] = process.argv.slice(2);

try {
  await act();
} catch (error) {
  const { cause, mend } = explain(error);
  console.error(`${cause}\n${mend}`);
  if (process.env.HALESIDE_DEBUG === "1") console.error(error);
  process.exitCode = 1;
}

async function act() {
  if (name !== "dev" && name !== "test") throw usage();
  if (deed === "down") return stopCluster(name);
  if (deed === "drop" && name === "test") return dropCluster(name);
  if (deed !== "up") throw usage();
  if (name === "dev") return openLocalServer({ keep: true, onNote: (line) => console.error(line) });
  const cluster = await openCluster({ name: "test", lasting: false, keep: true });
  const lines = Object.entries(await testEnvironment(cluster)).map(([key, value]) => `${key}=${value}\n`);
  writeFileSync(join(privateFolder(), "test.env"), lines.join(""), { mode: 0o600 });
}

function usage() {
  return new Failure(
    "That is not something this command does.",
    "Say one of: up dev, up test, down dev, down test, drop test.",
  );
}
