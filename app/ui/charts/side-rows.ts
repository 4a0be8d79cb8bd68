import { textWidth } from "./chart-frame";
import { wrapWords } from "./end-labels";
import { intervalWords } from "./interval-words";

export type SideRate = {
  value: number;
  lower: number;
  upper: number;
  /** Rests on too few events. */
  unstable?: boolean;
  events: number;
};

export type SideRow = {
  label: string;
  /** Without one there is nothing to compute a rate from. */
  left: SideRate | null;
  right: SideRate | null;
  /** What has no side, in words below the name. */
  middle?: { text: string };
};

/** Heights in px. On a narrow screen the name stands above the figures, and these above their lines. */
const wide = { row: 34, withMiddle: 50 };
const narrow = { name: 22, middle: 19, words: 18, line: 34 };
/** Room for the figures of one side on the narrowest screen, by the estimate of `textWidth`. */
const narrowWords = 158;

function sideWords(side: SideRate, decimals: number): string {
  return `${side.value.toFixed(decimals)} (${intervalWords(side, decimals)})`;
}

/** What a side says on a wide screen, on one line. */
export function wideSideWords(side: SideRate, decimals: number): string {
  return `${sideWords(side, decimals)}${side.unstable ? ", unstable" : ""}`;
}

/** What a side says on a narrow screen, line by line. */
export function narrowSideWords(side: SideRate | null, decimals: number): string[] {
  if (!side) return [];
  const words = sideWords(side, decimals);
  // Too long for one line, it breaks before its interval and not inside of it.
  const parts = textWidth(words) <= narrowWords ? [words] : words.split(/ (?=\()/);
  const lines = parts.flatMap((part) => wrapWords(part, narrowWords));
  return side.unstable ? [...lines, "unstable"] : lines;
}

export type PlacedSide = { row: SideRow; key: string; top: number; line: number };

/** The top of every row and the height of its lines, in px. */
export function layoutSides(
  rows: SideRow[],
  isNarrow: boolean,
  decimals: number,
): { rows: PlacedSide[]; height: number } {
  let y = 0;
  const placed = rows.map((row, index) => {
    const top = y;
    const height = isNarrow ? narrowHeight(row, decimals) : row.middle ? wide.withMiddle : wide.row;
    y += height;
    return {
      row,
      key: `${index} ${row.label}`,
      top,
      line: isNarrow ? y - narrow.line + 12 : top + height / 2,
    };
  });
  return { rows: placed, height: y };
}

function narrowHeight({ left, right, middle }: SideRow, decimals: number): number {
  const lines = Math.max(...[left, right].map((side) => narrowSideWords(side, decimals).length));
  return narrow.name + (middle ? narrow.middle : 0) + lines * narrow.words + narrow.line;
}

/** Room for the names between the two sides of a wide picture, in px. */
export function middleRoom(rows: SideRow[]): number {
  const texts = rows.flatMap(({ label, middle }) => [label, middle?.text ?? ""]);
  return Math.min(320, Math.max(120, ...texts.map((text) => textWidth(text) + 32)));
}
