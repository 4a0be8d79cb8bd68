import { Form, Link, Outlet, useLocation } from "react-router";
import { ScopeSentence } from "~/features/accounts/components/scope-sentence";
import { navigationFor } from "~/features/accounts/navigation";
import { roleNames } from "~/features/accounts/permissions";
import { listOwnOrganisations } from "~/features/accounts/scope.server";
import { resolveViewing } from "~/features/accounts/viewing.server";
import { memberLoader } from "~/middleware/handlers.server";
import { NavLinks, SkipLink, TopBar } from "~/ui";
import { read } from "~db/client.server";
import type { Route } from "./+types/layout";

export const loader = memberLoader(async ({ scope, url }) => {
  const own = await listOwnOrganisations(scope.personId);
  const viewing = await read(scope, (tx) => resolveViewing(tx, url));
  return {
    viewing,
    slug: scope.slug,
    organisation: scope.organisationName,
    several: own.length > 1,
    person: scope.displayName,
    roles: scope.roles,
    coversAll: scope.teams === "all",
  };
});

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: loaderData ? `${loaderData.organisation} - Haleside` : "Haleside" },
];

/** The frame of an organisation's pages: the bar with the sentence of scope, and the words of this role. */
export default function OrganisationLayout({ loaderData }: Route.ComponentProps) {
  const { slug, roles, person, organisation, several, coversAll, viewing } = loaderData;
  const { search } = useLocation();
  const role = roles[0] ? roleNames[roles[0]] : "no confirmed role yet";
  return (
    <>
      <SkipLink />
      <TopBar
        name="Haleside"
        home={`/${slug}/today`}
        scope={
          <ScopeSentence organisation={organisation} several={several} coversAll={coversAll} {...viewing} />
        }
        person={
          <details className="relative" name="scope">
            <summary className="inline-flex min-h-target cursor-pointer list-none items-center">
              <span className="max-w-[12rem] truncate md:max-w-none">
                {person}
                <span className="hidden md:inline">, {role}</span>
              </span>
            </summary>
            <div className="on-light absolute right-0 z-30 w-56 rounded-md border border-line bg-paper p-1 text-ink shadow-float">
              <p className="px-3 pt-2 text-soft md:hidden">{role}</p>
              <Link
                to="/account"
                className="flex min-h-target items-center rounded-md px-3 text-ink no-underline hover:bg-lagoon-wash"
              >
                My account
              </Link>
              <Form method="post" action="/sign-out">
                <button
                  type="submit"
                  className="flex min-h-target w-full items-center rounded-md px-3 text-left hover:bg-lagoon-wash"
                >
                  Sign out
                </button>
              </Form>
            </div>
          </details>
        }
      />
      <NavLinks items={navigationFor(slug, roles, search)} />
      <Outlet />
    </>
  );
}
