import { existsSync, readFileSync, renameSync, writeFileSync } from "node:fs";

/**
 * The `.env` file. One marked part is made by the commands; every other line is the person's own, is kept, and
 * wins over the made part.
 */

const BEGIN =
  "# --- Made for the local database. Delete these lines and they are made again from the copy beside it. ---";
const END = "# --- End of the made part. Lines of your own, here or above, win over it. ---";

/**
 * @param {string} file
 * @returns {{ own: Record<string, string>, made: Record<string, string>, ownText: string }}
 */
export function readEnvFile(file) {
  const text = existsSync(file) ? readFileSync(file, "utf8") : "";
  const begin = text.indexOf(BEGIN);
  const end = text.indexOf(END);
  if (begin === -1 || end < begin) return { own: parse(text), made: {}, ownText: text };
  const ownText = text.slice(0, begin) + text.slice(end + END.length).replace(/^\n/, "");
  return { own: parse(ownText), made: parse(text.slice(begin, end)), ownText };
}

/**
 * Write the made part anew, keeping the person's own lines. Nothing is written when nothing changes.
 *
 * @param {string} file
 * @param {Record<string, string>} made
 */
export function writeEnvFile(file, made) {
  const { ownText } = readEnvFile(file);
  const lines = Object.entries(made).map(([name, value]) => `${name}=${value}`);
  const own = ownText.trim() === "" ? "" : `${ownText.trimEnd()}\n\n`;
  const text = `${own}${[BEGIN, ...lines, END].join("\n")}\n`;
  if (existsSync(file) && readFileSync(file, "utf8") === text) return;
  writeFileSync(`${file}.new`, text, { mode: 0o600 });
  renameSync(`${file}.new`, file);
}

/**
 * `NAME=value` lines; `#` begins a comment line; quotes around a value are taken off.
 *
 * @param {string} text
 * @returns {Record<string, string>}
 */
function parse(text) {
  /** @type {Record<string, string>} */
  const values = {};
  for (const line of text.split("\n")) {
    const match = /^\s*(?:export\s+)?([A-Za-z_]\w*)\s*=\s*(.*?)\s*$/.exec(line);
    if (!match?.[1] || match[2] === undefined) continue;
    const quoted = /^(["'])(.*)\1$/.exec(match[2]);
    values[match[1]] = quoted?.[2] ?? match[2];
  }
  return values;
}
