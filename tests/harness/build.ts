import { join } from "node:path";
import { ensureBuild } from "../../app/platform/launch/build.mjs";
import { withLock } from "../../app/platform/machine/lock.mjs";
import { privateFolder } from "../../app/platform/machine/places.mjs";

/** The build of the sources as they are now; `npm test` has made it already, a run by hand makes it here. */
export function ensureTestBuild() {
  const lock = join(privateFolder("locks"), "test-build");
  return withLock(
    lock,
    "the build for the tests",
    () => {},
    () => ensureBuild(),
  );
}
