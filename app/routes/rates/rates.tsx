import { ClinicalRates } from "~/features/rates/components/clinical-rates";
import { ComplianceBeside } from "~/features/rates/components/compliance-beside";
import { FixedRates } from "~/features/rates/components/fixed-rates";
import { parseRatesQuery } from "~/features/rates/rates.schema";
import { fixedTablesOf, incidenceOf, seesRates, warmUpsBeside } from "~/features/rates/rates.server";
import { memberLoader } from "~/middleware/handlers.server";
import { ButtonLink, EmptyState, Page, VisuallyHidden } from "~/ui";
import { read } from "~db/client.server";
import type { Route } from "./+types/rates";

export const loader = memberLoader(async ({ scope, url }) => {
  const frame = { slug: scope.slug, organisation: scope.organisationName };
  if (!seesRates(scope)) {
    const { viewing, period, fixed } = await fixedTablesOf(scope, url);
    const warmUps = period ? await read(scope, (tx) => warmUpsBeside(tx, viewing, period)) : [];
    return { ...frame, csvHref: csvHref(scope.slug, url, ["season"]), period, fixed, warmUps };
  }
  const filters = parseRatesQuery(url.searchParams);
  const { incidence, warmUps } = await read(scope, async (tx) => {
    const found = await incidenceOf(tx, url, filters);
    const { viewing, period } = found;
    return { incidence: found, warmUps: period ? await warmUpsBeside(tx, viewing, period) : [] };
  });
  const { viewing, period } = incidence;
  const scopeName = viewing.team?.name ?? (scope.teams === "all" ? scope.organisationName : "My teams");
  return {
    ...frame,
    csvHref: csvHref(scope.slug, url, ["season", "team", "injuries", "sessions", "by", "per"]),
    injuriesHref: `/${scope.slug}/injuries${searchOf(url, ["season", "team"])}`,
    period,
    filters,
    incidence,
    warmUps,
    scopeName,
  };
});

/** The parts of the address that another page understands. */
function searchOf(url: URL, names: readonly string[]) {
  const kept = [...url.searchParams].filter(([name]) => names.includes(name));
  return kept.length > 0 ? `?${new URLSearchParams(kept)}` : "";
}

const csvHref = (slug: string, url: URL, names: readonly string[]) =>
  `/${slug}/rates.csv${searchOf(url, names)}`;

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: loaderData ? `Rates, ${loaderData.organisation} - Haleside` : "Rates - Haleside" },
];

export default function RatesPage({ loaderData }: Route.ComponentProps) {
  return (
    <Page>
      <VisuallyHidden>
        <h1>Rates</h1>
      </VisuallyHidden>
      <Content {...loaderData} />
      {loaderData.warmUps.length > 0 ? <ComplianceBeside teams={loaderData.warmUps} /> : null}
    </Page>
  );
}

function Content(props: Route.ComponentProps["loaderData"]) {
  const { period, csvHref: csv, slug } = props;
  if (!period) {
    return (
      <EmptyState
        title="Rates need a season"
        actions={<ButtonLink to={`/${slug}/settings/seasons`}>Seasons</ButtonLink>}
      >
        <p>
          Injuries and exposure are counted over a season. Once your administrator has set one, and sessions
          are recorded or imported, this page shows how often athletes are injured, with what certainty.
        </p>
      </EmptyState>
    );
  }
  if ("fixed" in props) {
    if (!props.fixed) return null;
    return (
      <FixedRates {...props.fixed} season={period.season} csvHref={csv} scopeName={props.organisation} />
    );
  }
  const { incidence, filters, scopeName, injuriesHref } = props;
  const { rates } = incidence;
  if (!rates) return null;
  return (
    <ClinicalRates
      incidence={{ ...incidence, rates, period }}
      {...{ filters, scopeName, injuriesHref }}
      csvHref={csv}
    />
  );
}
