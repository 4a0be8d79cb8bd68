// Below this size figures (p-values, mostly) are compared as if they were this large.
const floor = 1e-9;

/** R's text of a number; null for its NA. */
export function readFigure(text: string) {
  if (text === "NA" || text === "NaN") return null;
  return text === "Inf" ? Infinity : Number(text);
}

/** Relative difference; Infinity where one has a figure and the other none. */
export function differenceOf(ours: number | null | undefined, theirs: number | null) {
  if (ours === theirs) return 0;
  if (ours === null || ours === undefined || theirs === null || !Number.isFinite(theirs)) return Infinity;
  return Math.abs(ours - theirs) / Math.max(Math.abs(theirs), floor);
}
