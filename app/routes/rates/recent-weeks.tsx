import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/recent-weeks";

export const loader = memberLoader(({ scope, url }) => loadRates(scope, url, async () => ({})));

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Recent weeks, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function Page({ loaderData }: Route.ComponentProps) {
  const { frame } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates/recent-weeks" heading="Recent weeks">
      <p>Recent weeks</p>
    </RatesFrame>
  );
}
