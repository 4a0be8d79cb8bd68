import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { TeamRatesView } from "~/features/rates/teams/team-rates-view";
import { teamRatesViewOf } from "~/features/rates/teams/team-rates-view.server";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/teams";

export const loader = memberLoader(({ scope, url }) =>
  loadRates(scope, url, (tx, view) => teamRatesViewOf(tx, view)),
);

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Teams against the whole, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function Page({ loaderData }: Route.ComponentProps) {
  const { frame, data } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates/teams" heading="Teams against the whole" parts={["per"]}>
      <TeamRatesView frame={frame} data={data} />
    </RatesFrame>
  );
}
