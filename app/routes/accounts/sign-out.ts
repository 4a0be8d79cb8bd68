import { redirect } from "react-router";
import { signOut } from "~/features/accounts/sign-in.server";
import { clientOf } from "~/middleware/client.server";
import type { Route } from "./+types/sign-out";

export async function action({ request, context }: Route.ActionArgs) {
  const headers = await signOut(clientOf(request, context));
  throw redirect("/sign-in?done=signed-out", { headers });
}
