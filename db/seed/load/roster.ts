import { limitsPlace } from "~/features/roster/guardians.server";
import { foldText } from "~/platform/fold-text";
import {
  actionAlerts,
  athletes,
  earlierInjuries,
  guardians,
  guardianships,
  rosterEntries,
  safeguardingHolds,
} from "~db/schema";
import type { relations } from "~db/schema/codes";
import type { Athlete, Guardianship } from "../scenario/types";
import { byKey, find, groupBy, insertRows, type Loading } from "./loading";

/** Relations as the roster names them. */
const relationOf: Record<Guardianship["relation"], (typeof relations)[number]> = {
  mother: "mother",
  father: "father",
  step_parent: "parent",
  grandparent: "guardian",
  carer: "carer",
};

/** Athletes with their families, what is on file about them, and the teams they belong to over time. */
export async function loadRoster(loading: Loading) {
  const { tx, own, organisationId, id, on } = loading;
  const entriesOf = groupBy(own.roster, ({ athlete }) => athlete);
  const firstDay = own.seasons[0]?.from ?? own.today;
  const joinedOn = ({ key }: Pick<Athlete, "key">) =>
    (entriesOf.get(key) ?? []).map(({ from }) => from).sort()[0] ?? firstDay;
  await insertRows(
    tx,
    athletes,
    own.athletes.map((athlete) => ({
      organisationId,
      id: id("athlete", athlete.key),
      givenName: athlete.givenName,
      familyName: athlete.familyName,
      nameKey: foldText(`${athlete.givenName} ${athlete.familyName}`),
      number: athlete.number,
      dateOfBirth: athlete.dateOfBirth,
      sex: athlete.sex,
      dominantLeg: athlete.dominantLeg,
      visitor: athlete.visitor,
      researchConsent: athlete.researchConsent === "given",
      createdAt: on(joinedOn(athlete), "09:00"),
    })),
  );
  await insertRows(
    tx,
    rosterEntries,
    own.roster.map(({ athlete, team, from, to }) => ({
      organisationId,
      id: id("roster entry", `${athlete} ${team} ${from}`),
      athleteId: id("athlete", athlete),
      teamId: id("team", team),
      fromDay: from,
      toDay: to,
    })),
  );
  await loadFamilies(loading, firstDay);
  await loadOnFile(loading, joinedOn);
}

async function loadFamilies({ tx, own, organisationId, id, at, on, seals }: Loading, firstDay: string) {
  const stoppedAt = new Map(
    own.notices.flatMap(({ guardian, bouncedAt }) => (bouncedAt ? [[guardian, at(bouncedAt)] as const] : [])),
  );
  await insertRows(
    tx,
    guardians,
    own.guardians.map((guardian) => ({
      organisationId,
      id: id("guardian", guardian.key),
      name: `${guardian.givenName} ${guardian.familyName}`,
      email: guardian.email,
      phone: guardian.phone,
      language: guardian.language,
      wantsEmail: guardian.wantsEmail,
      emailStoppedAt: stoppedAt.get(guardian.key) ?? null,
      createdAt: on(firstDay, "09:00"),
    })),
  );
  await insertRows(
    tx,
    guardianships,
    own.guardianships.map(({ athlete, guardian, relation, legalLimit, ...link }) => {
      const [athleteId, guardianId] = [id("athlete", athlete), id("guardian", guardian)];
      const limits = legalLimit && `${legalLimit.words} Document: ${legalLimit.document}`;
      return {
        organisationId,
        athleteId,
        guardianId,
        relation: relationOf[relation],
        mayBeTold: link.mayBeTold,
        mayDecide: link.mayDecide,
        phoneOrder: link.phoneOrder,
        legalLimits: seals.seal(limitsPlace(athleteId, guardianId, 1), limits),
        limitsReviewOn: legalLimit?.reviewOn ?? null,
      };
    }),
  );
}

/** Injuries from before, action alerts and safeguarding holds. */
async function loadOnFile(loading: Loading, joinedOn: (athlete: Athlete) => string) {
  const { tx, own, organisationId, id, person, on, seals } = loading;
  const trainer = own.memberships.find(({ role }) => role === "trainer")?.person ?? "";
  const guardiansByKey = byKey(own.guardians);
  await insertRows(
    tx,
    earlierInjuries,
    own.athletes.flatMap((athlete) =>
      athlete.earlierInjuries.map(({ area, side, words, year }, index) => ({
        organisationId,
        id: id("earlier injury", `${athlete.key} ${index}`),
        athleteId: id("athlete", athlete.key),
        bodyArea: area,
        side,
        // In words, as a roster names it: they tell a torn cruciate ligament from another sprain.
        pathology: words,
        year,
        recordedBy: person(trainer),
        recordedAt: on(joinedOn(athlete), "17:00"),
      })),
    ),
  );
  await insertRows(
    tx,
    actionAlerts,
    own.athletes.flatMap((athlete) =>
      athlete.actionAlerts.map((text, index) => {
        const link = own.guardianships.find((each) => each.athlete === athlete.key && each.mayDecide);
        const guardian = link && find(guardiansByKey, link.guardian);
        return {
          organisationId,
          id: id("action alert", `${athlete.key} ${index}`),
          athleteId: id("athlete", athlete.key),
          text,
          agreedWith: guardian ? `${guardian.givenName} ${guardian.familyName}` : "the athlete",
          setBy: person(trainer),
          setAt: on(joinedOn(athlete), "17:00"),
        };
      }),
    ),
  );
  await insertRows(
    tx,
    safeguardingHolds,
    own.athletes.flatMap(({ key, safeguardingHold: hold }) => {
      if (!hold) return [];
      const row = id("safeguarding hold", key);
      const place = { table: "safeguarding_holds", column: "reason", row, version: 1 };
      return [
        {
          organisationId,
          id: row,
          athleteId: id("athlete", key),
          reason: seals.seal(place, hold.reason),
          setBy: person(hold.by),
          setAt: on(hold.from, "09:00"),
        },
      ];
    }),
  );
}
