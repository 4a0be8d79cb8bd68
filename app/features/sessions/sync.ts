import type { FieldConflict } from "~/platform/merge-fields";

/** What became of an operation. Shared with the phone, so without anything of the server. */
export type OperationStatus = "applied" | "replayed" | "merged" | "conflict" | "refused";

export type OperationAnswer = {
  id: string;
  status: OperationStatus;
  /** What is stored now, for what was applied, replayed or merged. */
  result?: Record<string, unknown>;
  /** Both values of each field, when somebody else entered something different; nothing was changed. */
  conflicts?: FieldConflict[];
  /** A session somebody else added: the same team, day and kind. */
  existing?: string;
  /** Why it was refused, and what to do. */
  code?: string;
  message?: string;
};
