import type { Membership, Person, Scenario } from "../scenario/types";

/** Everybody's in the demo. It opens nothing but a database on this machine. */
export const demoPassword = "gorse-lantern-tide-47";

const nameOf = ({ givenName, familyName }: Person) => `${givenName} ${familyName}`;

export type DemoPerson = {
  role: Membership["role"];
  name: string;
  email: string;
  password: string;
  /** The organisation's name; of several, joined. */
  organisation: string;
};

/**
 * Whom to sign in as: one per role of the first organisation, the athletic trainer of the second, and one person who
 * works for both.
 */
export function listDemoPeople({ people, memberships, organisations }: Scenario): DemoPerson[] {
  const [club, school] = organisations;
  if (!club || !school) return [];
  const worksForBoth = (key: string) =>
    organisations.every(({ key: organisation }) =>
      memberships.some((each) => each.person === key && each.organisation === organisation),
    );
  const firstOf = (organisation: string, role: Membership["role"], both = false) =>
    memberships.find(
      (each) =>
        each.organisation === organisation && each.role === role && worksForBoth(each.person) === both,
    );
  const picked = [
    ...(["admin", "lead", "trainer", "coach"] as const).map((role) => firstOf(club.key, role)),
    firstOf(school.key, "trainer"),
    firstOf(club.key, "coach", true),
  ];
  return picked.flatMap((membership) => {
    const person = people.find(({ key }) => key === membership?.person);
    if (!membership || !person) return [];
    const names = organisations
      .filter(({ key }) =>
        memberships.some((each) => each.person === person.key && each.organisation === key),
      )
      .map(({ name }) => name);
    return [
      {
        role: membership.role,
        name: nameOf(person),
        email: person.email,
        password: demoPassword,
        organisation: names.join(" and "),
      },
    ];
  });
}
