import type { ReactNode } from "react";

type Props = { children: ReactNode; note?: ReactNode; as?: "p" | "h1" | "h2" };

/**
 * The sentence that answers the page's question. Figures go in `<strong>`, their intervals in `<Interval>`; `note`
 * is the smaller line under it (coverage, definition, what is unstable).
 */
export function Lede({ children, note, as: Tag = "p" }: Props) {
  return (
    <div className="mb-7 max-w-[58rem]" data-keep-together>
      <Tag className="text-lg leading-[1.36] font-normal text-pretty md:text-2xl [&_strong]:font-semibold">
        {children}
      </Tag>
      {note ? <p className="mt-2 max-w-prose text-soft">{note}</p> : null}
    </div>
  );
}

/** An interval in the sentence: quieter than the figure and never broken over two lines. */
export function Interval({ lower, upper }: { lower: string; upper: string }) {
  return (
    <span className="whitespace-nowrap text-soft">
      ({lower} to {upper})
    </span>
  );
}

/** A caution inside a sentence, in words. */
export function Attention({ children }: { children: ReactNode }) {
  return <span className="font-semibold text-ember">{children}</span>;
}
