import { choicesOf, sentenceCase, sexWords } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { Checkbox, ChoiceButtons, DateInput, Field, TextInput } from "~/ui";
import type { Sex } from "~db/schema/codes";

type Values = {
  givenName?: string;
  familyName?: string;
  number?: string | null;
  dateOfBirth?: string | null;
  sex?: string;
  dominantLeg?: string;
  visitor?: boolean;
  researchConsent?: boolean;
};

const legChoices = [
  { value: "left", label: "Left" },
  { value: "right", label: "Right" },
  { value: "both", label: "Both" },
  { value: "unknown", label: "Not known" },
];

/** Who the athlete is, for adding and editing. */
export function AthleteFields({ values = {} }: { values?: Values }) {
  return (
    <>
      <Field name="givenName" label="Given name">
        <TextInput defaultValue={values.givenName} autoComplete="off" />
      </Field>
      <Field name="familyName" label="Family name">
        <TextInput defaultValue={values.familyName} autoComplete="off" />
      </Field>
      <Field
        name="number"
        label="Number"
        optional
        help="The organisation's own number. It lets imports find this athlete again."
      >
        <TextInput width="short" defaultValue={values.number ?? ""} autoComplete="off" />
      </Field>
      <Field
        name="dateOfBirth"
        label="Date of birth"
        optional
        help="Day, month, year: 27 3 2014 or 27 Mar 2014. Age is counted on the day of each session."
      >
        <DateInput defaultValue={values.dateOfBirth ? formatDay(values.dateOfBirth, "figures") : ""} />
      </Field>
      <ChoiceButtons
        name="sex"
        legend="Sex"
        layout="segments"
        choices={choicesOf(sexWords as Record<Sex, string>)}
        defaultValue={values.sex ?? "not_stated"}
        help={`${sentenceCase(sexWords.not_stated)} is never guessed and has its own row in every table.`}
      />
      <ChoiceButtons
        name="dominantLeg"
        legend="Dominant leg"
        layout="segments"
        choices={legChoices}
        defaultValue={values.dominantLeg ?? "unknown"}
        optional
      />
      <Checkbox
        name="visitor"
        label="Visitor or try-out"
        help="Recorded without a roster."
        defaultChecked={values.visitor}
      />
      <Checkbox
        name="researchConsent"
        label="The family agrees to research use of de-identified records"
        defaultChecked={values.researchConsent}
      />
    </>
  );
}
