import { useState } from "react";
import { Link, redirect, useNavigation, useSearchParams } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { availabilityChangeSchema } from "~/features/availability/availability.schema";
import { AvailabilityFields } from "~/features/availability/components/availability-fields";
import { AvailabilityMark } from "~/features/availability/components/availability-mark";
import { CautionNotes } from "~/features/injuries/components/caution-notes";
import { InjuryFacts, type InjuryPage } from "~/features/injuries/components/injury-facts";
import { InjuryHistory, Signature } from "~/features/injuries/components/injury-history";
import { RelationNote } from "~/features/injuries/components/relation-note";
import { addNote, changeInjuryAvailability, withdrawInjury } from "~/features/injuries/edit-injury.server";
import { gapAnchor } from "~/features/injuries/gaps";
import { noteSchema, withdrawReasons, withdrawSchema } from "~/features/injuries/injuries.schema";
import { readInjury } from "~/features/injuries/read-injury.server";
import { severityWords, siteWords, timeLossWords, withdrawWords } from "~/features/injuries/summary";
import { availabilityWords, sentenceCase } from "~/features/vocabulary";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import {
  Button,
  ButtonLink,
  Checkbox,
  ChoiceButtons,
  ConfirmButton,
  Disclosure,
  Field,
  Form,
  FormActions,
  type FormErrors,
  type FormValues,
  Lede,
  LinkRow,
  Note,
  Page,
  PageHeading,
  Region,
  TextArea,
  TextLink,
} from "~/ui";
import type { Route } from "./+types/injury";

export const meta = ({ loaderData }: Route.MetaArgs) => [
  {
    title: loaderData
      ? `${loaderData.injury.name}, ${siteWords(loaderData.injury.revision.bodyArea, loaderData.injury.revision.side)} - Haleside`
      : "Injury - Haleside",
  },
];

export const loader = memberLoader(async ({ scope, id }) => ({
  injury: await readInjury(scope, id("injury")),
  base: `/${scope.slug}`,
}));

export const action = memberAction(async ({ scope, form, id }) => {
  const injuryId = id("injury");
  const page = `/${scope.slug}/injuries/${injuryId}`;
  const answers = formObject(form);
  switch (form.get("intent")) {
    case "note":
      await addNote(scope, injuryId, noteSchema.parse(answers));
      return redirect(`${page}?saved=note`);
    case "withdraw":
      await withdrawInjury(scope, injuryId, withdrawSchema.parse(answers));
      return redirect(`${page}?saved=withdrawn`);
    default:
      await changeInjuryAvailability(scope, injuryId, availabilityChangeSchema.parse(answers), {
        close: form.get("close") === "yes",
      });
      return redirect(`${page}?saved=availability`);
  }
});

const savedWords: Record<string, string> = {
  new: "The injury is saved.",
  edit: "The changes are saved. What stood before is in the history.",
  note: "The note is added.",
  availability: "The availability is changed.",
  withdrawn: "The record is withdrawn. It counts nowhere and can still be read.",
};

export default function Injury({ loaderData, actionData }: Route.ComponentProps) {
  const { injury, base } = loaderData;
  const [params] = useSearchParams();
  const saved = params.get("saved") ?? "";
  const here = `${base}/injuries/${injury.id}`;
  const { revision } = injury;
  const intent = typeof actionData?.values?.intent === "string" ? actionData.values.intent : "";
  const refusedOf = (name: string) => (intent === name ? actionData : undefined);
  return (
    <Page>
      <PageHeading
        above={<TextLink to={`${base}/injuries`}>Injuries</TextLink>}
        below={`${sentenceCase(siteWords(revision.bodyArea, revision.side))}, ${formatDay(revision.onsetDay)}${injury.teams.length > 0 ? `, ${injury.teams.join(", ")}` : ""}`}
        actions={
          revision.withdrawn ? null : (
            <>
              <ButtonLink to={`${here}/notice`} look="primary">
                Tell the guardian
              </ButtonLink>
              <ButtonLink to={`${here}/edit`}>Complete or correct</ButtonLink>
            </>
          )
        }
      >
        {injury.name}
      </PageHeading>
      {savedWords[saved] && !actionData ? (
        <Note kind="settled" role="status">
          <p>{savedWords[saved]}</p>
        </Note>
      ) : null}
      {revision.withdrawn ? (
        <Note kind="attention" title="This record was made in error and is withdrawn">
          <p>It is kept and counted nowhere.</p>
        </Note>
      ) : (
        <Standing injury={injury} base={base} fresh={saved === "new"} />
      )}
      <Lede>{injury.summary}</Lede>
      {injury.gaps.length > 0 && !revision.withdrawn ? <Gaps gaps={injury.gaps} here={here} /> : null}
      <Course injury={injury} refused={refusedOf("availability")} />
      <Region heading="What is known">
        <InjuryFacts injury={injury} />
        <LinkRow>
          {revision.withdrawn ? null : (
            <TextLink to={`${here}/edit`}>Complete or correct the record</TextLink>
          )}
          <TextLink to={`${base}/roster/${injury.athleteId}`}>Open {injury.name}</TextLink>
        </LinkRow>
      </Region>
      <Notes injury={injury} refused={refusedOf("note")} />
      <Region heading="History">
        <InjuryHistory history={injury.history} />
        {revision.withdrawn ? null : <Withdraw injury={injury} refused={refusedOf("withdraw")} />}
      </Region>
    </Page>
  );
}

type Refused = { errors: FormErrors; values: FormValues } | null | undefined;

/** What presses now: the cautions while the athlete is not fully available, the relation to earlier injuries. */
function Standing({ injury, base, fresh }: { injury: InjuryPage; base: string; fresh: boolean }) {
  const current = injury.own.state !== "full" || fresh;
  return (
    <>
      {current ? (
        <CautionNotes
          cautions={injury.cautions}
          reasons={injury.own.state === "unavailable" ? injury.safeDefault : []}
          saved
        />
      ) : null}
      {fresh && injury.urgency === "urgent" ? (
        <Note kind="attention" title="Phone the guardian before the child leaves">
          <p>
            Say what happened and what to watch for, then{" "}
            <TextLink to={`${base}/injuries/${injury.id}/notice`}>log the call and send the notice</TextLink>.
            The e-mail only confirms.
          </p>
        </Note>
      ) : null}
      <RelationNote
        relation={injury.relation}
        confirmed={injury.revision.subsequence}
        base={`${base}/injuries`}
      />
    </>
  );
}

function Gaps({ gaps, here }: { gaps: InjuryPage["gaps"]; here: string }) {
  return (
    <Region heading={gaps.length === 1 ? "One detail is missing" : `${gaps.length} details are missing`}>
      <ul className="flex max-w-prose flex-wrap gap-x-6">
        {gaps.map(({ field, label }) => (
          <li key={field}>
            <Link
              to={field === "availability" ? "#availability" : `${here}/edit#${gapAnchor(field)}`}
              className="inline-flex min-h-target items-center text-lagoon underline underline-offset-4"
            >
              {sentenceCase(label)}
            </Link>
          </li>
        ))}
      </ul>
    </Region>
  );
}

function Course({ injury, refused }: { injury: InjuryPage; refused: Refused }) {
  const busy = useNavigation().state !== "idle";
  const { own, whole, course, timeLoss, severity, changes, revision } = injury;
  return (
    <Region heading="Availability" id="availability">
      <p>
        <AvailabilityMark state={own.state} limits={own} expectedOn={own.expectedOn} />
      </p>
      <p className="mt-2 max-w-prose">
        Time loss: <strong>{timeLossWords(timeLoss)}</strong>
        {timeLoss.ongoing
          ? `, counted from the day after the onset to today${timeLoss.days > 0 ? `; severity so far: ${severityWords[severity]}` : ""}.`
          : `, ${severityWords[severity]}.`}
        {whole === own.state
          ? ""
          : ` For all reasons together ${injury.name} is ${availabilityWords[whole]} today.`}
      </p>
      {course.length > 0 ? (
        <ul className="my-4 max-w-3xl border-0 border-t border-line">
          {course.map((part) => (
            <li
              key={part.fromDay}
              className="flex flex-wrap items-baseline justify-between gap-x-6 border-0 border-b border-line py-2"
            >
              <AvailabilityMark state={part.state} limits={part} expectedOn={part.expectedOn} />
              <span>
                from {formatDay(part.fromDay)}
                {part.toDay ? ` to ${formatDay(part.toDay)}` : " on"}
              </span>
            </li>
          ))}
        </ul>
      ) : (
        <p className="my-4 text-soft">Nothing is entered for this injury: it has not limited the athlete.</p>
      )}
      {revision.withdrawn ? null : (
        <Disclosure
          summary="Change what they may do"
          open={Boolean(refused) || injury.gaps.some(({ field }) => field === "availability")}
        >
          <Form {...refused} idPrefix="availability" action="#availability">
            <AvailabilityFields today={injury.today} />
            <div className="hidden [form:has([value=full]:checked)_&]:block">
              <Checkbox name="close" value="yes" label="Close the injury on that day" defaultChecked />
            </div>
            <FormActions>
              <Button look="primary" name="intent" value="availability" busy={busy}>
                Save the availability
              </Button>
            </FormActions>
          </Form>
        </Disclosure>
      )}
      {changes.length > course.length ? (
        <Disclosure summary="Everything that was entered, in its order">
          <ul>
            {changes.map((change) => (
              <li key={change.id} className="py-1">
                {sentenceCase(availabilityWords[change.state])} from {formatDay(change.fromDay)}:{" "}
                <Signature day={change.day} time={change.time} by={change.setBy ?? undefined} />
              </li>
            ))}
          </ul>
        </Disclosure>
      ) : null}
    </Region>
  );
}

function Notes({ injury, refused }: { injury: InjuryPage; refused: Refused }) {
  const busy = useNavigation().state !== "idle";
  return (
    <Region heading="Follow-up notes" id="notes">
      {injury.notes.map((note) => (
        <div key={note.id} className="max-w-prose border-0 border-b border-line py-3">
          <p className="whitespace-pre-line">{note.text}</p>
          <p>
            <Signature {...note} />
          </p>
        </div>
      ))}
      {injury.revision.withdrawn ? null : (
        <Form key={injury.notes.length} {...refused} idPrefix="note" action="#notes" className="mt-4">
          <input type="hidden" name="operation" value={injury.operation} />
          <Field
            name="text"
            label="Add a note"
            help="Signed with your name. It cannot be changed afterwards."
          >
            <TextArea rows={3} />
          </Field>
          <Button name="intent" value="note" busy={busy}>
            Add the note
          </Button>
        </Form>
      )}
    </Region>
  );
}

function Withdraw({ injury, refused }: { injury: InjuryPage; refused: Refused }) {
  const [version] = useState(injury.revision.version);
  return (
    <Disclosure summary="This record was made in error" open={Boolean(refused)}>
      <Form {...refused} idPrefix="withdraw">
        <input type="hidden" name="version" value={version} />
        <ChoiceButtons
          name="reason"
          legend="Why"
          choices={withdrawReasons.map((value) => ({
            value,
            label: sentenceCase(withdrawWords[value] ?? value),
          }))}
        />
        <ConfirmButton
          label="Withdraw the record"
          question="The record stays readable and counts nowhere; what it set for the athlete's availability is set aside."
          confirmLabel="Withdraw it"
          name="intent"
          value="withdraw"
        />
      </Form>
    </Disclosure>
  );
}
