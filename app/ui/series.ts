export type SeriesNumber = 1 | 2 | 3 | 4 | 5 | 6 | 7 | 8;
export type MarkerShape = "circle" | "diamond" | "square" | "triangle";

const shapes: MarkerShape[] = ["circle", "diamond", "square", "triangle"];
/** Solid, then dashes that stay apart from the dots that mean "unstable". */
const dashes = [undefined, "9 3", "14 4", "9 3 3 3"];

/** How a series is drawn: colour, shape and dash together, so that none of them has to carry it alone. */
export function seriesLook(series: SeriesNumber) {
  const place = (series - 1) % 4;
  return {
    colour: `var(--color-series-${series})`,
    textColour: `var(--color-series-${series}-text)`,
    shape: shapes[place] ?? "circle",
    dash: dashes[place],
  };
}

/** The dots of an interval that rests on too few events. */
export const unstableDash = "1.5 5";

/** Outline of a marker around 0,0 with the given radius; a circle is drawn as one, see `Marker`. */
export function markerPath(shape: Exclude<MarkerShape, "circle">, radius: number): string {
  const r = radius * 1.2;
  if (shape === "diamond") return `M0 ${-r}L${r} 0L0 ${r}L${-r} 0Z`;
  if (shape === "square") return `M${-radius} ${-radius}H${radius}V${radius}H${-radius}Z`;
  return `M0 ${-r}L${r} ${r * 0.8}H${-r}Z`;
}
