import { DomainError } from "~/platform/errors";
import type { FieldConflict } from "~/platform/merge-fields";

/** A conflict that a person decides: 409 with both values of each field. Nothing was written. */
export const conflictOf = (conflicts: readonly FieldConflict[]) =>
  new DomainError(
    "conflict",
    "Somebody else entered something different meanwhile. Nothing was changed: choose which is right.",
    { details: { conflicts } },
  );

/** The conflicts an error carries; undefined for any other error. */
export function conflictsIn(error: unknown): FieldConflict[] | undefined {
  if (!(error instanceof DomainError) || error.code !== "conflict") return undefined;
  const { conflicts } = error.details;
  return Array.isArray(conflicts) ? (conflicts as FieldConflict[]) : undefined;
}
