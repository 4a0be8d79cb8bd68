import type { ActionFunctionArgs } from "react-router";
import { data, redirect } from "react-router";
import { ColumnDescriptions } from "~/features/imports/components/column-descriptions";
import { uploadFieldsSchema } from "~/features/imports/imports.schema";
import { checkUploadLength, upload } from "~/features/imports/imports.server";
import { definitions } from "~/features/imports/kinds";
import { errorResponse } from "~/middleware/error-response.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { DomainError } from "~/platform/errors";
import {
  Button,
  ChoiceButtons,
  Disclosure,
  Field,
  FileInput,
  Form,
  FormActions,
  Page,
  PageHeading,
  Region,
  TextLink,
} from "~/ui";
import type { Route } from "./+types/new";

export const meta: Route.MetaFunction = () => [{ title: "Import a file - Haleside" }];

export const loader = memberLoader(async ({ url }) => {
  const describe = (kind: keyof typeof definitions) =>
    definitions[kind].columns.map(({ key, label, description, example }) => ({
      key,
      label,
      description,
      example,
    }));
  const asked = url.searchParams.get("kind");
  return {
    kind: asked === "exposure" || asked === "roster" ? asked : undefined,
    roster: describe("roster"),
    exposure: describe("exposure"),
  };
});

const take = memberAction(async ({ scope, form }) => {
  const { kind } = uploadFieldsSchema.parse({ kind: form.get("kind") });
  const { id } = await upload(scope, kind, form.get("file"));
  return redirect(`/${scope.slug}/imports/${id}`);
});

/** A body past the limit is refused before it is read. */
export async function action(args: ActionFunctionArgs) {
  try {
    checkUploadLength(args.request);
  } catch (error) {
    if (!(error instanceof DomainError) || error.code !== "too_large") throw errorResponse(error);
    const errors = { fields: error.fields };
    return data({ errors, values: {} }, { status: error.status });
  }
  return take(args);
}

/** Choosing a file, with what it may hold. */
export default function NewImport({ loaderData, actionData }: Route.ComponentProps) {
  const { kind, roster, exposure } = loaderData;
  const answer = actionData && "errors" in actionData ? actionData : {};
  return (
    <Page width="text">
      <PageHeading below="Nothing is changed until you have seen the preview and said yes.">
        Import a file
      </PageHeading>
      <Form encType="multipart/form-data" {...answer}>
        <ChoiceButtons
          name="kind"
          legend="What does the file hold?"
          choices={[
            { value: "roster", label: "A roster", detail: "athletes, teams, guardians" },
            { value: "exposure", label: "Exposure", detail: "who took part in which session" },
          ]}
          {...(kind ? { defaultValue: kind } : {})}
        />
        <Field
          name="file"
          label="CSV file"
          help="At most 40 MB and 200,000 rows. In a spreadsheet program choose Save as, CSV. Commas, semicolons and tabs, and every usual encoding are understood."
        >
          <FileInput accept=".csv,.txt,.tsv,text/csv,text/plain,text/tab-separated-values" />
        </Field>
        <FormActions>
          <Button look="primary">Read the file</Button>
        </FormActions>
      </Form>
      <Region heading="What the columns mean">
        <p className="max-w-prose">
          Headings are recognised in English, German, Spanish, Polish and Welsh, and you can map others by
          hand; that is remembered for your organisation. A column that is absent, and a cell that is empty,
          never take away what is stored.
        </p>
        <Disclosure summary="A roster">
          <p>
            <TextLink reloadDocument to="../imports/templates/roster">
              Template of a roster (CSV)
            </TextLink>
          </p>
          <ColumnDescriptions columns={roster} />
        </Disclosure>
        <Disclosure summary="Exposure, by athlete or by headcount">
          <p className="flex flex-wrap gap-x-6">
            <TextLink reloadDocument to="../imports/templates/exposure">
              Template by athlete (CSV)
            </TextLink>
            <TextLink reloadDocument to="../imports/templates/exposure-by-headcount">
              Template by headcount (CSV)
            </TextLink>
          </p>
          <ColumnDescriptions columns={exposure} />
        </Disclosure>
      </Region>
    </Page>
  );
}
