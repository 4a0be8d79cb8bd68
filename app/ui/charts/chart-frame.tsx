import { ResponsiveWrapper } from "@nivo/core";
import type { PartialTheme } from "@nivo/theming";
import type { CSSProperties, ReactElement, ReactNode } from "react";

/**
 * Widths below which a chart is drawn narrow, labels above their lines: `@xl`, `@3xl` and `@4xl` of a container query,
 * in px of 16 to the rem. Charts with words on both sides of their lines need more.
 */
const breaks = {
  phone: { below: 576, height: "@xl:h-(--wide-height)" },
  tablet: { below: 768, height: "@3xl:h-(--wide-height)" },
  desk: { below: 896, height: "@4xl:h-(--wide-height)" },
};

/** Width drawn on the server: the page's own on a desk. The browser measures and draws again. */
const serverWidth = 1125;

/** Colours are the tokens' variables, so a chart follows the scheme without being drawn again. */
export const chartTheme: PartialTheme = {
  text: { fontFamily: "var(--font-sans)", fontSize: 15, fill: "var(--color-ink)" },
  axis: {
    domain: { line: { stroke: "none" } },
    ticks: { line: { stroke: "none" }, text: { fontSize: 15, fill: "var(--color-ink)" } },
    legend: { text: { fontSize: 15, fill: "var(--color-soft)" } },
  },
  grid: { line: { stroke: "var(--color-line)", strokeWidth: 1.5 } },
};

/** Roughly how wide a text is in Rubik at 15 px: enough to choose a side for it, with a little to spare. */
export function textWidth(text: string): number {
  return text.length * 7.9 + 4;
}

/**
 * The ticks whose words fit at `spacing` px from one to the next: all, or every second, third and so on, always with
 * the one at `keep`.
 */
export function ticksThatFit(words: string[], spacing: number, keep = 0): number[] {
  const widest = Math.max(1, ...words.map(textWidth));
  const every = Math.max(1, Math.ceil((widest + 6) / Math.max(spacing, 1)));
  return words.map((_, index) => index).filter((index) => (index - keep) % every === 0);
}

type Props = {
  /** Height in px when wide, and when narrow. Both are known before the width is. */
  wideHeight: number;
  narrowHeight: number;
  /** Up to which kind of screen the chart is drawn narrow: below 576 px unless given, 768 or 896. */
  narrowOn?: keyof typeof breaks;
  caption?: ReactNode;
  children: (size: { width: number; height: number; narrow: boolean }) => ReactElement;
};

/**
 * The box of a chart. Its height comes from the style sheet by the box's own width, so nothing on the page moves
 * when the browser takes over from the server.
 */
export function ChartFrame({ wideHeight, narrowHeight, narrowOn = "phone", caption, children }: Props) {
  const heights = { "--wide-height": `${wideHeight}px`, "--narrow-height": `${narrowHeight}px` };
  return (
    <figure className="my-6">
      {caption ? <figcaption className="mb-2 font-semibold">{caption}</figcaption> : null}
      <div className="@container">
        <div
          className={`h-(--narrow-height) overflow-hidden ${breaks[narrowOn].height}`}
          style={heights as CSSProperties}
        >
          <ResponsiveWrapper defaultWidth={serverWidth} defaultHeight={wideHeight}>
            {({ width }) => {
              const narrow = width < breaks[narrowOn].below;
              return children({ width, height: narrow ? narrowHeight : wideHeight, narrow });
            }}
          </ResponsiveWrapper>
        </div>
      </div>
    </figure>
  );
}
