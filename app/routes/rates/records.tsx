import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { recordsBehind } from "~/features/rates/records/records.server";
import { RecordsBehind } from "~/features/rates/records/records-behind";
import { loadRates } from "~/features/rates/view.server";
import { memberLoader } from "~/middleware/handlers.server";
import { write } from "~db/client.server";
import type { Route } from "./+types/records";

export const loader = memberLoader(({ scope, url }) =>
  loadRates(scope, url, (tx, view) => recordsBehind(tx, view, url), write),
);

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `The records behind a figure, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function RecordsPage({ loaderData }: Route.ComponentProps) {
  const { frame, data } = loaderData;
  if (!frame) return <NoSeason />;
  return (
    <RatesFrame frame={frame} current="rates" heading="The records behind a figure">
      <RecordsBehind frame={frame} records={data} />
    </RatesFrame>
  );
}
