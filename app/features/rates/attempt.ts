/**
 * Runs a model that the data may not determine (no event on a side, columns that repeat each other), for which the
 * statistics throw a RangeError: null then, so that a page can say that it could not be made.
 */
export function attempt<T>(compute: () => T): T | null {
  try {
    return compute();
  } catch (error) {
    if (error instanceof RangeError) return null;
    throw error;
  }
}
