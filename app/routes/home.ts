import { redirect } from "react-router";
import { currentPerson } from "~/features/accounts/identity.server";
import { listOwnOrganisations } from "~/features/accounts/scope.server";
import type { Route } from "./+types/home";

/** The first page: sign-in, the person's one organisation, or the choice among several. */
export async function loader({ request }: Route.LoaderArgs) {
  const person = await currentPerson(request);
  if (!person) throw redirect("/sign-in");
  const own = await listOwnOrganisations(person.id);
  throw redirect(own.length === 1 && own[0] ? `/${own[0].slug}/today` : "/organisations");
}
