import type { ReactNode } from "react";

export type Spot = "filled" | "half" | "crossed" | "ring";

/** The shape alone, in the colour of the text around it. Use `SpotMark` unless the words stand right beside it. */
export function SpotShape({ spot, className = "h-[1.05em] w-[1.05em]" }: { spot: Spot; className?: string }) {
  return (
    <svg aria-hidden="true" viewBox="0 0 20 20" className={`inline-block shrink-0 ${className}`}>
      {spot === "filled" ? <circle cx="10" cy="10" r="9" fill="currentColor" /> : null}
      {spot === "filled" ? null : (
        <circle cx="10" cy="10" r="7.8" fill="none" stroke="currentColor" strokeWidth="2.4" />
      )}
      {spot === "half" ? <path d="M10 2.2a7.8 7.8 0 0 0 0 15.6z" fill="currentColor" /> : null}
      {spot === "crossed" ? <path d="M4.6 15.4 15.4 4.6" stroke="currentColor" strokeWidth="2.4" /> : null}
    </svg>
  );
}

type Props = { spot: Spot; children: ReactNode; detail?: ReactNode };

/** A state told by shape and word, never by colour. `detail` is a second, quieter line. */
export function SpotMark({ spot, children, detail }: Props) {
  return (
    <span className="inline-flex items-baseline gap-2.5">
      <SpotShape spot={spot} className="relative top-[0.14em] h-[1.05em] w-[1.05em]" />
      <span>
        {children}
        {detail ? <span className="block text-sm text-soft">{detail}</span> : null}
      </span>
    </span>
  );
}
