import { useLocation } from "react-router";
import { formatDay } from "~/platform/days";
import { DescriptionList, Disclosure, Note, Region, TextLink } from "~/ui";
import { searchWith } from "../views";
import { comparisonWords, outcomeInWords, type Plan } from "./programme-plan";
import { type PlanAnswer, PlanForm } from "./programme-plan-form";
import type { ProgrammeView } from "./programme-view.server";

type Plans = NonNullable<ProgrammeView["plans"]>;

const byline = ({ recordedBy, recordedOn, recordedTime }: Plan) =>
  `${recordedBy ?? "a person who is no longer known"}, ${formatDay(recordedOn)}, ${recordedTime}`;

function PlanWords({ plan }: { plan: Plan }) {
  return (
    <DescriptionList
      items={[
        { term: "Primary outcome", detail: outcomeInWords(plan) },
        { term: "Comparison", detail: comparisonWords[plan.comparison] },
        { term: "Plan", detail: <p className="max-w-prose whitespace-pre-line">{plan.words}</p> },
        { term: "Recorded by", detail: byline(plan) },
      ]}
    />
  );
}

const timingWords = {
  before: "It was recorded before the season began.",
  during: "It was recorded during the season: what was known of the season by then may have shaped it.",
  after: "It was recorded after this season had ended: for this season it looks back, which is weaker.",
};

/** A plan that does not count for the season, with the way to its results. */
function OtherPlan({ plan, shown }: { plan: Plan; shown: boolean }) {
  const { search } = useLocation();
  return (
    <li className="border-t border-line py-3">
      <PlanWords plan={plan} />
      {shown ? null : (
        <TextLink to={searchWith(search, { plan: plan.id })}>Show the results under this plan</TextLink>
      )}
    </li>
  );
}

type Props = Plans & { mayPlan: boolean; formId: string; answer?: PlanAnswer | undefined };

/** What was written down before looking, by whom and when; what was changed later stands below and weakens it. */
export function ProgrammePlans({ counts, later, earlier, plan, timing, mayPlan, formId, answer }: Props) {
  const { search } = useLocation();
  const isOther = plan.id !== counts.id;
  return (
    <Region heading="The plan">
      {isOther ? (
        <Note kind="attention" title="These are results under another plan">
          <p>
            Recorded by {byline(plan)}. It is not the plan that counts for this season.{" "}
            <TextLink to={searchWith(search) || "?"}>Back to the plan that counts</TextLink>
          </p>
        </Note>
      ) : null}
      <PlanWords plan={counts} />
      {isOther ? null : <p className="mt-3 max-w-prose text-soft">{timingWords[timing]}</p>}
      {later.length > 0 ? (
        <Note kind="attention" title={later.length === 1 ? "One later plan" : `${later.length} later plans`}>
          <p>
            A plan that is changed after results could be seen weakens them: read what follows from it as an
            idea to test, not as an answer.
          </p>
        </Note>
      ) : null}
      {later.length > 0 ? (
        <ul className="mb-4 list-none p-0">
          {later.map((each) => (
            <OtherPlan key={each.id} plan={each} shown={each.id === plan.id} />
          ))}
        </ul>
      ) : null}
      {earlier.length > 0 ? (
        <Disclosure summary={earlier.length === 1 ? "One earlier plan" : `${earlier.length} earlier plans`}>
          <p className="max-w-prose text-soft">Replaced before this season began.</p>
          <ul className="list-none p-0">
            {earlier.map((each) => (
              <OtherPlan key={each.id} plan={each} shown={each.id === plan.id} />
            ))}
          </ul>
        </Disclosure>
      ) : null}
      {mayPlan ? (
        <div className="print:hidden">
          <Disclosure summary="Record a further plan" open={answer !== undefined}>
            <p className="mb-4 max-w-prose text-soft">
              For the coming season, or because this one should change. What was recorded stays; for a season
              that has begun, the plan recorded before it keeps counting.
            </p>
            <PlanForm formId={formId} answer={answer} begin={counts} />
          </Disclosure>
        </div>
      ) : null}
    </Region>
  );
}

/** In place of every result while no plan is recorded. */
export function NoPlan({ mayPlan, formId, answer }: Pick<Props, "mayPlan" | "formId" | "answer">) {
  return (
    <Region heading="First the plan">
      <p className="mb-6 max-w-prose text-lg">
        {mayPlan
          ? "Write down which injuries decide whether the warm-up works, and how you will look, before you look. Whoever chooses the question after the answer finds something every time. Until then this page shows no result."
          : "The medical lead first writes down which injuries decide whether the warm-up works, and how to look. Until then this page shows no result to anybody."}
      </p>
      {mayPlan ? <PlanForm formId={formId} answer={answer} /> : null}
    </Region>
  );
}
