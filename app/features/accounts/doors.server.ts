import { dayIn } from "~/platform/clock";
import { notFound } from "~/platform/errors";
import { read, type Scope } from "~db/client.server";
import type { Actor } from "~db/schema/tenancy";
import { findOrganisation } from "./people.queries.server";

/**
 * The scope of a door without a signed-in member: a guardian's link, an invitation, a job. It carries its
 * organisation's id and looks everything up under row-level security.
 * @throws DomainError not_found for an organisation that does not exist
 */
export async function openDoor(
  actor: Extract<Actor, "guardian" | "invitee" | "job">,
  organisationId: string,
  bound: { doorId?: string; personId?: string; requestId?: string } = {},
): Promise<Scope> {
  const bare: Scope = {
    organisationId,
    slug: "",
    timeZone: "UTC",
    today: "",
    personId: bound.personId ?? null,
    actors: [actor],
    roles: [],
    teams: actor === "job" ? "all" : [],
    ...(bound.doorId ? { doorId: bound.doorId } : {}),
    ...(bound.requestId ? { requestId: bound.requestId } : {}),
  };
  const organisation = await read(bare, findOrganisation);
  if (!organisation) throw notFound("This link");
  return {
    ...bare,
    slug: organisation.slug,
    timeZone: organisation.timeZone,
    today: dayIn(organisation.timeZone),
  };
}

/** The scope of the sweeper, which finds the organisations and nothing in them. */
export const sweeperScope: Scope = {
  organisationId: "",
  slug: "",
  timeZone: "UTC",
  today: "",
  personId: null,
  actors: ["sweeper"],
  roles: [],
  teams: [],
};
