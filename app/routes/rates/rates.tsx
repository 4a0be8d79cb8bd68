import { ClinicalRates } from "~/features/rates/components/clinical-rates";
import { ComplianceBeside } from "~/features/rates/components/compliance-beside";
import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { FixedRates } from "~/features/rates/fixed/fixed-rates";
import { fixedTablesOf, incidenceOf, seesRates, warmUpsBeside } from "~/features/rates/rates.server";
import { loadRates } from "~/features/rates/view.server";
import { searchWith } from "~/features/rates/views";
import { memberLoader } from "~/middleware/handlers.server";
import { Page, VisuallyHidden } from "~/ui";
import { read } from "~db/client.server";
import type { Route } from "./+types/rates";

export const loader = memberLoader(async ({ scope, url }) => {
  const { slug, organisationName: organisation } = scope;
  if (seesRates(scope)) {
    const clinical = await loadRates(scope, url, async (tx, view) => ({
      incidence: await incidenceOf(tx, view),
      warmUps: await warmUpsBeside(tx, view.viewing, view.period),
    }));
    return { organisation, clinical, fixed: null };
  }
  const { viewing, period, fixed } = await fixedTablesOf(scope, url);
  if (!period || !fixed) return { organisation, clinical: null, fixed: null };
  const warmUps = await read(scope, (tx) => warmUpsBeside(tx, viewing, period));
  const csvHref = `/${slug}/rates.csv${seasonOnly(url)}`;
  return { organisation, clinical: null, fixed: { ...fixed, season: period.season, csvHref, warmUps } };
});

/** The fixed tables know the season alone. */
function seasonOnly(url: URL) {
  const season = url.searchParams.get("season");
  return season ? searchWith("", { season }) : "";
}

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: loaderData ? `Rates, ${loaderData.organisation} - Haleside` : "Rates - Haleside" },
];

export default function RatesPage({ loaderData }: Route.ComponentProps) {
  const { clinical, fixed, organisation } = loaderData;
  if (fixed) {
    return (
      <Page>
        <VisuallyHidden>
          <h1>Rates</h1>
        </VisuallyHidden>
        <FixedRates {...fixed} scopeName={organisation} />
        <ComplianceBeside teams={fixed.warmUps} />
      </Page>
    );
  }
  if (!clinical?.frame) return <NoSeason />;
  const { frame, data } = clinical;
  return (
    <RatesFrame frame={frame} current="rates" heading="Rates" parts={["by", "per"]}>
      <ClinicalRates frame={frame} incidence={data.incidence} />
      <ComplianceBeside teams={data.warmUps} />
    </RatesFrame>
  );
}
