import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/prevalence";

export const loader = memberLoader(({ scope, url }) => loadRates(scope, url, async () => ({})));

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Prevalence, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function Page({ loaderData }: Route.ComponentProps) {
  const { frame } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates/prevalence" heading="Prevalence">
      <p>Prevalence</p>
    </RatesFrame>
  );
}
