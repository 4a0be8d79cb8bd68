/** What a field of an operation may hold: JSON without functions or dates. */
export type FieldValue = null | boolean | number | string | { [key: string]: FieldValue };

/** A change as a phone made it: what it saw, and what was chosen. */
export type FieldChange = { base: FieldValue; value: FieldValue };

export type FieldConflict = { field: string; base: FieldValue; stored: FieldValue; value: FieldValue };

export type Merge = {
  /** Fields to write. */
  write: Record<string, FieldValue>;
  /** Fields that somebody else had set to the same value already. */
  agreed: string[];
  /** Fields that somebody else had set to another value. */
  conflicts: FieldConflict[];
};

export function equalValues(a: FieldValue, b: FieldValue): boolean {
  if (a === b) return true;
  if (a === null || b === null || typeof a !== "object" || typeof b !== "object") return false;
  const keys = new Set([...Object.keys(a), ...Object.keys(b)]);
  return [...keys].every((key) => equalValues(a[key] ?? null, b[key] ?? null));
}

/**
 * Merges changes into what is stored, field by field. A field nobody else touched is written; equal answers merge;
 * different answers are a conflict that a person decides. The order is the server's, never a phone's clock.
 * A field that is not stored counts as null. A change from a value to itself is a condition: it conflicts when the field
 * holds something else.
 */
export function mergeFields(
  stored: Readonly<Record<string, FieldValue>>,
  changes: Readonly<Record<string, FieldChange>>,
): Merge {
  const merge: Merge = { write: {}, agreed: [], conflicts: [] };
  for (const [field, { base, value }] of Object.entries(changes)) {
    const now = stored[field] ?? null;
    if (equalValues(now, base)) {
      if (!equalValues(now, value)) merge.write[field] = value;
    } else if (equalValues(now, value)) merge.agreed.push(field);
    else merge.conflicts.push({ field, base, stored: now, value });
  }
  return merge;
}
