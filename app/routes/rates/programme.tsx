import { randomUUID } from "node:crypto";
import { redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { may } from "~/features/accounts/permissions";
import { NoSeason } from "~/features/rates/components/no-season";
import { RatesFrame } from "~/features/rates/components/rates-frame";
import { planSchema } from "~/features/rates/programme/programme.schema";
import { NoPlan, ProgrammePlans } from "~/features/rates/programme/programme-plans";
import { recordPlan } from "~/features/rates/programme/programme-plans.server";
import { ProgrammeResults } from "~/features/rates/programme/programme-view";
import { programmeViewOf } from "~/features/rates/programme/programme-view.server";
import { loadRates } from "~/features/rates/view.server";
import { searchWith } from "~/features/rates/views";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import type { Route } from "./+types/programme";

export const loader = memberLoader(async ({ scope, url }) => {
  const { frame, data } = await loadRates(scope, url, async (tx, view) => {
    const { plans, result } = await programmeViewOf(tx, view, url);
    return { plans, result };
  });
  // The words above the page are those of what it counts: the plan's injuries, whatever the address narrows them to.
  const shown = frame && data?.result ? { ...frame, filters: data.result.filters } : frame;
  return { frame: shown, data, mayPlan: may(scope.roles, "rates.plan"), formId: randomUUID() };
});

export const action = memberAction(async ({ scope, form, url }) => {
  await recordPlan(scope, planSchema.parse(formObject(form)));
  return redirect(`/${scope.slug}/rates/programme${searchWith(url.search)}`);
});

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `The warm-up programme, ${loaderData?.frame?.organisation ?? "rates"} - Haleside` },
];

export default function ProgrammePage({ loaderData, actionData }: Route.ComponentProps) {
  const { frame, data, mayPlan, formId } = loaderData;
  if (!frame || !data) return <NoSeason />;
  const form = { mayPlan, formId, answer: actionData };
  const { plans, result } = data;
  return (
    <RatesFrame frame={frame} current="rates/programme" heading="The warm-up programme" narrow={false}>
      {plans && result ? (
        <>
          <ProgrammePlans {...plans} {...form} />
          <ProgrammeResults slug={frame.slug} plan={plans.plan} result={result} />
        </>
      ) : (
        <NoPlan {...form} />
      )}
    </RatesFrame>
  );
}
