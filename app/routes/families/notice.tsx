import { type ActionFunctionArgs, data, type LoaderFunctionArgs, redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import {
  FamilyFrame,
  FamilyOpen,
  FamilyQuestion,
  FamilyShut,
  StopMail,
} from "~/features/notices/components/family-page";
import {
  acknowledge,
  answerQuestion,
  askForCall,
  askForFreshLink,
  type Knock,
  openingCookie,
  readFamilyPage,
  stopMail,
} from "~/features/notices/door.server";
import { askCallSchema, guardianIntentSchema } from "~/features/notices/notices.schema";
import { clientOf } from "~/middleware/client.server";
import { errorResponse } from "~/middleware/error-response.server";
import { answerForm } from "~/middleware/handlers.server";
import { requestContext } from "~/middleware/request-context";
import type { Route } from "./+types/notice";

async function knockOf({
  request,
  params,
  context,
}: LoaderFunctionArgs | ActionFunctionArgs): Promise<Knock> {
  const { organisationId = "", token: part = "" } = params;
  const opening: unknown = await openingCookie(organisationId, part).parse(request.headers.get("Cookie"));
  return {
    organisationId,
    part,
    clientAddress: clientOf(request, context).clientAddress,
    requestId: context.get(requestContext).id,
    opening: typeof opening === "string" ? opening : null,
  };
}

/** What stands here is for one pair of eyes: no cache keeps it, and no search engine lists it. */
const guarded = { "Cache-Control": "no-store", "X-Robots-Tag": "noindex, nofollow" };
export const headers = () => guarded;

/** A GET changes nothing: mail programs open links to look at them. */
export async function loader(args: Route.LoaderArgs) {
  try {
    const { searchParams } = new URL(args.request.url);
    const page = await readFamilyPage(await knockOf(args));
    return data(
      { page, stopping: searchParams.has("stop"), done: searchParams.get("done") },
      { headers: guarded },
    );
  } catch (error) {
    throw errorResponse(error);
  }
}

export async function action(args: Route.ActionArgs) {
  const knock = await knockOf(args);
  const here = `/families/${knock.organisationId}/${knock.part}`;
  return answerForm(args.request, async (form) => {
    const typed = formObject(form);
    switch (guardianIntentSchema.parse(typed).intent) {
      case "answer": {
        const opening = await answerQuestion(knock, typeof typed.answer === "string" ? typed.answer : "");
        const cookie = await openingCookie(knock.organisationId, knock.part).serialize(opening);
        return redirect(here, { headers: { "Set-Cookie": cookie } });
      }
      case "acknowledge":
        await acknowledge(knock);
        return redirect(`${here}?done=acknowledged`);
      case "ask-call":
        await askForCall(knock, askCallSchema.parse(typed).when);
        return redirect(`${here}?done=call`);
      case "fresh-link":
        await askForFreshLink(knock);
        return redirect(`${here}?done=fresh`);
      case "stop-mail":
        await stopMail(knock);
        return redirect(`${here}?done=stopped`);
    }
  });
}

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: loaderData ? `News from ${loaderData.page.organisation}` : "News" },
];

/** The page of a family. Every form posts the whole page, so that it works without script and with its own cookie. */
export default function FamilyNotice({ loaderData, actionData }: Route.ComponentProps) {
  const { page, stopping, done } = loaderData;
  const answer = actionData && !(actionData instanceof Response) ? actionData : undefined;
  return (
    <FamilyFrame page={page} done={answer ? null : done}>
      {stopping && done !== "stopped" ? <StopMail page={page} answer={answer} /> : null}
      {!stopping && page.state === "question" ? <FamilyQuestion page={page} answer={answer} /> : null}
      {!stopping && page.state === "shut" ? <FamilyShut page={page} answer={answer} done={done} /> : null}
      {!stopping && page.state === "open" ? <FamilyOpen page={page} answer={answer} /> : null}
    </FamilyFrame>
  );
}
