import { textWidth } from "./chart-frame";

export type Box = { left: number; right: number; top: number; bottom: number };

/** A spot that wants its name beside it. `must`: it is named even if its name has to stand away from it. */
export type NamedSpot = { x: number; y: number; radius: number; text: string; must: boolean };

/** Where a name stands: its base line, and whether it is so far off that a line should lead to it. */
export type NamePlace = { x: number; y: number; anchor: "start" | "middle" | "end"; far: boolean };

const height = 17;
/** From the middle of a text to its base line. */
const drop = 5;
const step = 6;

const collides = (a: Box, b: Box) =>
  a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom;

const within = (box: Box, bounds: Box) =>
  box.left >= bounds.left &&
  box.right <= bounds.right &&
  box.top >= bounds.top &&
  box.bottom <= bounds.bottom;

function boxAt(centreX: number, centreY: number, width: number): Box {
  return {
    left: centreX - width / 2,
    right: centreX + width / 2,
    top: centreY - height / 2,
    bottom: centreY + height / 2,
  };
}

/** Right, left, above, below, then the corners. */
function besides({ x, y, radius }: NamedSpot, width: number): Box[] {
  const [across, up] = [radius + 5 + width / 2, radius + 2 + height / 2];
  return [
    boxAt(x + across, y, width),
    boxAt(x - across, y, width),
    boxAt(x, y - up, width),
    boxAt(x, y + up, width),
    boxAt(x + across - 4, y - up, width),
    boxAt(x + across - 4, y + up, width),
    boxAt(x - across + 4, y - up, width),
    boxAt(x - across + 4, y + up, width),
  ];
}

/** The free place nearest to a spot, at most `reach` px away. */
function nearest(
  spot: NamedSpot,
  width: number,
  { bounds, reach, free }: { bounds: Box; reach: number; free: (box: Box) => boolean },
): Box | null {
  let best: Box | null = null;
  let distance = reach;
  for (let y = bounds.top + height / 2; y <= bounds.bottom - height / 2; y += step) {
    for (let x = bounds.left + width / 2; x <= bounds.right - width / 2; x += step) {
      // Up and down counts more: a name on the spot's own line is found sooner.
      const off = Math.hypot(Math.max(0, Math.abs(x - spot.x) - width / 2), (y - spot.y) * 1.3);
      if (off >= distance) continue;
      const box = boxAt(x, y, width);
      if (free(box)) [best, distance] = [box, off];
    }
  }
  return best;
}

/** The spots as seen by one name: one that may be left out keeps clear of other spots, or it could be read as theirs. */
function spotBoxes(spots: NamedSpot[], own: NamedSpot): Box[] {
  return spots.map((spot) => {
    const reach = spot.radius + (spot === own || own.must ? 0 : 5);
    return { left: spot.x - reach, right: spot.x + reach, top: spot.y - reach, bottom: spot.y + reach };
  });
}

/** How far a box is from the edge of a spot, in px. */
function distanceTo(box: Box, { x, y, radius }: NamedSpot): number {
  const across = Math.max(box.left - x, x - box.right, 0);
  const along = Math.max(box.top - y, y - box.bottom, 0);
  return Math.hypot(across, along) - radius;
}

/** Whether a reader would take a name for that of this spot and no other's. */
const isClearlyOf = (own: NamedSpot, spots: NamedSpot[]) => (box: Box) =>
  spots.every((spot) => spot === own || distanceTo(box, spot) >= distanceTo(box, own) + 5);

/** The side of the words that is next to the spot keeps its place, since how wide they are is only estimated. */
function anchored({ left, right }: Box, { x }: NamedSpot): Pick<NamePlace, "x" | "anchor"> {
  if (right <= x) return { x: right - 2, anchor: "end" };
  if (left >= x) return { x: left + 2, anchor: "start" };
  const middle = (left + right) / 2;
  if (middle < x - 5) return { x: right - 2, anchor: "end" };
  return middle > x + 5 ? { x: left + 2, anchor: "start" } : { x: middle, anchor: "middle" };
}

/**
 * Places names beside their spots so that none covers another name, a spot or one of `taken`, and none leaves
 * `bounds`; all in px. Those that must be named come first, in their order, up to `reach` away from their spots. A name
 * without a place is null: the table has it.
 */
export function placeNames(
  spots: NamedSpot[],
  bounds: Box,
  taken: Box[] = [],
  reach = Number.POSITIVE_INFINITY,
): (NamePlace | null)[] {
  const places: (NamePlace | null)[] = spots.map(() => null);
  const used = [...taken];
  const order = spots.map((_, index) => index);
  order.sort((a, b) => Number(spots[b]?.must) - Number(spots[a]?.must));
  for (const index of order) {
    const spot = spots[index];
    if (!spot || spot.text === "") continue;
    const width = textWidth(spot.text);
    const others = [...used, ...spotBoxes(spots, spot)];
    const free = (box: Box) => within(box, bounds) && !others.some((other) => collides(box, other));
    const clear = isClearlyOf(spot, spots);
    const beside = besides(spot, width).find((box) => free(box) && clear(box));
    const box = beside ?? (spot.must ? nearest(spot, width, { bounds, reach, free }) : null);
    if (!box) continue;
    used.push(box);
    places[index] = { ...anchored(box, spot), y: (box.top + box.bottom) / 2 + drop, far: !beside };
  }
  return places;
}
