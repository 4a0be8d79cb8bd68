import { bodyAreaWords, choicesOf } from "~/features/vocabulary";
import {
  Button,
  ChoiceButtons,
  Field,
  Form,
  FormActions,
  type FormErrors,
  type FormValues,
  Select,
  TextArea,
} from "~/ui";
import { contactChoiceWords, onsetChoiceWords } from "../filter-words";
import { type Outcome, usualOutcome } from "./programme-plan";

export type PlanAnswer = { errors: FormErrors; values: FormValues };

/** The form in which the medical lead writes down what decides, before looking. */
export function PlanForm({
  formId,
  answer,
  begin = usualOutcome,
}: {
  /** Made by the loader: a form sent twice records one plan. */
  formId: string;
  answer?: PlanAnswer | undefined;
  begin?: Outcome;
}) {
  return (
    <Form {...(answer ?? {})} idPrefix="plan">
      <input type="hidden" name="id" value={formId} />
      <Field name="area" label="Body area of the injuries that decide">
        <Select
          defaultValue={begin.area}
          options={[{ value: "any", label: "any body area" }, ...choicesOf(bodyAreaWords)]}
        />
      </Field>
      <Field name="contact" label="Contact">
        <Select defaultValue={begin.contact} options={choicesOf(contactChoiceWords)} />
      </Field>
      <Field name="onset" label="Onset">
        <Select defaultValue={begin.onset} options={choicesOf(onsetChoiceWords)} />
      </Field>
      <ChoiceButtons
        name="caseDefinition"
        legend="Case definition"
        layout="chips"
        defaultValue={begin.caseDefinition}
        choices={[
          { value: "time-loss", label: "with time loss" },
          { value: "medical-attention", label: "that needed attention" },
        ]}
      />
      <ChoiceButtons
        name="comparison"
        legend="The comparison that answers the question"
        layout="chips"
        help="The other one is shown as well, as a second look."
        defaultValue="warmed-up"
        choices={[
          { value: "warmed-up", label: "warmed up against not warmed up" },
          { value: "thirds", label: "highest against lowest third of compliance" },
        ]}
      />
      <Field
        name="words"
        label="The plan in your own words"
        help="What you expect, over which time, when you will look, and what you will do with the answer. No names of athletes."
      >
        <TextArea rows={6} />
      </Field>
      <FormActions note="A recorded plan cannot be changed or taken away. A further one can be added; both stay visible.">
        <Button look="primary">Record the plan</Button>
      </FormActions>
    </Form>
  );
}
