import { data, redirect } from "react-router";
import { ImportPreview } from "~/features/imports/components/import-preview";
import { ImportProgress } from "~/features/imports/components/import-progress";
import { ImportQuestions } from "~/features/imports/components/import-questions";
import { ImportResult } from "~/features/imports/components/import-result";
import {
  answerImport,
  cancelImport,
  requestCommit,
  undoImport,
  viewImport,
} from "~/features/imports/imports.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { dayIn, timeIn } from "~/platform/clock";
import { formatDay } from "~/platform/days";
import { DomainError } from "~/platform/errors";
import { ButtonLink, ErrorSummary, Note, Page, PageHeading, TextLink } from "~/ui";
import type { Route } from "./+types/import";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData ? `${loaderData.view.fileName}, import` : "Import"} - Haleside` },
];

export const loader = memberLoader(async ({ scope, id, url }) => {
  const view = await viewImport(scope, id("import"), url);
  const when = (at: Date) => `${formatDay(dayIn(scope.timeZone, at))}, ${timeIn(scope.timeZone, at)}`;
  const told = [
    { term: "Uploaded", ...view.uploaded },
    { term: "Imported", ...view.committed },
    { term: "Undone", ...view.undone },
  ].flatMap(({ term, by, at }) => (at ? [{ term, by, when: when(at) }] : []));
  const before = view.sameFile?.committedAt ? when(view.sameFile.committedAt) : null;
  return { view, told, before, progressHref: `/api/${scope.slug}/imports/${view.id}/progress` };
});

export const action = memberAction(async ({ scope, id, form }) => {
  const importId = id("import");
  const here = redirect(`/${scope.slug}/imports/${importId}`);
  switch (form.get("intent")) {
    case "answer":
      await answerImport(scope, importId, form);
      return here;
    case "commit":
      await requestCommit(scope, importId);
      return here;
    case "cancel":
      await cancelImport(scope, importId);
      return redirect(`/${scope.slug}/imports`);
    case "undo": {
      const blockers = await undoImport(scope, importId);
      return blockers.length > 0 ? data({ blockers }, { status: 409 }) : here;
    }
    default:
      throw new DomainError("invalid", "Choose one of the buttons of this page.");
  }
});

/** One import, from its upload to its undoing; the page follows its state. */
export default function Import({ loaderData, actionData }: Route.ComponentProps) {
  const { view, told, before, progressHref } = loaderData;
  const answer = actionData && "errors" in actionData ? actionData : null;
  const blockers = actionData && "blockers" in actionData ? actionData.blockers : [];
  const open = view.state === "needs_answers" || view.state === "previewed";
  return (
    <Page width={view.state === "needs_answers" ? "text" : "wide"}>
      <PageHeading above={view.kind === "roster" ? "Import of a roster" : "Import of exposure"}>
        <span className="break-all">{view.fileName}</span>
      </PageHeading>
      {answer?.errors.form ? <ErrorSummary errors={{ form: answer.errors.form, fields: {} }} /> : null}
      {open && view.sameFile ? (
        <Note title="This very file was imported before">
          <p>
            On {before}: <TextLink to={`../imports/${view.sameFile.id}`}>look at that import</TextLink>.
            Importing it again changes only what was changed since.
          </p>
        </Note>
      ) : null}
      {view.state === "needs_answers" ? (
        <ImportQuestions view={view} errors={answer?.errors} values={answer?.values} />
      ) : null}
      {view.state === "previewed" ? (
        <ImportPreview view={view} errors={answer?.errors} values={answer?.values} />
      ) : null}
      {["uploading", "uploaded", "reading", "committing"].includes(view.state) ? (
        <ImportProgress key={view.state} href={progressHref} state={view.state} progress={view.progress} />
      ) : null}
      {view.state === "committed" || view.state === "undone" ? (
        <ImportResult view={view} told={told} blockers={blockers} />
      ) : null}
      {view.state === "failed" ? (
        <Ended failure={view.failure ?? "It could not be read."} kind={view.kind} />
      ) : null}
      {view.state === "cancelled" ? <Ended failure="This import was cancelled." kind={view.kind} /> : null}
    </Page>
  );
}

function Ended({ failure, kind }: { failure: string; kind: string }) {
  return (
    <>
      <Note kind="serious" title={failure}>
        <p>Nothing was imported.</p>
      </Note>
      <p className="mt-6">
        <ButtonLink look="primary" to={`../imports/new?kind=${kind}`}>
          Import another file
        </ButtonLink>
      </p>
    </>
  );
}
