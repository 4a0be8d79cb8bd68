import { sql } from "drizzle-orm";
import { foldText } from "~/platform/fold-text";
import { membershipTeams, seasons, sportRules, teams, venues } from "~db/schema";
import type { AgeGroup } from "../scenario/types";
import type { Loading } from "./loading";
import { insertRows } from "./loading";

/** The age under which a team's athletes are; null for senior teams. */
export const underAgeOf = ({ label, maxAge }: Pick<AgeGroup, "label" | "maxAge">) =>
  label === "senior" ? null : maxAge + 1;

/** Older than any age group of the young, so that it is the rule of senior teams. */
const seniorRuleAge = 19;

/** The age from which a group's rule counts: the groups of the young span two years. */
function ruleAgeOf(ageGroup: string) {
  const under = /^under (\d+)$/.exec(ageGroup)?.[1];
  return under === undefined ? seniorRuleAge : Number(under) - 2;
}

/** What the administrator enters: seasons, teams and who covers them, venues, the rules of play. */
export async function loadSettings({ tx, own, organisationId, id, person }: Loading) {
  await insertRows(
    tx,
    seasons,
    own.seasons.map(({ key, name, from, to }) => ({
      organisationId,
      id: id("season", key),
      name,
      startsOn: from,
      endsOn: to,
    })),
  );
  await insertRows(
    tx,
    teams,
    own.teams.map(({ key, name, sport, sexCategory, ageGroup }) => ({
      organisationId,
      id: id("team", key),
      name,
      nameKey: foldText(name),
      sport,
      sex: sexCategory,
      underAge: underAgeOf(ageGroup),
    })),
  );
  await insertRows(
    tx,
    venues,
    own.venues.map(({ key, name, emergencyCard: card }) => ({
      organisationId,
      id: id("venue", key),
      name,
      address: card.address,
      access: card.access,
      defibrillator: card.defibrillator,
      emergencyNumbers: `${card.emergencyNumber}; on site ${card.sitePhone}; ${card.nearestEmergencyDepartment}`,
    })),
  );
  await insertRows(
    tx,
    membershipTeams,
    own.memberships.flatMap(({ person: key, teams: listed }) =>
      listed === "all"
        ? []
        : listed.map((team) => ({ organisationId, personId: person(key), teamId: id("team", team) })),
    ),
  );
  await tx
    .insert(sportRules)
    .values(
      own.organisation.sports.map(({ sport, ageGroup, playersOnField, regulationMinutes }) => ({
        organisationId,
        sport,
        fromAge: ruleAgeOf(ageGroup),
        playersOnField,
        regulationMinutes,
      })),
    )
    .onConflictDoUpdate({
      target: [sportRules.organisationId, sportRules.sport, sportRules.fromAge],
      set: {
        playersOnField: sql`excluded.players_on_field`,
        regulationMinutes: sql`excluded.regulation_minutes`,
      },
    });
}
