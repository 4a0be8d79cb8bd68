import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { RecentWeeksView } from "~/features/rates/recent-weeks/recent-weeks-view";
import { recentWeeksViewOf } from "~/features/rates/recent-weeks/recent-weeks-view.server";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/recent-weeks";

export const loader = memberLoader(({ scope, url }) =>
  loadRates(scope, url, (tx, view) => recentWeeksViewOf(tx, view)),
);

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Recent weeks, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function Page({ loaderData }: Route.ComponentProps) {
  const { frame, data } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates/recent-weeks" heading="Recent weeks" parts={["per"]}>
      <RecentWeeksView frame={frame} data={data} />
    </RatesFrame>
  );
}
