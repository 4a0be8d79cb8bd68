import type { PlotAxis } from "./plot";

/** Round figures of a logarithmic axis: 1, 2, 5 times a power of ten. */
function roundFigures(from: number, to: number): number[] {
  const figures: number[] = [];
  for (let power = Math.floor(from); power <= Math.ceil(to); power += 1)
    for (const lead of [1, 2, 5]) figures.push(Number(`${lead}e${power}`));
  return figures;
}

/**
 * A logarithmic axis around positive values, with a little room on both sides. Its ends need not be round, so that
 * no half of the picture stays empty; at least a factor of four lies between them. Values under 1e-9 or over 1e12
 * are drawn at the ends.
 */
export function logarithmicAxis(values: number[], perDecade: "all" | "tens" = "all"): PlotAxis {
  const known = values
    .filter((value) => Number.isFinite(value) && value > 0)
    .map((value) => Math.min(12, Math.max(-9, Math.log10(value))));
  const low = known.length > 0 ? Math.min(...known) : 0;
  const high = known.length > 0 ? Math.max(...known) : 1;
  const room = Math.max(0.12 * (high - low), 0.3 - (high - low) / 2, 0.15);
  const [from, to] = [low - room, high + room];
  const inside = roundFigures(from, to).filter((figure) => {
    const at = Math.log10(figure);
    return at >= from && at <= to;
  });
  const wide = to - from;
  // Over many powers of ten only every so many of them are written.
  const every = Math.max(1, Math.ceil(wide / 6));
  const powers = inside.filter((figure) => {
    const power = Math.log10(figure);
    return Math.abs(power - Math.round(power)) < 1e-9 && Math.round(power) % every === 0;
  });
  const few = wide > 2.6 || (perDecade === "tens" && wide > 1.4);
  return {
    min: 10 ** from,
    max: 10 ** to,
    ticks: few && powers.length > 1 ? powers : inside,
    logarithmic: true,
    grid: true,
  };
}

/** The piece of the line x * y = `product` inside two axes; null where it lies outside of them. In data units. */
export function productLine(product: number, x: PlotAxis, y: PlotAxis) {
  const from = Math.max(x.min, product / y.max);
  const to = Math.min(x.max, product / y.min);
  if (!(product > 0) || !Number.isFinite(product) || from >= to) return null;
  return { from: { x: from, y: product / from }, to: { x: to, y: product / to } };
}
