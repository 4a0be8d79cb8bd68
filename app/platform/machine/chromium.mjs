import { existsSync, readdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { run } from "./command.mjs";
import {
  installerRights,
  installPackages,
  libraryPath,
  requireDebian,
  unpackPackages,
  writeScript,
} from "./debian.mjs";
import { Failure, lastLine } from "./failure.mjs";

/** The browser that the browser tests drive: Debian's Chromium, found, installed or unpacked. */

const KNOWN = [
  "/usr/bin/chromium",
  "/usr/bin/chromium-browser",
  "/usr/bin/google-chrome-stable",
  "/usr/bin/google-chrome",
];
const PACKAGES = ["chromium", "chromium-common", "fonts-liberation"];

/** Not needed without a screen: drivers of graphics cards and their compiler, themes, the desktop's services. */
const LEFT_OUT =
  /llvm|mesa-dri|^mesa-|-icon-theme$|^hicolor|^systemd|^dbus|^dconf|^perl|-perl$|^xdg-|^adduser|^debconf/;

/**
 * A browser that answers, got from Debian if there is none.
 *
 * CHROMIUM_PATH names one to use instead; HALESIDE_IGNORE_SYSTEM_CHROMIUM=1 unpacks one although the machine has
 * its own (that is how the unpacking is tried).
 *
 * @returns {Promise<{ path: string, how: "given" | "found" | "installed" | "unpacked" }>}
 */
export async function ensureChromium() {
  const given = process.env.CHROMIUM_PATH;
  if (given) return { path: await answering(given), how: "given" };
  const ignored = process.env.HALESIDE_IGNORE_SYSTEM_CHROMIUM === "1";
  const known = ignored ? undefined : KNOWN.find((path) => existsSync(path));
  if (known) return { path: await answering(known), how: "found" };

  requireDebian("Chromium");
  const rights = ignored ? undefined : await installerRights();
  if (rights) {
    await installPackages(["chromium", "fonts-liberation"], rights);
    return { path: await answering("/usr/bin/chromium"), how: "installed" };
  }
  const folder = await unpackPackages({ name: "chromium", packages: PACKAGES, leave: LEFT_OUT });
  return { path: await answering(wrap(folder)), how: "unpacked" };
}

/**
 * A script that starts the unpacked browser with the libraries and fonts that came with it.
 *
 * @param {string} folder
 * @returns {string}
 */
function wrap(folder) {
  const fonts = join(folder, "fonts.conf");
  const own = join(folder, "etc/fonts/fonts.conf");
  const rules = ["/etc/fonts/fonts.conf", own].find((path) => existsSync(path));
  writeFileSync(
    fonts,
    `<?xml version="1.0"?>
<!DOCTYPE fontconfig SYSTEM "fonts.dtd">
<fontconfig>
  ${rules ? `<include ignore_missing="yes">${rules}</include>` : ""}
  <dir>${join(folder, "usr/share/fonts")}</dir>
  <dir>/usr/share/fonts</dir>
  <cachedir>${join(folder, "font-cache")}</cachedir>
</fontconfig>
`,
  );
  const script = join(folder, "chromium");
  writeScript(script, [
    `export LD_LIBRARY_PATH="${libraryPath(folder, ["nss", ...deeper(folder)])}\${LD_LIBRARY_PATH:+:$LD_LIBRARY_PATH}"`,
    `export FONTCONFIG_FILE="${fonts}"`,
    `export XDG_DATA_DIRS="${join(folder, "usr/share")}:/usr/local/share:/usr/share"`,
    `exec "${join(folder, "usr/lib/chromium/chromium")}" "$@"`,
  ]);
  return script;
}

/** Libraries that Debian keeps one folder deeper (pulseaudio's, for one). @param {string} folder */
function deeper(folder) {
  const base = libraryPath(folder)
    .split(":")
    .find((path) => path.includes("/usr/lib/"));
  if (!base) return [];
  return readdirSync(base, { withFileTypes: true })
    .filter((entry) => entry.isDirectory())
    .map((entry) => entry.name)
    .filter((name) => readdirSync(join(base, name)).some((file) => file.includes(".so")));
}

/** @param {string} path */
async function answering(path) {
  const { code, output } = await run(path, ["--version", "--no-sandbox"]);
  if (code === 0) return path;
  throw new Failure(
    `The browser ${path} does not start: ${lastLine(output)}`,
    "Install Debian's chromium, or name a working browser with CHROMIUM_PATH.",
  );
}
