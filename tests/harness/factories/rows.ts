/** The one row of an insert. */
export function only<T>(rows: readonly T[]): T {
  const [row] = rows;
  if (row === undefined || rows.length !== 1) throw new Error(`One row expected, not ${rows.length}.`);
  return row;
}

export function counter() {
  let count = 0;
  return () => {
    count += 1;
    return count;
  };
}
