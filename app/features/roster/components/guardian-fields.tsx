import { choicesOf, languageWords, relationWords } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { Checkbox, DateInput, Field, NumberInput, Select, TextArea, TextInput } from "~/ui";

type Values = {
  name?: string;
  email?: string | null;
  phone?: string | null;
  language?: string;
  relation?: string;
  phoneOrder?: number;
  mayBeTold?: boolean;
  mayDecide?: boolean;
  wantsEmail?: boolean;
  legalLimits?: string | null;
  limitsReviewOn?: string | null;
};

export function GuardianFields({ values = {} }: { values?: Values }) {
  return (
    <>
      <Field name="name" label="Name">
        <TextInput defaultValue={values.name} autoComplete="off" />
      </Field>
      <Field name="relation" label="Relation">
        <Select
          width="medium"
          options={choicesOf(relationWords)}
          defaultValue={values.relation ?? "parent"}
        />
      </Field>
      <Field name="phone" label="Phone" optional>
        <TextInput type="tel" width="medium" defaultValue={values.phone ?? ""} autoComplete="off" />
      </Field>
      <Field name="phoneOrder" label="Called as number" help="1 is called first.">
        <NumberInput width="short" defaultValue={values.phoneOrder ?? 1} min={1} max={9} />
      </Field>
      <Field name="email" label="E-mail address" optional>
        <TextInput type="email" defaultValue={values.email ?? ""} autoComplete="off" />
      </Field>
      <Field name="language" label="Language of notices">
        <Select width="medium" options={choicesOf(languageWords)} defaultValue={values.language ?? "en"} />
      </Field>
      <Checkbox
        name="mayBeTold"
        label="May be told about the athlete's health"
        defaultChecked={values.mayBeTold ?? true}
      />
      <Checkbox name="mayDecide" label="May decide about care" defaultChecked={values.mayDecide ?? true} />
      <Checkbox
        name="wantsEmail"
        label="Wants notices by e-mail"
        defaultChecked={values.wantsEmail ?? true}
      />
      <Field
        name="legalLimits"
        label="Legal limits"
        optional
        help="Such as a court order. Name the document and what it limits. Kept encrypted, shown to staff alone."
      >
        <TextArea rows={3} defaultValue={values.legalLimits ?? ""} />
      </Field>
      <Field name="limitsReviewOn" label="Review the limits on" optional>
        <DateInput defaultValue={values.limitsReviewOn ? formatDay(values.limitsReviewOn, "figures") : ""} />
      </Field>
    </>
  );
}
