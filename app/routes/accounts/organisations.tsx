import { listOwnOrganisations } from "~/features/accounts/scope.server";
import { personOf } from "~/middleware/access";
import { EmptyState, PageHeading, TextLink } from "~/ui";
import type { Route } from "./+types/organisations";

export const meta = () => [{ title: "Your clubs and schools - Haleside" }];

export async function loader({ context }: Route.LoaderArgs) {
  return { organisations: await listOwnOrganisations(personOf(context).id) };
}

export default function Organisations({ loaderData }: Route.ComponentProps) {
  const { organisations } = loaderData;
  if (organisations.length === 0)
    return (
      <EmptyState title="You belong to no club or school at the moment">
        Your account is fine, but no organisation has you as a member. Ask its administrator for an
        invitation.
      </EmptyState>
    );
  return (
    <>
      <PageHeading below="Each is sealed from the others: what you open in one never shows another's records.">
        Your clubs and schools
      </PageHeading>
      <ul className="border-0 border-t border-line">
        {organisations.map(({ organisationId, slug, name, kind }) => (
          <li key={organisationId} className="border-0 border-b border-line">
            <TextLink
              to={`/${slug}/today`}
              className="flex min-h-target-large items-center justify-between gap-4"
            >
              <span className="font-medium">{name}</span>
              <span className="text-soft">{kind}</span>
            </TextLink>
          </li>
        ))}
      </ul>
    </>
  );
}
