import { textWidth } from "./chart-frame";

/** Breaks words into lines of at most `width` px; a single long word stays whole. */
export function wrapWords(text: string, width: number): string[] {
  const lines: string[] = [];
  for (const word of text.split(" ")) {
    const last = lines.at(-1);
    if (last !== undefined && textWidth(`${last} ${word}`) <= width)
      lines[lines.length - 1] = `${last} ${word}`;
    else lines.push(word);
  }
  return lines;
}

/**
 * Moves labels apart so that each keeps its own height, in their order and as near to their lines as it goes,
 * none below `limit`. `y` is the first line of each; all in px.
 */
export function spreadLabels(labels: { y: number; height: number }[], limit: number): number[] {
  const order = labels.map((_, index) => index).sort((a, b) => (labels[a]?.y ?? 0) - (labels[b]?.y ?? 0));
  const spread = labels.map(({ y }) => y);
  let free = Number.NEGATIVE_INFINITY;
  for (const index of order) {
    spread[index] = Math.max(spread[index] ?? 0, free);
    free = (spread[index] ?? 0) + (labels[index]?.height ?? 0);
  }
  let ceiling = limit;
  for (const index of order.reverse()) {
    spread[index] = Math.min(spread[index] ?? 0, ceiling - (labels[index]?.height ?? 0));
    ceiling = spread[index] ?? 0;
  }
  return spread;
}
