import { formatDay } from "~/platform/days";
import { Button, ChoiceButtons, Form, FormActions, Region } from "~/ui";
import type { ImportView, ShownRow } from "../imports.server";

type Candidate = NonNullable<ShownRow["problems"][number]["candidates"]>[number];

function describe({ number, dateOfBirth, sex, teams }: Candidate) {
  const parts = [
    number ? `number ${number}` : "no number",
    dateOfBirth ? `born ${formatDay(dateOfBirth)}` : "no date of birth",
    sex.replaceAll("_", " "),
    teams.length > 0 ? teams.join(", ") : "in no team",
  ];
  return parts.join("; ");
}

/** Rows that may mean an athlete who is known: the row and the athletes side by side, and a decision. */
export function DoubtsForm({ view }: { view: ImportView }) {
  const { doubts, headings, answers } = view;
  if (doubts.length === 0) return null;
  return (
    <Region heading="Is this the same athlete?">
      <p className="mb-4 max-w-prose">
        Without a decision these rows stay rejected; nothing about them is changed.
      </p>
      <Form idPrefix="doubts">
        {doubts.map(({ line, cells, problems }) => {
          const problem = problems.find(({ candidates }) => candidates);
          const candidates = problem?.candidates ?? [];
          const answered = answers.doubts?.[line];
          const chosen =
            answered && ("same" in answered ? `same:${answered.same}` : Object.keys(answered)[0]);
          return (
            <ChoiceButtons
              key={line}
              name={`doubt.${line}`}
              legend={`Line ${line}: ${headings
                .filter(({ key }) => key)
                .map(({ index }) => cells[index]?.trim())
                .filter(Boolean)
                .slice(0, 5)
                .join(", ")}`}
              help={problem?.reason}
              {...(chosen ? { defaultValue: chosen } : {})}
              choices={[
                ...candidates.map((candidate) => ({
                  value: `same:${candidate.id}`,
                  label: `The same as ${candidate.name}`,
                  detail: describe(candidate),
                })),
                ...(problem?.separable
                  ? [{ value: "separate", label: "Another athlete", detail: "becomes a new one" }]
                  : []),
                { value: "leave", label: "Leave the row out" },
              ]}
            />
          );
        })}
        <FormActions>
          <Button name="intent" value="answer">
            Take these decisions into the preview
          </Button>
        </FormActions>
      </Form>
    </Region>
  );
}
