import { spreadLabels, wrapWords } from "./end-labels";

/** `y` is the height of what the words name, in px of the drawing. */
export type EndWord = {
  text: string;
  y: number;
  colour: string;
  /** Where the words begin if not at the common place: behind a line that ends early. */
  x?: number;
};

type Props = { words: EndWord[]; x: number; room: number; limit: number };

const lineHeight = 18;

/**
 * Words at the ends of lines, wrapped to `room` and spread so that none covers another. All in px; `limit` is the
 * lowest a word may reach.
 */
export function EndWords({ words, x, room, limit }: Props) {
  const wrapped = words.map((word) => ({ ...word, lines: wrapWords(word.text, room) }));
  const places = spreadLabels(
    wrapped.map(({ y, lines }) => ({ y, height: lines.length * lineHeight + 2 })),
    limit,
  );
  return wrapped.map(({ text, lines, colour, y, x: own = x }, index) => (
    <text
      // biome-ignore lint/suspicious/noArrayIndexKey: two lines may carry the same words at the same height
      key={`${index} ${text}`}
      y={(places[index] ?? y) + 5}
      fontSize={15}
      fontWeight={500}
      fill={colour}
      stroke="var(--color-chalk)"
      strokeWidth={4}
      paintOrder="stroke"
    >
      {lines.map((line, at) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: lines of one text never change their order
        <tspan key={`${at} ${line}`} x={own} dy={at === 0 ? 0 : lineHeight}>
          {line}
        </tspan>
      ))}
    </text>
  ));
}
