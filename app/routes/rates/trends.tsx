import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { TrendsView } from "~/features/rates/trends/trends-view";
import { trendsViewOf } from "~/features/rates/trends/trends-view.server";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/trends";

export const loader = memberLoader(({ scope, url }) =>
  loadRates(scope, url, (tx, view) => trendsViewOf(tx, view)),
);

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Trends, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function Page({ loaderData }: Route.ComponentProps) {
  const { frame, data } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates/trends" heading="Trends" parts={["per"]}>
      <TrendsView frame={frame} data={data} />
    </RatesFrame>
  );
}
