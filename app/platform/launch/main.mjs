/**
 * The entry of `npm start`, `npm test`, `npm run dev` and `npm run reset`. Plain Node without a dependency, since
 * it runs in a bare clone before anything is installed; and no syntax newer than Node 14 in this file, so that an
 * old Node gets a sentence and not a syntax error.
 *
 *   node app/platform/launch/main.mjs start | dev | test [pattern] | reset | with <file> [arguments]
 */
const OLDEST = { major: 20, minor: 19 };

const [major = 0, minor = 0] = process.versions.node.split(".").map(Number);
if (major < OLDEST.major || (major === OLDEST.major && minor < OLDEST.minor)) {
  console.error(
    `Haleside needs Node ${OLDEST.major}.${OLDEST.minor} or newer; this is Node ${process.versions.node}.`,
  );
  console.error("Install Node 20 (Debian's, or with a version manager) and run it again.");
  process.exit(1);
}

import("./run.mjs").then(({ runCommand }) => runCommand(process.argv[2], process.argv.slice(3)));
