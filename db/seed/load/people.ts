import { inArray } from "drizzle-orm";
import { identity } from "~/features/accounts/identity.server";
import { account, user } from "~db/schema/auth";
import type { Person } from "../scenario/types";
import { demoPassword } from "./demo-people";
import { demoId } from "./ids";

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
