import {
  bodyAreaWords,
  choicesOf,
  contactWords,
  firstCareWords,
  movementWords,
  onsetWords,
  referralWords,
  sentenceCase,
  sessionKindWords,
  sideWords,
  signWords,
  subsequenceWords,
  surfaceWords,
} from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import {
  ChoiceButtons,
  DateInput,
  Disclosure,
  Field,
  Fieldset,
  NumberInput,
  Select,
  TextArea,
  TextInput,
  TimeInput,
} from "~/ui";
import type { Sign } from "~db/schema/codes";
import { signGroups } from "../cautions";
import type { openEditForm } from "../read-injury.server";
import { siteWords } from "../summary";

export type EditPage = Awaited<ReturnType<typeof openEditForm>>;

const yesNo = [
  { value: "yes", label: "Yes" },
  { value: "no", label: "No" },
];
const signChoices = (group: readonly Sign[]) =>
  group.map((value) => ({ value, label: sentenceCase(signWords[value]) }));

/** The first group again, for corrections. */
export function WhenAndWhere({ page }: { page: EditPage }) {
  return (
    <Fieldset legend="When and where">
      <Field name="day" label="Day of the onset">
        <DateInput />
      </Field>
      <Field name="time" label="Time" optional>
        <TimeInput />
      </Field>
      <Field name="session" label="Session" help="The sessions of the athlete's teams on that day.">
        <Select
          width="full"
          placeholder="Not known yet"
          options={[
            ...page.sessions.map(({ id, kind, startTime, teamName }) => ({
              value: id,
              label: [sentenceCase(sessionKindWords[kind]), startTime, teamName].filter(Boolean).join(", "),
            })),
            { value: "outside", label: "Outside organised sport" },
          ]}
        />
      </Field>
      <Field name="bodyArea" label="Body area">
        <Select options={choicesOf(bodyAreaWords)} width="medium" />
      </Field>
      <ChoiceButtons name="side" legend="Side" choices={choicesOf(sideWords)} />
      <ChoiceButtons
        name="couldContinue"
        legend="Could they continue?"
        optional
        layout="segments"
        choices={yesNo}
      />
      <ChoiceButtons
        name="suspectedConcussion"
        legend="Suspected concussion?"
        optional
        layout="segments"
        choices={yesNo}
      />
    </Fieldset>
  );
}

/** @param warmedUpProposed what the session's record says, to be confirmed by saving */
export function HowItHappened({ warmedUpProposed = null }: { warmedUpProposed?: boolean | null }) {
  const proposal =
    warmedUpProposed === null
      ? ""
      : ` The session's record says ${warmedUpProposed ? "yes" : "no"}; saving confirms it, so correct it if it was otherwise.`;
  return (
    <Fieldset legend="How it happened">
      <ChoiceButtons name="onset" legend="Onset" optional choices={choicesOf(onsetWords)} />
      <ChoiceButtons name="contact" legend="Contact" optional choices={choicesOf(contactWords)} />
      <ChoiceButtons name="movement" legend="Movement" optional choices={choicesOf(movementWords)} />
      <Field name="minuteOfPlay" label="Minute of play" optional>
        <NumberInput />
      </Field>
      <Field name="surface" label="Surface" optional>
        <Select options={choicesOf(surfaceWords)} placeholder="Not known" width="medium" />
      </Field>
      <Field name="footwear" label="Footwear" optional>
        <TextInput width="full" autoComplete="off" />
      </Field>
      <ChoiceButtons
        name="warmedUp"
        legend="Had this athlete warmed up?"
        help={`This athlete, not the team: a late arrival, or who is hurt during the warm-up, had not.${proposal}`}
        optional
        layout="segments"
        choices={yesNo}
      />
    </Fieldset>
  );
}

export function SignsAndCare({ headOpen }: { headOpen: boolean }) {
  return (
    <>
      <Fieldset legend="Signs">
        <ChoiceButtons
          name="signs"
          legend="Of a joint"
          optional
          mode="multiple"
          choices={signChoices(signGroups.joint)}
        />
        <Field
          name="swellingNoticed"
          label="When swelling was noticed"
          help="Such as: within two hours."
          optional
        >
          <TextInput width="full" autoComplete="off" />
        </Field>
        <Disclosure summary="Signs of an emergency: limb, head, neck" open={headOpen}>
          <ChoiceButtons
            name="emergencySigns"
            legend="Of a limb"
            optional
            mode="multiple"
            choices={signChoices(signGroups.limb)}
          />
          <ChoiceButtons
            name="headSigns"
            legend="After a blow to the head or neck"
            optional
            mode="multiple"
            choices={signChoices(signGroups.head)}
          />
        </Disclosure>
      </Fieldset>
      <Fieldset legend="First care">
        <ChoiceButtons
          name="firstCare"
          legend="What was done"
          optional
          mode="multiple"
          choices={choicesOf(firstCareWords)}
        />
        <ChoiceButtons
          name="referredTo"
          legend="Referred to"
          optional
          mode="multiple"
          choices={choicesOf(referralWords)}
        />
        <Field name="phoned" label="Who was phoned" optional>
          <TextInput width="full" autoComplete="off" />
        </Field>
      </Fieldset>
    </>
  );
}

/** Surgery, the story in words, the relation to earlier injuries and the day of closing. */
export function Course({ page }: { page: EditPage }) {
  const inHaleside = page.earlier.filter(({ id }) => id !== null);
  const before = page.earlier.filter(({ id }) => id === null);
  return (
    <Fieldset legend="Course">
      <ChoiceButtons name="surgery" legend="Surgery" optional layout="segments" choices={yesNo} />
      <Field name="surgeryDay" label="Day of surgery" optional>
        <DateInput />
      </Field>
      <Field name="description" label="What happened, in words" optional>
        <TextArea />
      </Field>
      <ChoiceButtons
        name="subsequence"
        legend="Relation to earlier injuries"
        optional
        help={
          page.relation.subsequence
            ? `From what is entered this looks like: ${subsequenceWords[page.relation.subsequence]}. You confirm it.`
            : before.length > 0
              ? `Before Haleside: ${before.map(({ bodyArea, side, year }) => [siteWords(bodyArea, side), year].filter(Boolean).join(" ")).join("; ")}.`
              : undefined
        }
        choices={choicesOf(subsequenceWords)}
      />
      {inHaleside.length > 0 ? (
        <Field name="subsequentTo" label="The earlier injury" optional>
          <Select
            width="full"
            placeholder="None of these"
            options={inHaleside.map(({ id, bodyArea, side, onsetDay }) => ({
              value: id ?? "",
              label: `${sentenceCase(siteWords(bodyArea, side))}${onsetDay ? `, ${formatDay(onsetDay)}` : ""}`,
            }))}
          />
        </Field>
      ) : null}
      <Field name="closedOn" label="Closed on" help="Only once the athlete is fully available." optional>
        <DateInput />
      </Field>
    </Fieldset>
  );
}
