import { addDays, ageOnDay } from "./days.ts";
import { type ContactBook, drawGivenName } from "./names.ts";
import { openStream, type Random } from "./random.ts";
import type { Member } from "./rosters.ts";
import type { Athlete, Day, Guardian, Guardianship, RosterEntry } from "./types.ts";

/**
 * Guardians of everyone who was a minor on joining; siblings of one household share them. Afterwards the
 * special families: one action alert, one guardian with legal limits, one safeguarding hold.
 */
export function buildFamilies(
  seed: string,
  organisation: string,
  members: readonly Member[],
  contacts: ContactBook,
) {
  const random = openStream(seed, `families ${organisation}`);
  const guardians: Guardian[] = [];
  const guardianships: Guardianship[] = [];
  const households = new Map<string, { guardian: Guardian; relation: Guardianship["relation"] }[]>();
  for (const member of members) {
    if (ageOnDay(member.athlete.dateOfBirth, member.joinedOn) >= 18) continue;
    const home = households.get(member.householdKey) ?? drawHome(random, organisation, member, contacts);
    if (!households.has(member.householdKey)) {
      households.set(member.householdKey, home);
      guardians.push(...home.map((each) => each.guardian));
    }
    for (const [index, { guardian, relation }] of home.entries()) {
      guardianships.push({
        organisation,
        athlete: member.athlete.key,
        guardian: guardian.key,
        relation,
        mayBeTold: true,
        mayDecide: relation !== "step_parent",
        phoneOrder: index + 1,
        legalLimit: null,
      });
    }
  }
  return { guardians, guardianships };
}

function drawHome(random: Random, organisation: string, member: Member, contacts: ContactBook) {
  const relations = random.weighted<readonly Guardianship["relation"][]>([
    [["mother", "father"], 56],
    [["mother", "step_parent"], 8],
    [["father", "mother"], 6],
    [["mother"], 19],
    [["father"], 5],
    [["grandparent"], 3],
    [["carer"], 3],
  ]);
  return relations.map((relation, index) => {
    const sounds =
      relation === "mother"
        ? "female"
        : relation === "father"
          ? "male"
          : random.pick(["female", "male"] as const);
    const givenName = drawGivenName(random, member.household, sounds);
    const { familyName, language } = member.household;
    const hasEmail = random.chance(index === 0 ? 0.98 : 0.92);
    const guardian: Guardian = {
      organisation,
      key: `${member.householdKey}-G${index + 1}`,
      givenName,
      familyName,
      email: hasEmail ? contacts.email(givenName, familyName) : null,
      phone: contacts.phone(),
      language: index === 0 || random.chance(0.85) ? language : "en",
      wantsEmail: hasEmail && random.chance(0.94),
    };
    return { guardian, relation };
  });
}

type Special = {
  athletes: Athlete[];
  guardianships: Guardianship[];
  /** Entries that begin with the current season: the special families are among these. */
  roster: readonly RosterEntry[];
  /** First day of the current season. */
  seasonFrom: Day;
  clinician: string;
};

/** Marks the special families, in place, before anything else reads them. */
export function markSpecialFamilies(seed: string, organisation: string, special: Special): void {
  const random = openStream(seed, `special families ${organisation}`);
  const current = new Set(special.roster.map((each) => each.athlete));
  const minors = random.shuffle(
    special.athletes.filter(
      (athlete) => current.has(athlete.key) && ageOnDay(athlete.dateOfBirth, special.seasonFrom) < 16,
    ),
  );
  const twoGuardians = minors.filter(
    (athlete) => special.guardianships.filter((each) => each.athlete === athlete.key).length === 2,
  );
  const [alerted] = minors;
  if (alerted) alerted.actionAlerts = ["Carries adrenaline: use it, call an ambulance"];
  const [limited, held] = twoGuardians.filter((athlete) => athlete !== alerted);
  const limitedTo = special.guardianships.find(
    (each) => each.athlete === limited?.key && each.phoneOrder === 2,
  );
  if (limitedTo) {
    limitedTo.mayBeTold = false;
    limitedTo.mayDecide = false;
    limitedTo.legalLimit = {
      words:
        "Court order: may not be told where the athlete trains or plays, and takes no part in decisions.",
      document: "court-order-family-division.pdf",
      reviewOn: addDays(special.seasonFrom, 300),
    };
  }
  if (held) {
    held.safeguardingHold = {
      from: special.seasonFrom,
      by: special.clinician,
      reason: "Safeguarding officer asks that nobody at home is written to until she has met the family.",
    };
  }
}
