import { dayIn } from "~/platform/clock";
import type { Scope } from "~db/client.server";
import type { Role } from "~db/schema/codes";
import type { Actor } from "~db/schema/tenancy";

type Place = { id: string; slug: string; timeZone: string };

/**
 * A scope put together by hand, for factories and for tests of the database's own refusals. Tests of a feature take
 * `memberScope(person, organisation)`, which is what the middleware makes.
 */
export function scopeOf(
  organisation: Place,
  actors: readonly Actor[],
  given: { personId?: string | null; doorId?: string; teams?: "all" | readonly string[] } = {},
): Scope {
  const members: readonly string[] = ["admin", "lead", "trainer", "coach"];
  return {
    organisationId: organisation.id,
    slug: organisation.slug,
    timeZone: organisation.timeZone,
    today: dayIn(organisation.timeZone),
    personId: given.personId ?? null,
    actors,
    roles: actors.filter((actor): actor is Role => members.includes(actor)),
    teams: given.teams ?? "all",
    ...(given.doorId ? { doorId: given.doorId } : {}),
  };
}

/** Whoever may write the records of the trade: what factories write as. */
export const staffScope = (organisation: Place, personId?: string) =>
  scopeOf(organisation, ["admin", "lead", "trainer"], personId ? { personId } : {});
