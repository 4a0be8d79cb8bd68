import type { RowRejection } from "./read-row";

/** A row of a file as the duplicate finders take it: accepted by its definition, with its line. */
export type FileRow<Value> = { lineNumber: number; value: Value };

/** What an earlier line of the same file means for a row. */
export type DuplicateFinding =
  /** The row is left out: it repeats the earlier line or contradicts it. */
  | { outcome: "rejected"; lineNumber: number; ofLine: number; rejection: RowRejection }
  /** One athlete on several lines, on purpose: another team or another guardian. Both lines are imported. */
  | { outcome: "same-athlete"; lineNumber: number; ofLine: number; adds: "team" | "guardian" }
  /** Both lines are imported, but a person should look. */
  | { outcome: "doubtful"; lineNumber: number; ofLine: number; warning: string };

export function rejectDuplicate(
  lineNumber: number,
  ofLine: number,
  rejection: RowRejection,
): DuplicateFinding {
  return { outcome: "rejected", lineNumber, ofLine, rejection };
}
