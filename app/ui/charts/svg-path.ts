type Place = { x: number; y: number };

/** A line through places, in px. */
export const linePath = (places: Place[]) =>
  places.map(({ x, y }, index) => `${index ? "L" : "M"}${x} ${y}`).join("");

/** A line with a level piece per period: each place is the middle of one that is `slot` px wide. */
export const levelPath = (places: Place[], slot: number) =>
  linePath(
    places.flatMap(({ x, y }) => [
      { x: x - slot / 2, y },
      { x: x + slot / 2, y },
    ]),
  );
