import type { ReactNode } from "react";
import { redirect, useNavigation, useSearchParams } from "react-router";
import { z } from "zod";
import { formObject } from "~/features/accounts/accounts.schema";
import {
  readAthleteAvailability,
  setAthleteAvailability,
} from "~/features/availability/athlete-availability.server";
import { availabilityChangeSchema } from "~/features/availability/availability.schema";
import { AvailabilityFields } from "~/features/availability/components/availability-fields";
import { AvailabilityMark } from "~/features/availability/components/availability-mark";
import { limitWords } from "~/features/availability/state-words";
import { availabilityWords } from "~/features/vocabulary";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import {
  Button,
  ChoiceButtons,
  Disclosure,
  Form,
  FormActions,
  type FormErrors,
  type FormValues,
  Lede,
  Note,
  Page,
  PageHeading,
  Region,
  TextLink,
} from "~/ui";
import type { Route } from "./+types/availability";

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Availability${loaderData ? ` of ${loaderData.view.athlete.name}` : ""} - Haleside` },
];

const causeSchema = z.object({ cause: z.enum(["illness", "other"], "Choose the reason.") });
const reasonSchema = z.object({ reason: z.uuid() }).transform(({ reason }) => ({ reasonId: reason }));

export const loader = memberLoader(async ({ scope, id }) => ({
  view: await readAthleteAvailability(scope, id("athlete")),
  base: `/${scope.slug}`,
}));

export const action = memberAction(async ({ scope, form, id }) => {
  const athleteId = id("athlete");
  const answers = formObject(form);
  const target = form.has("reason") ? reasonSchema.parse(answers) : causeSchema.parse(answers);
  const change = availabilityChangeSchema.parse(answers);
  await setAthleteAvailability(scope, athleteId, target, change);
  return redirect(`/${scope.slug}/roster/${athleteId}/availability?saved=yes`);
});

type View = Route.ComponentProps["loaderData"]["view"];
type Reason = View["reasons"][number];
type Refused = { errors: FormErrors; values: FormValues } | null | undefined;

const causeWords: Record<string, string> = {
  injury: "An injury",
  illness: "An illness",
  coach_report: "A coach's report",
  other: "Another reason",
};

function Sentence({ view }: { view: View }) {
  const { athlete, state } = view;
  const limits = state ? limitWords(state) : "";
  return (
    <Lede
      note={
        state?.asOf
          ? `As of ${formatDay(state.asOf.day)}, ${state.asOf.time}. Of all reasons the most restrictive counts.`
          : "Nothing was ever entered: nothing limits the athlete."
      }
    >
      {athlete.name} is <strong>{availabilityWords[state?.state ?? "full"]}</strong> today
      {limits ? `: ${limits}` : ""}
      {state?.expectedOn ? `, full availability expected on ${formatDay(state.expectedOn, "long")}` : ""}.
    </Lede>
  );
}

export default function Availability({ loaderData, actionData }: Route.ComponentProps) {
  const { view, base } = loaderData;
  const [params] = useSearchParams();
  const target = actionData?.values.reason;
  return (
    <Page width="text">
      <PageHeading above={<TextLink to={`${base}/roster/${view.athlete.id}`}>{view.athlete.name}</TextLink>}>
        Availability
      </PageHeading>
      {params.has("saved") && !actionData ? (
        <Note kind="settled" role="status">
          <p>The availability is changed.</p>
        </Note>
      ) : null}
      <Sentence view={view} />
      {view.reasons.length > 0 ? (
        <Region heading="Reasons">
          {view.reasons.map((reason) => (
            <ReasonCourse
              key={reason.id}
              reason={reason}
              today={view.today}
              base={base}
              refused={target === reason.id ? actionData : null}
            />
          ))}
        </Region>
      ) : null}
      <Region heading="Another reason than an injury">
        <Disclosure summary="Enter an illness or another reason" open={Boolean(actionData && !target)}>
          <Change today={view.today} refused={actionData && !target ? actionData : null} idPrefix="new">
            <ChoiceButtons
              name="cause"
              legend="Reason"
              help="Coaches never see it."
              choices={[
                { value: "illness", label: "Illness" },
                { value: "other", label: "Another reason" },
              ]}
            />
          </Change>
        </Disclosure>
        <p className="max-w-prose text-soft">
          An injury is logged with its own form:{" "}
          <TextLink to={`${base}/injuries/new?athlete=${view.athlete.id}`}>log an injury</TextLink>.
        </p>
      </Region>
    </Page>
  );
}

function ReasonCourse({
  reason,
  today,
  base,
  refused,
}: {
  reason: Reason;
  today: string;
  base: string;
  refused: Refused;
}) {
  return (
    <section className="border-0 border-b border-line py-3">
      <h3>
        {causeWords[reason.cause] ?? reason.cause}
        {reason.holds ? "" : ", ended"}
      </h3>
      <ul>
        {reason.course.map((part) => (
          <li key={part.fromDay} className="flex flex-wrap justify-between gap-x-6 py-1">
            <AvailabilityMark state={part.state} limits={part} expectedOn={part.expectedOn} />
            <span>
              from {formatDay(part.fromDay)}
              {part.toDay ? ` to ${formatDay(part.toDay)}` : " on"}
            </span>
          </li>
        ))}
      </ul>
      {reason.lastSet ? (
        <p className="text-sm text-soft">
          Last set {reason.lastSet.by ? `by ${reason.lastSet.by}, ` : ""}
          {formatDay(reason.lastSet.day)}, {reason.lastSet.time}
        </p>
      ) : null}
      {reason.injuryId ? (
        <TextLink to={`${base}/injuries/${reason.injuryId}#availability`}>
          Change it on the injury's page
        </TextLink>
      ) : (
        <Disclosure summary="Change what they may do" open={Boolean(refused)}>
          {reason.reportId && reason.holds ? (
            <p className="mb-4">
              <TextLink to={`${base}/coach-reports/${reason.reportId}`}>
                Deal with the coach's report first
              </TextLink>{" "}
              if it still waits.
            </p>
          ) : null}
          <Change today={today} refused={refused} idPrefix={reason.id}>
            <input type="hidden" name="reason" value={reason.id} />
          </Change>
        </Disclosure>
      )}
    </section>
  );
}

type ChangeProps = { today: string; refused: Refused; idPrefix: string; children: ReactNode };

function Change({ today, refused, idPrefix, children }: ChangeProps) {
  const busy = useNavigation().state !== "idle";
  return (
    <Form {...refused} idPrefix={idPrefix}>
      {children}
      <AvailabilityFields today={today} />
      <FormActions>
        <Button look="primary" busy={busy}>
          Save the availability
        </Button>
      </FormActions>
    </Form>
  );
}
