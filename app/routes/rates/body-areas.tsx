import { BodyAreasView } from "~/features/rates/body-areas/body-areas-view";
import { bodyAreasViewOf } from "~/features/rates/body-areas/body-areas-view.server";
import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/body-areas";

export const loader = memberLoader(({ scope, url }) =>
  loadRates(scope, url, (tx, view) => bodyAreasViewOf(tx, view, url)),
);

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Body areas, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function Page({ loaderData }: Route.ComponentProps) {
  const { frame, data } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates/body-areas" heading="Body areas" parts={["per"]}>
      <BodyAreasView frame={frame} view={data} />
    </RatesFrame>
  );
}
