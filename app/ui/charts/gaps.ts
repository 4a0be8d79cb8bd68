/** Cuts a series where a period has no figure, so that no line is drawn over a gap. */
export function splitAtGaps<Point>(points: (Point | null)[]): Point[][] {
  const runs: Point[][] = [];
  let run: Point[] = [];
  for (const point of [...points, null]) {
    if (point !== null) run.push(point);
    else if (run.length > 0) {
      runs.push(run);
      run = [];
    }
  }
  return runs;
}

/** The middle of the longest stretch of periods without a figure; null where every period has one. */
export function longestGap(points: (unknown | null)[]): number | null {
  let [start, best, length] = [0, 0, 0];
  for (const [index, point] of points.entries()) {
    if (point !== null) start = index + 1;
    else if (index + 1 - start > length) [best, length] = [start, index + 1 - start];
  }
  return length === 0 ? null : best + (length - 1) / 2;
}
