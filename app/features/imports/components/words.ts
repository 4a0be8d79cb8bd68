/** The words of an import's states and counts, for its pages. */

export type HistoryRow = {
  id: string;
  kind: string;
  state: string;
  fileName: string;
  counts: Record<string, number>;
  by: string | null;
  day: string;
  time: string;
};

export const stateWords: Record<string, string> = {
  uploading: "being uploaded",
  uploaded: "being read",
  reading: "being read",
  needs_answers: "waits for your answers",
  previewed: "ready to import",
  committing: "being imported",
  committed: "imported",
  failed: "could not be read",
  cancelled: "cancelled",
  undone: "undone",
};

export const encodingWords: Record<string, string> = {
  "utf-8": "UTF-8",
  "utf-16le": "UTF-16, little-endian",
  "utf-16be": "UTF-16, big-endian",
  "windows-1252": "Windows-1252 (Western European)",
};

export const delimiterWords: Record<string, string> = {
  ",": "comma",
  ";": "semicolon",
  "\t": "tab",
  "|": "vertical bar",
};

export const dayOrderWords: Record<string, string> = {
  "day-first": "day first, as 27.3.2014",
  "month-first": "month first, as 3/27/2014",
  iso: "year first or with the month in words",
  ambiguous: "not clear",
  mixed: "not clear",
};

export const plural = (count: number, one: string, many = `${one}s`) =>
  `${count.toLocaleString("en-GB")} ${count === 1 ? one : many}`;

/** "20 new, 2 changed, 3 rejected" */
export function importSummary(counts: Record<string, number>) {
  const parts = [
    ["create", "new"],
    ["update", "changed"],
    ["unchanged", "unchanged"],
    ["rejected", "rejected"],
  ].flatMap(([key = "", word = ""]) => {
    const count = counts[key] ?? 0;
    return count > 0 ? [`${count.toLocaleString("en-GB")} ${word}`] : [];
  });
  return parts.length > 0 ? parts.join(", ") : "–";
}

export function importTitle(total: number, unfinished: number) {
  const said = `${plural(total, "file")} imported or begun`;
  if (unfinished === 0) return `${said}.`;
  return `${said}; ${unfinished === 1 ? "one waits" : `${unfinished} wait`} for you.`;
}

const made: [string, string, string?][] = [
  ["teamsMade", "new team"],
  ["athletesMade", "new athlete"],
  ["athletesChanged", "athlete changed", "athletes changed"],
  ["membershipsMade", "place on a roster", "places on rosters"],
  ["guardiansMade", "new guardian"],
  ["guardiansChanged", "guardian changed", "guardians changed"],
  ["sessionsMade", "new session"],
  ["sessionsChanged", "session changed", "sessions changed"],
  ["participationsMade", "participation"],
  ["participationsChanged", "participation changed", "participations changed"],
];

/** The records an import makes and changes, as the parts of a sentence. */
export function recordParts(counts: Record<string, number>) {
  return made.flatMap(([key, one, many]) => {
    const count = counts[key] ?? 0;
    return count > 0 ? [plural(count, one, many)] : [];
  });
}

/** "a, b and c" */
export function list(parts: readonly string[]) {
  if (parts.length < 2) return parts.join("");
  return `${parts.slice(0, -1).join(", ")} and ${parts.at(-1)}`;
}
