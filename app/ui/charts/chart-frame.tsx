import { ResponsiveWrapper } from "@nivo/core";
import type { PartialTheme } from "@nivo/theming";
import type { CSSProperties, ReactElement, ReactNode } from "react";

/** Below this width labels stand above their lines. It is the `@xl` of a container query in rem: 36 x 16. */
export const narrowBelow = 576;

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

type Props = {
  /** Height in px when wide, and when narrower than `narrowBelow`. Both are known before the width is. */
  wideHeight: number;
  narrowHeight: number;
  caption?: ReactNode;
  children: (size: { width: number; height: number; narrow: boolean }) => ReactElement;
};

/**
 * The box of a chart. Its height comes from the style sheet by the box's own width, so nothing on the page moves
 * when the browser takes over from the server.
 */
export function ChartFrame({ wideHeight, narrowHeight, caption, children }: Props) {
  const heights = { "--wide-height": `${wideHeight}px`, "--narrow-height": `${narrowHeight}px` };
  return (
    <figure className="my-6">
      {caption ? <figcaption className="mb-2 font-semibold">{caption}</figcaption> : null}
      <div className="@container">
        <div
          className="h-(--narrow-height) overflow-hidden @xl:h-(--wide-height)"
          style={heights as CSSProperties}
        >
          <ResponsiveWrapper defaultWidth={serverWidth} defaultHeight={wideHeight}>
            {({ width }) => {
              const narrow = width < narrowBelow;
              return children({ width, height: narrow ? narrowHeight : wideHeight, narrow });
            }}
          </ResponsiveWrapper>
        </div>
      </div>
    </figure>
  );
}
