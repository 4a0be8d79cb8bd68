import { joinClasses } from "./classes";

type Props = {
  /** One entry per stroke, in order; the last is drawn across the others. */
  done: boolean[];
  /** The words instead of the picture; "3 of 5" unless given, none when the words stand right beside it. */
  label?: string;
  size?: "inline" | "large";
  /** Writes "3/5" beside the large tally. */
  showCount?: boolean;
};

const height = 100;
const gap = 60;

/** Ends of the upright at `index`, a little uneven as by hand; always the same for the same index. */
function upright(index: number) {
  const lean = [2, -3, 1, -2][index % 4] ?? 0;
  return { x: 48 + index * gap, top: 6 + (index % 2) * 5 + lean, bottom: 94 - (index % 3) * 3 };
}

/** A chalk tally: upright strokes and one across, each drawn once its part is done. */
export function StrokeTally({ done, label, size = "inline", showCount = size === "large" }: Props) {
  const count = done.filter(Boolean).length;
  const uprights = Math.max(0, done.length - 1);
  const width = 48 * 2 + Math.max(0, uprights - 1) * gap;
  const across = { x1: 8, y1: 88, x2: width - 8, y2: 16 };
  const stroke = (isDone: boolean) =>
    isDone
      ? { className: size === "large" ? "text-lagoon" : "text-ink", strokeWidth: 11 }
      : { className: "text-line", strokeWidth: 6 };

  const strokes = done.map((isDone, index) => {
    if (index === uprights) return { key: "across", isDone, ...across };
    const { x, top, bottom } = upright(index);
    return { key: `upright ${index + 1}`, isDone, x1: x, y1: top, x2: x, y2: bottom };
  });
  // Waiting strokes lie under drawn ones, or the line across would hide what is done.
  strokes.sort((a, b) => Number(a.isDone) - Number(b.isDone));

  const picture = (
    <svg
      aria-hidden="true"
      viewBox={`0 0 ${width} ${height}`}
      className={joinClasses(
        "inline-block overflow-visible",
        size === "large" ? "h-24 min-w-0 shrink" : "h-[1.15em] align-[-0.2em]",
      )}
      fill="none"
      stroke="currentColor"
      strokeLinecap="round"
    >
      {strokes.map(({ key, isDone, ...ends }) => (
        <line key={key} {...ends} {...stroke(isDone)} />
      ))}
    </svg>
  );

  return (
    <span
      className={joinClasses("inline-flex items-center", size === "large" ? "max-w-full gap-4" : "gap-2")}
    >
      {label === "" ? (
        picture
      ) : (
        <span role="img" aria-label={label ?? `${count} of ${done.length}`} className="inline-flex min-w-0">
          {picture}
        </span>
      )}
      {showCount ? (
        <span aria-hidden="true" className="text-lg font-semibold tabular-nums">
          {count}/{done.length}
        </span>
      ) : null}
    </span>
  );
}
