import {
  certaintyWords,
  choicesOf,
  pathologiesOf,
  pathologyWords,
  sentenceCase,
  tissueWords,
} from "~/features/vocabulary";
import { ChoiceButtons, Disclosure, Field, Select, type SelectGroup, TextInput } from "~/ui";
import type { tissues } from "~db/schema/codes";
import { furtherDiagnoses } from "../injuries.schema";

/** Tissue and pathology as one list, so that a pair that does not belong together cannot be chosen. */
const pairs: SelectGroup[] = (Object.keys(pathologiesOf) as (typeof tissues)[number][]).map((tissue) => ({
  label: sentenceCase(tissueWords[tissue]),
  options: pathologiesOf[tissue].map((pathology) => ({
    value: `${tissue}:${pathology}`,
    label: sentenceCase(pathologyWords[pathology]),
  })),
}));

const certainties = choicesOf(certaintyWords);

/** The principal diagnosis and up to three further ones of the same event. */
export function DiagnosisFields({ furtherOpen }: { furtherOpen: boolean }) {
  return (
    <>
      <Field name="diagnosisPair" label="Tissue and pathology" optional>
        <Select options={pairs} placeholder="Not known yet" />
      </Field>
      <Field name="diagnosis" label="Diagnosis in words" optional>
        <TextInput width="full" autoComplete="off" />
      </Field>
      <ChoiceButtons name="certainty" legend="How certain" optional layout="segments" choices={certainties} />
      <Disclosure summary="Further diagnoses of the same event" open={furtherOpen}>
        <p className="mb-4 max-w-prose text-soft">
          They belong to this injury and never count as one of their own.
        </p>
        {furtherDiagnoses.map((n) => (
          <div key={n} className="mb-4 border-0 border-b border-line last:border-b-0">
            <Field name={`further${n}`} label={`Further diagnosis ${n}`} optional>
              <Select options={pairs} placeholder="None" />
            </Field>
            <Field name={`further${n}Words`} label="In words" optional>
              <TextInput width="full" autoComplete="off" />
            </Field>
            <ChoiceButtons
              name={`further${n}Certainty`}
              legend="How certain"
              optional
              layout="segments"
              choices={certainties}
            />
          </div>
        ))}
      </Disclosure>
    </>
  );
}
