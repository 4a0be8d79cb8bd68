import { audit } from "~/platform/audit.server";
import type { Tx } from "~db/client.server";
import { isInView, numeratorRules, reasonLeftOut } from "../counting";
import { isOfKind, peopleOf, select } from "../selection";
import { countView, type RatesView } from "../view.server";
import { exposureBehind, figurePartOf, groupLabel, injuriesBehind } from "./records";
import { listNames } from "./records.queries.server";

/** The most sessions that one page lists; the file of the exposure import has no such end. */
const sessionsShown = 300;

const wordsOf = new Map<string, string>(numeratorRules.map(({ reason, words }) => [reason, words]));

/**
 * The records behind one figure: its injuries with their athletes, those left out with the reason, and the sessions
 * whose exposure stands under it. Athletes whom the person no longer covers are counted, never named. Audited.
 */
export async function recordsBehind(tx: Tx, view: RatesView, url: URL) {
  const { filters } = view;
  const counts = await countView(tx, view, { all: filters.by === "season" });
  const selection = select(counts, filters);
  const part = figurePartOf(url.searchParams, filters.by);
  const counted = injuriesBehind(part, counts, selection);
  const rules = { definition: filters.injuries, sessions: filters.sessions, unit: filters.per };
  const isWhose = peopleOf(counts, filters);
  const others = counts.injuries.flatMap((injury) => {
    const isAsked = isInView(injury, rules) && isWhose(injury) && isOfKind(injury, filters);
    const reason = isAsked ? reasonLeftOut(injury, rules) : null;
    return reason ? [{ injury, reason: wordsOf.get(reason) ?? reason }] : [];
  });
  const leftOut = others.filter(
    ({ injury }) => injuriesBehind(part, counts, { counted: [injury] }).length > 0,
  );
  const names = await listNames(
    tx,
    [...counted, ...leftOut.map(({ injury }) => injury)].map(({ athleteId }) => athleteId),
  );
  // Both lists name athletes.
  const count = counted.length + leftOut.length;
  await audit(tx, { action: "injury.list", fields: { count, purpose: "rates" } });
  const teams = new Map(counts.teams.map(({ id, name }) => [id, name]));
  const line = (injury: (typeof counted)[number], reason: string | null) => {
    const { id, onsetDay, bodyArea, side, contact, daysLost, ongoing, teamId, sessionId } = injury;
    const known = names.get(injury.athleteId);
    const name = known && (known.visible || sessionId) ? known.name : null;
    const team = (teamId && teams.get(teamId)) || null;
    return name ? [{ id, name, onsetDay, bodyArea, side, contact, daysLost, ongoing, team, reason }] : [];
  };
  const exposure = exposureBehind(part, counts, selection);
  return {
    group: groupLabel(part, counts),
    severity: part.severity,
    ongoing: part.ongoing,
    injuries: counted.length,
    lines: counted.flatMap((injury) => line(injury, null)),
    leftOut: leftOut.flatMap(({ injury, reason }) => line(injury, reason)),
    sessions: exposure.length,
    exposure: exposure
      .slice(0, sessionsShown)
      .map((row) => ({ ...row, team: teams.get(row.teamId) ?? "a team that is no longer there" })),
  };
}

export type Records = Awaited<ReturnType<typeof recordsBehind>>;
