import { ComparisonsView } from "~/features/rates/comparisons/comparisons-view";
import { comparisonsViewOf } from "~/features/rates/comparisons/comparisons-view.server";
import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/comparisons";

export const loader = memberLoader(({ scope, url }) =>
  loadRates(scope, url, (tx, view) => comparisonsViewOf(tx, view, url)),
);

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Comparisons, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function Page({ loaderData }: Route.ComponentProps) {
  const { frame, data } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates/comparisons" heading="Comparisons" parts={["per"]}>
      <ComparisonsView frame={frame} data={data} />
    </RatesFrame>
  );
}
