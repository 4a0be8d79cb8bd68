import type { Tx } from "~db/client.server";
import { countView, type RatesView } from "../view.server";
import { searchWith } from "../views";
import { severityOf } from "./severity";
import { burdenPoints, equalBurdens, returnCurves } from "./severity-pictures";
import { severityTables } from "./severity-tables";
import { returnWords, severityNote, severitySentence } from "./severity-words";

/** Severity and burden of a view: words, pictures and tables. By season all seasons are looked at. */
export async function severityViewOf(tx: Tx, view: RatesView, url: URL) {
  const { filters, scopeName } = view;
  const counts = await countView(tx, view, { all: filters.by === "season" });
  const severity = severityOf(counts, filters);
  const { total, comparison, coverage } = severity;
  // Burden counts per hours, so the records behind it are those of hours, whatever the address says.
  const href = (changes: Record<string, string>) =>
    `/${tx.scope.slug}/rates/records${searchWith(url.search, { by: filters.by, per: "hours", ...changes })}`;
  const points = burdenPoints(severity);
  return {
    coverage,
    injuries: total.injuries ?? 0,
    ongoing: total.ongoing,
    sentence: severitySentence(severity, filters, scopeName),
    note: severityNote(severity, filters, tx.scope.today),
    points,
    equalBurdens: equalBurdens(points),
    curves: returnCurves(severity),
    comparison: comparison ? { words: returnWords(comparison) } : null,
    links: { all: href({}), ongoing: href({ lost: "ongoing" }) },
    tables: severityTables(severity, filters, href),
  };
}

export type SeverityView = Awaited<ReturnType<typeof severityViewOf>>;
