import { readFileSync } from "node:fs";
import { join } from "node:path";
import { ROOT } from "../../../app/platform/machine/places.mjs";
import routes from "../../../app/routes";

/** Every address of app/routes.ts: its pattern, its own file, and what that file answers. */
export type Address = { pattern: string; file: string; loads: boolean; acts: boolean };

type Entry = { path?: string; index?: boolean; file: string; children?: Entry[] };

function flatten(entries: readonly Entry[], parent: string): Address[] {
  return entries.flatMap(({ path, index, file, children }) => {
    const pattern = path ? `${parent}/${path}` : parent;
    // A layout has no page of its own unless it is an address with an index beneath it.
    const own = index || (path && !children) ? [describe(pattern || "/", file)] : [];
    return [...own, ...(children ? flatten(children, pattern) : [])];
  });
}

function describe(pattern: string, file: string): Address {
  const source = readFileSync(join(ROOT, "app", file), "utf8");
  const exportsOne = (name: string) =>
    new RegExp(`export (async )?(function|const) ${name}\\b|export \\{[^}]*\\b${name}\\b`).test(source);
  return {
    pattern,
    file,
    loads: exportsOne("loader") || /export default /.test(source),
    acts: exportsOne("action"),
  };
}

export const addresses: readonly Address[] = flatten(routes as Entry[], "");
