import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { SeverityView } from "~/features/rates/severity/severity-view";
import { severityViewOf } from "~/features/rates/severity/severity-view.server";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/severity";

export const loader = memberLoader(({ scope, url }) =>
  loadRates(scope, url, (tx, view) => severityViewOf(tx, view, url)),
);

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Severity and burden, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function Page({ loaderData }: Route.ComponentProps) {
  const { frame, data } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates/severity" heading="Severity and burden" parts={["by"]}>
      <SeverityView frame={frame} view={data} />
    </RatesFrame>
  );
}
