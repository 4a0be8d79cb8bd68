import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { CoverageView } from "~/features/rates/coverage/coverage-view";
import { coverageViewOf } from "~/features/rates/coverage/coverage-view.server";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/coverage";

export const loader = memberLoader(({ scope, url }) => loadRates(scope, url, coverageViewOf));

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Coverage, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function CoveragePage({ loaderData }: Route.ComponentProps) {
  const { frame, data } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates/coverage" heading="Coverage">
      <CoverageView {...data} slug={frame.slug} />
    </RatesFrame>
  );
}
