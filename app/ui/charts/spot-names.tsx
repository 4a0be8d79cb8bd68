import { textWidth } from "./chart-frame";
import type { NamedSpot, NamePlace } from "./name-places";

type Props = { spots: (NamedSpot & { colour: string })[]; places: (NamePlace | null)[] };

/** The names of spots where `placeNames` put them, each far one joined to its spot by a thin line. */
export function SpotNames({ spots, places }: Props) {
  return spots.map((spot, index) => {
    const place = places[index];
    if (!place) return null;
    const width = textWidth(spot.text) - 8;
    const left = place.x - { start: 0, middle: width / 2, end: width }[place.anchor];
    const end = Math.min(left + width, Math.max(left, spot.x));
    return (
      // biome-ignore lint/suspicious/noArrayIndexKey: two spots may have the same name
      <g key={`${index} ${spot.text}`}>
        {place.far ? (
          <line
            x1={spot.x}
            y1={spot.y}
            x2={end}
            y2={place.y > spot.y ? place.y - 13 : place.y + 3}
            stroke={spot.colour}
            strokeWidth={1.5}
          />
        ) : null}
        <text
          x={place.x}
          y={place.y}
          textAnchor={place.anchor}
          fontSize={15}
          fontWeight={spot.must ? 500 : 400}
          fill={spot.colour}
          stroke="var(--color-chalk)"
          strokeWidth={4}
          paintOrder="stroke"
        >
          {spot.text}
        </text>
      </g>
    );
  });
}
