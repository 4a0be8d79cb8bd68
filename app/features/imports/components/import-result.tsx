import { useEffect, useRef } from "react";
import {
  Attention,
  ButtonLink,
  ConfirmButton,
  DescriptionList,
  Form,
  FormActions,
  Lede,
  Note,
  Region,
  TextLink,
} from "~/ui";
import type { ImportView } from "../imports.server";
import { RowsTable } from "./rows-table";
import { list, plural, recordParts } from "./words";

type Told = { term: string; by: string | null; when: string };
type Blocker = { table: string; name: string };
type Props = { view: ImportView; told: Told[]; blockers: Blocker[] };

/** What an import did, with its report and its undoing. */
export function ImportResult({ view, told, blockers }: Props) {
  const { counts, state } = view;
  const parts = recordParts(counts);
  const rejected = counts.rejected ?? 0;
  const isUndone = state === "undone";
  return (
    <>
      {blockers.length > 0 ? <Blockers blockers={blockers} /> : null}
      <Lede>
        {isUndone ? (
          "This import was undone: what it had made is gone, what it had changed is as it was."
        ) : (
          <>
            <strong>Imported.</strong> {parts.length > 0 ? `${list(parts)}.` : "Nothing needed changing."}{" "}
            {rejected > 0 ? <Attention>{plural(rejected, "row")} rejected.</Attention> : null}
          </>
        )}
      </Lede>
      <DescriptionList
        items={told.map(({ term, by, when }) => ({ term, detail: by ? `${by}, ${when}` : when }))}
      />
      <div className="my-6 flex flex-col gap-3 sm:flex-row sm:flex-wrap">
        <ButtonLink look={rejected > 0 ? "primary" : "secondary"} to="report.csv" reloadDocument>
          Download the report (CSV)
        </ButtonLink>
        <ButtonLink to={`../imports/new?kind=${view.kind}`}>Import another file</ButtonLink>
      </div>
      {rejected > 0 && !isUndone ? (
        <p className="max-w-prose">
          The report names each rejected row with its reason. Mend those rows in your file and import it
          again: rows that are stored already stay as they are.
        </p>
      ) : null}
      {isUndone ? null : (
        <>
          <Region heading="The rows">
            <RowsTable view={view} />
          </Region>
          <Region heading="Undo">
            <p className="max-w-prose">
              Undoing takes back all of this import or nothing. It is refused where records were edited or
              used since, and names them.
            </p>
            <Form>
              <FormActions>
                <ConfirmButton
                  label="Undo this import"
                  question="What it made is deleted, what it changed becomes as it was."
                  confirmLabel="Undo the import"
                  name="intent"
                  value="undo"
                />
              </FormActions>
            </Form>
          </Region>
        </>
      )}
    </>
  );
}

function Blockers({ blockers }: { blockers: Blocker[] }) {
  const shown = [...new Set(blockers.map(({ name }) => name))];
  const box = useRef<HTMLDivElement>(null);
  // The button stands at the foot of the page, the answer at its head.
  // biome-ignore lint/correctness/useExhaustiveDependencies: each answer takes the focus, equal ones too
  useEffect(() => box.current?.focus(), [blockers]);
  return (
    <div ref={box} tabIndex={-1}>
      <Note kind="serious" role="alert" title="This import cannot be undone: later work would be lost">
        <p>These were edited or used since. Nothing was changed.</p>
        <ul className="list-disc pl-6">
          {shown.slice(0, 20).map((name) => (
            <li key={name}>{name}</li>
          ))}
        </ul>
        {shown.length > 20 ? <p>And more.</p> : null}
        <p>
          Correct single records by hand instead, for example on the{" "}
          <TextLink to="../roster">roster</TextLink>.
        </p>
      </Note>
    </div>
  );
}
