import { type MarkerShape, markerPath } from "./series";

type Props = { shape: MarkerShape; colour: string; hollow?: boolean; radius?: number };

/** A spot, diamond, square or triangle around 0,0 of an SVG; hollow when it rests on too few events. */
export function Marker({ shape, colour, hollow = false, radius = 6 }: Props) {
  const paint = hollow
    ? { fill: "var(--color-chalk)", stroke: colour, strokeWidth: 2.5 }
    : { fill: colour, stroke: "none" };
  if (shape === "circle") return <circle r={radius} {...paint} />;
  return <path d={markerPath(shape, radius)} {...paint} />;
}
