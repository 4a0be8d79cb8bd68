import type { ReactNode } from "react";
import { Marker } from "./marker";
import { formatTick, type NiceScale } from "./scale";
import { type SeriesNumber, seriesLook, unstableDash } from "./series";

export type RateEstimate = { estimate: number; lower: number; upper: number };

type Props = {
  /** Without one, `reason` says why. */
  rate: RateEstimate | null;
  reason?: string;
  /** The axis of the whole column, from `niceScale` of its largest upper limit. */
  scale: NiceScale;
  series?: SeriesNumber;
  /** Fewer events than a rate can stand on. */
  unstable?: boolean;
  /** Decimals of the words for screen readers; 1 unless given. */
  decimals?: number;
  /** What it measures, for screen readers: "per 1000 athlete-exposures". */
  unit?: string;
};

/** The axis lines reach through the padding of the cells, so that they join from row to row. */
const cellPadding = 11;

const place = (value: number, max: number) =>
  `${Math.min(100, Math.max(0, (value / max) * 100)).toFixed(2)}%`;

/** Where the word stands: under the spot, but never past an end of the axis. */
function wordAnchor(share: number) {
  if (share < 0.2) return { x: "0%", anchor: "start" } as const;
  if (share > 0.8) return { x: "100%", anchor: "end" } as const;
  return { x: `${(share * 100).toFixed(2)}%`, anchor: "middle" } as const;
}

/**
 * An estimate with its interval on the column's axis. Positions are percentages, so the picture is as wide as its
 * cell and needs no script. An interval past the end of the axis ends in an arrow.
 */
export function RateBar({
  rate,
  reason,
  scale,
  series = 1,
  unstable = false,
  decimals = 1,
  unit = "",
}: Props) {
  if (!rate) return <NoRate reason={reason ?? "not computed"} />;
  const { estimate, lower, upper } = rate;
  const { colour, textColour, shape, dash } = seriesLook(series);
  const words = [estimate, lower, upper].map((value) => value.toFixed(decimals));
  const label = `${words[0]} (${words[1]} to ${words[2]}) ${unit}`.trim() + (unstable ? ", unstable" : "");
  const height = unstable ? 38 : 24;
  const word = wordAnchor(estimate / scale.max);

  return (
    <svg
      role="img"
      aria-label={label}
      className="block w-full overflow-visible"
      height={height}
      style={{ fontVariantNumeric: "normal" }}
    >
      {scale.ticks.map((tick) => (
        <line
          key={tick}
          x1={place(tick, scale.max)}
          x2={place(tick, scale.max)}
          y1={-cellPadding}
          y2={height + cellPadding}
          stroke="var(--color-line)"
        />
      ))}
      <line
        x1={place(lower, scale.max)}
        x2={place(upper, scale.max)}
        y1="12"
        y2="12"
        stroke={colour}
        strokeWidth="2.5"
        strokeLinecap={unstable ? "round" : "butt"}
        strokeDasharray={unstable ? unstableDash : dash}
      />
      {upper > scale.max ? (
        <svg x="100%" y="12" overflow="visible" aria-hidden="true">
          <path d="M-7 -5L0 0L-7 5" fill="none" stroke={colour} strokeWidth="2.5" />
        </svg>
      ) : null}
      <svg x={place(estimate, scale.max)} y="12" overflow="visible" aria-hidden="true">
        <Marker shape={shape} colour={colour} hollow={unstable} radius={5.5} />
      </svg>
      {unstable ? (
        <text
          x={word.x}
          y="34"
          textAnchor={word.anchor}
          fontSize="14"
          fill={textColour}
          stroke="var(--color-chalk)"
          strokeWidth="4"
          paintOrder="stroke"
        >
          unstable
        </text>
      ) : null}
    </svg>
  );
}

/** A dash and why there is no figure. */
export function NoRate({ reason }: { reason: ReactNode }) {
  return (
    <span className="text-soft">
      <span aria-hidden="true">– </span>
      {reason}
    </span>
  );
}

/** The narrowest that a column of bars becomes, in px; its axis has to be readable there too. */
const narrowestAxis = 144;

/** From where to where a label lies on the narrowest axis: the first begins, the last ends at its line. */
function labelExtent(tick: number, max: number) {
  const width = [...formatTick(tick)].reduce((sum, sign) => sum + (/[.,]/.test(sign) ? 4 : 8), 0);
  const line = (tick / max) * narrowestAxis;
  const from = tick === 0 ? 0 : tick === max ? line - width : line - width / 2;
  return { from, to: from + width };
}

/** The ticks that are written: every one, or every second or third, as many as have room, always evenly apart. */
export function labelledTicks({ ticks, max }: NiceScale): number[] {
  for (let step = 1; step < ticks.length; step++) {
    const shown = ticks.filter((_, index) => index % step === 0);
    const extents = shown.map((tick) => labelExtent(tick, max));
    if (extents.every(({ from }, index) => index === 0 || from - (extents[index - 1]?.to ?? 0) >= 5))
      return shown;
  }
  return ticks.slice(0, 1);
}

/** The axis at the head of a column of `RateBar`s. */
export function RateAxis({ scale, label }: { scale: NiceScale; label: string }) {
  const shown = labelledTicks(scale);
  return (
    <>
      <span className="sr-only">{label}</span>
      <svg aria-hidden="true" className="mb-2 block w-full overflow-visible" height="20">
        {shown.map((tick, index) => (
          <text
            key={tick}
            x={place(tick, scale.max)}
            y="15"
            fontSize="14"
            fill="var(--color-soft)"
            textAnchor={index === 0 ? "start" : tick === scale.max ? "end" : "middle"}
          >
            {formatTick(tick)}
          </text>
        ))}
      </svg>
    </>
  );
}
