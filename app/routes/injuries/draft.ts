import { saveDraft } from "~/features/injuries/drafts.server";
import { memberAction } from "~/middleware/handlers.server";
import { timeIn } from "~/platform/clock";
import { formValues } from "~/ui";

/** Keeps what is typed into a form of injuries: asked by the page itself while somebody types. */
export const action = memberAction(async ({ scope, form }) => {
  const name = String(form.get("draft-form") ?? "");
  form.delete("draft-form");
  const savedAt = await saveDraft(scope, name, formValues(form));
  return Response.json({ savedAt: savedAt && timeIn(scope.timeZone, savedAt) });
});
