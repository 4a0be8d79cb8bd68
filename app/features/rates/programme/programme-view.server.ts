import { notFound } from "~/platform/errors";
import type { Tx } from "~db/client.server";
import type { RatesFilters } from "../filters";
import { select } from "../selection";
import type { TableData } from "../tables";
import { countView, type RatesView } from "../view.server";
import { findStarts } from "./programme.queries.server";
import { complianceViewOf } from "./programme-compliance-view.server";
import { injuriesViewOf } from "./programme-injuries-view.server";
import { narrowingOf, outcomeInWords, type Plan, plansOfSeason, timingOf } from "./programme-plan";
import { listPlans } from "./programme-plans.server";

/** Does the programme work: the plan first, then compliance, then injuries against exposure, then what it could show. */

/** The filters under which a plan is answered: people, sessions and definition of the address, injuries of the plan. */
export const filtersOf = (view: RatesView, plan: Plan): RatesFilters => ({
  ...view.filters,
  ...narrowingOf(plan),
  per: "aes",
});

/**
 * The plans of a view's season, and the one that the address asks for.
 * @throws DomainError not_found for a plan that the organisation has not recorded
 */
async function openPlans(tx: Tx, { period, viewing }: RatesView, url: URL) {
  const plans = plansOfSeason(await listPlans(tx), period);
  if (!plans) return null;
  const wanted = url.searchParams.get("plan");
  const known = [plans.counts, ...plans.later, ...plans.earlier];
  const plan = wanted ? known.find(({ id }) => id === wanted) : plans.counts;
  if (!plan) throw notFound("That plan");
  const season = { from: period.from, endsOn: viewing.season?.endsOn ?? period.to };
  return { ...plans, plan, timing: timingOf(plan, season) };
}

/** The view of the programme. Without a plan there is nothing in it but that: no result is looked at before. */
export async function programmeViewOf(tx: Tx, view: RatesView, url: URL) {
  const plans = await openPlans(tx, view, url);
  if (!plans) return { plans: null, result: null, tables: [] as TableData[] };
  const { plan } = plans;
  const filters = filtersOf(view, plan);
  const counts = await countView(tx, view);
  const selection = select(counts, filters);
  const outcome = outcomeInWords({ ...plan, caseDefinition: filters.injuries });
  const { teamWeeks, ...compliance } = await complianceViewOf(tx, view, filters, await findStarts(tx));
  const injuries = await injuriesViewOf(tx, { view, filters, counts, selection, outcome });
  const all = [...Object.values(injuries.tables), ...Object.values(compliance.tables), teamWeeks];
  return {
    plans,
    result: { filters, outcome, compliance, injuries },
    tables: all.filter((table): table is TableData => table !== null),
  };
}

export type ProgrammeView = Awaited<ReturnType<typeof programmeViewOf>>;
export type ProgrammeResult = NonNullable<ProgrammeView["result"]>;
