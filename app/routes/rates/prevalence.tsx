import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { PrevalenceView } from "~/features/rates/prevalence/prevalence-view";
import { prevalenceViewOf } from "~/features/rates/prevalence/prevalence-view.server";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/prevalence";

export const loader = memberLoader(({ scope, url }) =>
  loadRates(scope, url, (tx, view) => prevalenceViewOf(tx, view, url)),
);

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Prevalence, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function Page({ loaderData }: Route.ComponentProps) {
  const { frame, data } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame
      frame={frame}
      current="rates/prevalence"
      heading="Prevalence"
      parts={["by"]}
      shows="athletes not fully available on a day"
    >
      <PrevalenceView frame={frame} view={data} />
    </RatesFrame>
  );
}
