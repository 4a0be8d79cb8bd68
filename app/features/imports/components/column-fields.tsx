import { Field, Select } from "~/ui";
import type { MappedHeading } from "../imports.schema";
import type { ImportView } from "../imports.server";

type Props = Pick<ImportView, "headings" | "columns" | "kind" | "teams" | "answers"> & {
  sample: { cells: string[] }[];
};

const notes: Partial<Record<MappedHeading["confidence"], string>> = {
  close: "Nearly the name of this column: please confirm.",
  remembered: "Remembered from an earlier import.",
  person: "Chosen by you.",
};

/** Which heading is which column: one list to choose from per heading, with what stands below it. */
export function ColumnFields({ headings, columns, sample, kind, teams, answers }: Props) {
  const options = columns.map(({ key, label }) => ({ value: key, label }));
  const needsTeam = kind === "exposure" && !headings.some(({ key }) => key === "teamName");
  return (
    <>
      {headings.map(({ index, header, key, confidence }) => {
        const below = sample
          .map(({ cells }) => cells[index]?.trim())
          .filter(Boolean)
          .slice(0, 3);
        const note = notes[confidence];
        return (
          <Field
            key={index}
            name={`column.${index}`}
            label={header || `Column ${index + 1}, without a heading`}
            help={[below.length > 0 ? `Holds: ${below.join("; ")}` : "Holds nothing in the first rows.", note]
              .filter(Boolean)
              .join(" ")}
            optional
          >
            <Select
              options={options}
              placeholder="Leave this column out"
              defaultValue={key ?? ""}
              width="medium"
            />
          </Field>
        );
      })}
      {needsTeam ? (
        <Field
          name="teamId"
          label="The team of the whole file"
          help="Needed where no column holds the team."
          optional
        >
          <Select
            options={teams.map(({ id, name }) => ({ value: id, label: name }))}
            placeholder="No team chosen"
            defaultValue={answers.teamId ?? ""}
            width="medium"
          />
        </Field>
      ) : null}
    </>
  );
}
