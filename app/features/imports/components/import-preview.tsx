import {
  Attention,
  Button,
  ConfirmButton,
  Disclosure,
  Form,
  FormActions,
  type FormErrors,
  type FormValues,
  Lede,
  Note,
  Region,
} from "~/ui";
import type { ImportView } from "../imports.server";
import { ColumnFields } from "./column-fields";
import { DoubtsForm } from "./doubts-form";
import { ReadingFields, SampleTable } from "./reading-fields";
import { RowsTable } from "./rows-table";
import { delimiterWords, encodingWords, list, plural, recordParts } from "./words";

type Props = { view: ImportView; errors?: FormErrors | null; values?: FormValues | null };

/** What an import would do, before anything is done. */
export function ImportPreview({ view, errors, values }: Props) {
  const { counts, reading, failure } = view;
  const taken = (counts.create ?? 0) + (counts.update ?? 0);
  const rejected = counts.rejected ?? 0;
  return (
    <>
      {failure ? <Note kind="attention" role="status" title={failure} /> : null}
      <PreviewSentence view={view} />
      {(counts.warned ?? 0) > 0 ? (
        <p className="max-w-prose">
          {plural(counts.warned ?? 0, "row")} to look at: imported all the same, with a warning.
        </p>
      ) : null}
      <Form className="my-6">
        <FormActions
          note={
            rejected > 0
              ? "Rejected rows are left out. The report lists them, so that they can be mended and imported later."
              : undefined
          }
        >
          <Button look="primary" name="intent" value="commit">
            {taken > 0 ? `Import ${plural(taken, "row")}` : "Finish without changes"}
          </Button>
          <ConfirmButton
            label="Cancel this import"
            question="The file and its preview are deleted. Nothing else is changed."
            confirmLabel="Cancel the import"
            name="intent"
            value="cancel"
          />
        </FormActions>
      </Form>
      <DoubtsForm view={view} />
      <Region heading="The rows">
        <RowsTable view={view} />
      </Region>
      {reading ? (
        <Region heading="How the file was read">
          <p className="max-w-prose">
            {encodingWords[reading.encoding]}, cells parted by {delimiterWords[reading.delimiter]}, headings
            on line {reading.headerLine}.
          </p>
          {reading.notes.map((note) => (
            <p key={note} className="text-soft">
              {note}
            </p>
          ))}
          <SampleTable reading={reading} />
          <Disclosure summary="Change how it is read" open={Boolean(errors)}>
            <Form errors={errors} values={values} idPrefix="reading">
              <ReadingFields reading={reading} answers={view.answers} />
              <FormActions>
                <Button name="intent" value="answer">
                  Read it again
                </Button>
              </FormActions>
            </Form>
          </Disclosure>
          <Disclosure summary="Change the columns">
            <Form errors={errors} values={values} idPrefix="columns">
              <ColumnFields {...view} sample={reading.sample} />
              <FormActions note="What you change here is remembered for the next file with these headings.">
                <Button name="intent" value="answer">
                  Use these columns
                </Button>
              </FormActions>
            </Form>
          </Disclosure>
        </Region>
      ) : null}
    </>
  );
}

function PreviewSentence({ view }: { view: ImportView }) {
  const { counts, kind } = view;
  const parts = recordParts(counts);
  const rejected = counts.rejected ?? 0;
  const unchanged = counts.unchanged ?? 0;
  const note = kind === "roster" ? "Absent columns and empty cells leave what is stored." : undefined;
  return (
    <Lede note={note}>
      {parts.length > 0 ? (
        <>
          From <strong>{plural(counts.rows ?? 0, "row")}</strong>: {list(parts)}.
        </>
      ) : (
        <>
          <strong>Nothing would change.</strong>{" "}
          {unchanged > 0
            ? `${plural(unchanged, "row")} ${unchanged === 1 ? "says" : "say"} what is stored already.`
            : null}
        </>
      )}{" "}
      {rejected > 0 ? <Attention>{plural(rejected, "row")} rejected.</Attention> : "No row is rejected."}
    </Lede>
  );
}
