import { randomUUID } from "node:crypto";
import { addDays } from "~/platform/clock";
import { foldText } from "~/platform/fold-text";
import { type Scope, write } from "~db/client.server";
import { seasons, teams, venues } from "~db/schema";
import { counter, only } from "./rows";

type Row<T> = Partial<Omit<T, "organisationId">>;
const next = counter();

/** Left out: a season around today. */
export function makeSeason(scope: Scope, given: Row<typeof seasons.$inferInsert> = {}) {
  const startsOn = given.startsOn ?? addDays(scope.today, -120);
  const values = {
    organisationId: scope.organisationId,
    id: randomUUID(),
    name: `Season ${next()}`,
    startsOn,
    endsOn: addDays(startsOn, 300),
    ...given,
  };
  return write(scope, async (tx) => only(await tx.insert(seasons).values(values).returning()));
}

/** Left out: an under-16 girls' soccer team. */
export function makeTeam(scope: Scope, given: Row<typeof teams.$inferInsert> = {}) {
  const name = given.name ?? `U16 Girls ${next()}`;
  const values = {
    organisationId: scope.organisationId,
    id: randomUUID(),
    name,
    nameKey: foldText(name),
    sport: "soccer",
    sex: "girls",
    underAge: 16,
    ...given,
  };
  return write(scope, async (tx) => only(await tx.insert(teams).values(values).returning()));
}

export function makeVenue(scope: Scope, given: Row<typeof venues.$inferInsert> = {}) {
  const values = {
    organisationId: scope.organisationId,
    id: randomUUID(),
    name: `Ground ${next()}`,
    ...given,
  };
  return write(scope, async (tx) => only(await tx.insert(venues).values(values).returning()));
}
