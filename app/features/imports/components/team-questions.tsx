import { sportWords, teamSexWords } from "~/features/vocabulary";
import { Field, Fieldset, NumberInput, Select } from "~/ui";
import type { Question } from "../imports.schema";
import { plural } from "./words";

type Asked = Extract<Question, { kind: "teams" }>["teams"];
type Props = { asked: Asked; teams: { id: string; name: string }[] };

const options = (words: Record<string, string>) =>
  Object.entries(words).map(([value, label]) => ({ value, label }));

/** Teams that the file names and nobody has made: make each, take an existing one, or leave its rows out. */
export function TeamQuestions({ asked, teams }: Props) {
  return asked.map(({ key, name, rows, guess }, at) => (
    <Fieldset
      key={key}
      legend={`There is no team “${name}” yet`}
      help={`${plural(rows, "row")} ${rows === 1 ? "names" : "name"} it. What the name suggests is filled in; please check it.`}
    >
      <input type="hidden" name={`team.${at}.key`} value={key} />
      <input type="hidden" name={`team.${at}.name`} value={name} />
      <Field name={`team.${at}.decision`} label="What should happen?">
        <Select
          width="medium"
          defaultValue="create"
          options={[
            { value: "create", label: `Make the team ${name}` },
            ...(teams.length > 0
              ? [
                  {
                    label: "It is one that is there already",
                    options: teams.map((team) => ({ value: `use:${team.id}`, label: team.name })),
                  },
                ]
              : []),
            { value: "leave", label: "Leave its rows out" },
          ]}
        />
      </Field>
      <Field name={`team.${at}.sport`} label="Sport">
        <Select
          options={options(sportWords)}
          placeholder="Choose"
          defaultValue={guess.sport ?? ""}
          width="medium"
        />
      </Field>
      <Field name={`team.${at}.sex`} label="Who plays">
        <Select
          options={options(teamSexWords)}
          placeholder="Choose"
          defaultValue={guess.sex ?? ""}
          width="medium"
        />
      </Field>
      <Field
        name={`team.${at}.underAge`}
        label="Age group: under"
        help="Leave it empty for seniors."
        optional
      >
        <NumberInput defaultValue={guess.underAge ?? undefined} unit="years" width="short" />
      </Field>
    </Fieldset>
  ));
}
