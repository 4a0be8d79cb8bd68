import type { Tx } from "~db/client.server";
import { decimalsFor } from "../figures";
import { countView, type RatesView } from "../view.server";
import { searchWith } from "../views";
import { bodyAreasOf } from "./body-areas";
import { bodyAreasTables, pictureRows } from "./body-areas-tables";
import { bodyAreasNote, bodyAreasSentence, sidesWords } from "./body-areas-words";

/** Body areas of a view: words, the two-sided picture and tables. */
export async function bodyAreasViewOf(tx: Tx, view: RatesView, url: URL) {
  const { filters, scopeName } = view;
  const areas = bodyAreasOf(await countView(tx, view), filters);
  const href = (by: "area" | "area-side", group: string | null) =>
    `/${tx.scope.slug}/rates/records${searchWith(url.search, { by, ...(group ? { group } : {}) })}`;
  // The knee unless the view is narrowed to another area.
  const compared = areas.areas.find(({ area }) => area === (filters.area === "any" ? "knee" : filters.area));
  const hasSides =
    Boolean(compared?.rate && compared.left && compared.right) && !["left", "right"].includes(filters.side);
  const rows = pictureRows(areas);
  return {
    coverage: areas.coverage,
    injuries: areas.total.injuries,
    sentence: bodyAreasSentence(areas, filters, scopeName),
    note: bodyAreasNote(areas, filters, tx.scope.today),
    sides: compared && hasSides ? sidesWords(compared) : null,
    picture: {
      rows,
      // Two at least: most sides are far below the largest.
      decimals: Math.max(
        2,
        decimalsFor(rows.flatMap(({ left, right }) => [left?.value ?? 0, right?.value ?? 0])),
      ),
    },
    href: href("area", null),
    tables: bodyAreasTables(areas, filters.per, href),
  };
}

export type BodyAreasView = Awaited<ReturnType<typeof bodyAreasViewOf>>;
