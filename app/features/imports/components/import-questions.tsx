import {
  Button,
  ChoiceButtons,
  Disclosure,
  Form,
  FormActions,
  type FormErrors,
  type FormValues,
  Note,
  Region,
} from "~/ui";
import type { ImportView } from "../imports.server";
import { ColumnFields } from "./column-fields";
import { ReadingFields, SampleTable } from "./reading-fields";
import { TeamQuestions } from "./team-questions";
import { list } from "./words";

type Props = { view: ImportView; errors?: FormErrors | null; values?: FormValues | null };

/** What only a person can say, all at once; how the file was read stays changeable below. */
export function ImportQuestions({ view, errors, values }: Props) {
  const { questions, reading } = view;
  const find = <Kind extends ImportView["questions"][number]["kind"]>(kind: Kind) =>
    questions.find(
      (question): question is Extract<typeof question, { kind: Kind }> => question.kind === kind,
    );
  const unreadable = find("reading");
  const columns = find("columns");
  const days = find("day-order");
  const names = find("name-order");
  const teams = find("teams");
  return (
    <Form errors={errors} values={values}>
      {unreadable ? (
        <Note kind="serious" title={unreadable.reason}>
          <p>{unreadable.mend}</p>
        </Note>
      ) : null}
      {days ? (
        <ChoiceButtons
          name="dayOrder"
          legend="How does the file write its days?"
          help={`${days.examples.length > 0 ? `For example ${list(days.examples)}. ` : ""}${
            days.order === "mixed"
              ? "The file seems to hold both orders: rows that do not fit your answer will be named."
              : "They can be read in both ways, and a wrong guess would move birthdays and sessions."
          }`}
          choices={[
            { value: "day-first", label: "Day first", detail: "27/3/2014" },
            { value: "month-first", label: "Month first", detail: "3/27/2014" },
          ]}
        />
      ) : null}
      {names ? (
        <ChoiceButtons
          name="nameOrder"
          legend="In which order are the names?"
          help={`For example “${names.example}”.`}
          choices={[
            { value: "given-first", label: "Given name first" },
            { value: "family-first", label: "Family name first" },
          ]}
        />
      ) : null}
      {columns ? (
        <Region heading="Which column is which?">
          <Note kind="attention">
            {columns.reasons.map((reason) => (
              <p key={reason}>{reason}</p>
            ))}
          </Note>
          <ColumnFields {...view} sample={reading?.sample ?? []} />
        </Region>
      ) : null}
      {teams ? (
        <Region heading={teams.teams.length === 1 ? "A team to make" : "Teams to make"}>
          <TeamQuestions asked={teams.teams} teams={view.teams} />
        </Region>
      ) : null}
      {reading ? (
        <Disclosure summary="How the file was read" open={Boolean(unreadable)}>
          <SampleTable reading={reading} />
          <ReadingFields reading={reading} answers={view.answers} withDays={!days} />
        </Disclosure>
      ) : null}
      <FormActions note="Nothing is imported yet: the preview comes next.">
        <Button look="primary" name="intent" value="answer">
          Show the preview
        </Button>
      </FormActions>
    </Form>
  );
}
