import { unescapeCsvCell } from "~/platform/csv";

/** A cell that was understood; a warning says what a person should look at all the same. */
export type Accepted<T> = { ok: true; value: T; warning?: string };
/** A cell that was not. `reason` quotes it and says what is wrong, `mend` what to write instead. */
export type Refused = { ok: false; code: string; reason: string; mend: string };
export type Parsed<T> = Accepted<T> | Refused;

export function accept<T>(value: T, warning?: string): Accepted<T> {
  return warning === undefined ? { ok: true, value } : { ok: true, value, warning };
}

export function refuse(code: string, reason: string, mend: string): Refused {
  return { ok: false, code, reason, mend };
}

/** Quotes a cell in a sentence, on one line and no longer than a person would read. */
export function quoteCell(text: string) {
  const line = text.replace(/\s+/gu, " ").trim();
  return `“${line.length > 40 ? `${line.slice(0, 39)}…` : line}”`;
}

/** Trims blanks of every kind (no-break, zero-width) and takes off an export's apostrophe before a formula. */
export function tidyCell(text: string) {
  return unescapeCsvCell(text.replace(/^[\s\u200B\u2060\uFEFF]+|[\s\u200B\u2060\uFEFF]+$/gu, ""));
}
