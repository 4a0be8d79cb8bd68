import { inArray } from "drizzle-orm";
import { identity } from "~/features/accounts/identity.server";
import { account, user } from "~db/schema/auth";
import type { Membership, Person, Scenario } from "../scenario/types";
import { demoId } from "./ids";

/** Everybody's in the demo. It opens nothing but a database on this machine. */
export const demoPassword = "gorse-lantern-tide-47";

const nameOf = ({ givenName, familyName }: Person) => `${givenName} ${familyName}`;

/**
 * Makes the accounts of the demo's people, who count as verified. One hash serves all: hashing is slow on purpose.
 * An address that has an account keeps it.
 * @returns person ids by their keys in the scenario
 */
export async function ensurePeople(people: readonly Person[]): Promise<Map<string, string>> {
  const { auth, db } = identity();
  const context = await auth.$context;
  const emails = people.map(({ email }) => email);
  const findKnown = async () => {
    const rows = await db
      .select({ id: user.id, email: user.email })
      .from(user)
      .where(inArray(user.email, emails));
    return new Map(rows.map(({ id, email }) => [email, id]));
  };
  const known = await findKnown();
  const missing = people.filter(({ email }) => !known.has(email));
  if (missing.length > 0) {
    const password = await context.password.hash(demoPassword);
    const rows = missing.map((person) => ({ person, id: demoId("", "person", person.key) }));
    await db.transaction(async (tx) => {
      await tx.insert(user).values(
        rows.map(({ person, id }) => ({
          id,
          name: nameOf(person),
          email: person.email,
          emailVerified: true,
        })),
      );
      await tx.insert(account).values(
        rows.map(({ person, id }) => ({
          id: demoId("", "account", person.key),
          userId: id,
          accountId: id,
          providerId: "credential",
          password,
        })),
      );
    });
  }
  const ids = missing.length > 0 ? await findKnown() : known;
  return new Map(people.flatMap(({ key, email }) => [[key, ids.get(email) ?? ""] as const]));
}

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
