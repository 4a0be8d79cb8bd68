import { randomUUID } from "node:crypto";
import type postgres from "postgres";
import { isTimeZone } from "~/platform/clock";
import { makeWrappedKey } from "~/platform/crypto/sealing.server";
import { DomainError } from "~/platform/errors";
import type { Role } from "~db/schema/codes";
import { expiryInDays, hashToken, linkToken } from "./tokens.server";

export type Founding = {
  slug: string;
  name: string;
  kind: "club" | "school";
  timeZone: string;
  /** Whom guardians call. */
  phone: string;
  phoneHours?: string;
  /** Left out: a new one. Given where addresses must stay the same each time, as in the demo. */
  organisationId?: string;
};

export type FirstPerson = { email: string; name: string; roles: readonly Role[] };

/** Age bands of a new organisation, in completed years on the day of the session or of the onset. */
export const defaultAgeBands = [
  { label: "under 10", from: 0, to: 9 },
  { label: "10-12", from: 10, to: 12 },
  { label: "13-14", from: 13, to: 14 },
  { label: "15-16", from: 15, to: 16 },
  { label: "17-18", from: 17, to: 18 },
  { label: "19-25", from: 19, to: 25 },
  { label: "over 25", from: 26, to: null },
];

/**
 * Players on the field and regulation minutes from an age on, as common practice has them; the administrator
 * adjusts them to the local competition's rules. They give the estimated grade of exposure.
 */
export const defaultSportRules: readonly [
  sport: string,
  fromAge: number,
  players: number,
  minutes: number,
][] = [
  ["soccer", 0, 7, 50],
  ["soccer", 12, 9, 60],
  ["soccer", 14, 11, 70],
  ["soccer", 16, 11, 80],
  ["soccer", 18, 11, 90],
  ["basketball", 0, 5, 32],
  ["basketball", 16, 5, 40],
  ["handball", 0, 7, 40],
  ["handball", 14, 7, 50],
  ["handball", 16, 7, 60],
  ["volleyball", 0, 6, 60],
  ["rugby", 0, 15, 60],
  ["rugby", 18, 15, 80],
  ["field_hockey", 0, 11, 60],
  ["netball", 0, 7, 60],
];

/** A reserved first path part cannot be an organisation's. */
const reserved = new Set([
  "api",
  "assets",
  "account",
  "families",
  "forgot-password",
  "health",
  "invitations",
  "organisations",
  "reset-password",
  "sign-in",
  "sign-out",
  "verify-email",
  "webhooks",
]);

function check({ slug, timeZone, name, phone }: Founding) {
  if (!/^[a-z0-9]+(-[a-z0-9]+)*$/.test(slug) || slug.length > 60 || reserved.has(slug))
    throw new DomainError(
      "invalid",
      `"${slug}" cannot be an address. Use small letters, digits and hyphens.`,
    );
  if (!isTimeZone(timeZone))
    throw new DomainError("invalid", `"${timeZone}" is not a time zone. Use a name such as Europe/London.`);
  if (!name.trim() || !phone.trim()) throw new DomainError("invalid", "Give a name and a phone number.");
}

/**
 * Makes an organisation with its data key and the defaults, in a transaction of the maintenance role: the application
 * itself cannot.
 * @returns the new organisation's id
 */
export async function foundOrganisation(
  sql: postgres.TransactionSql,
  masterKey: Buffer,
  input: Founding,
): Promise<string> {
  check(input);
  const organisationId = input.organisationId ?? randomUUID();
  const [taken] = await sql`select 1 from organisations where slug = ${input.slug}`;
  if (taken) throw new DomainError("conflict", `There is an organisation "${input.slug}" already.`);
  await sql`insert into organisations
      (organisation_id, slug, name, kind, time_zone, phone, phone_hours, age_bands)
      values (${organisationId}, ${input.slug}, ${input.name}, ${input.kind}, ${input.timeZone},
        ${input.phone}, ${input.phoneHours ?? null}, ${sql.json(defaultAgeBands)})`;
  await sql`insert into organisation_keys (organisation_id, key_version, wrapped_key)
      values (${organisationId}, 1, ${makeWrappedKey(masterKey, organisationId, 1)})`;
  for (const [sport, fromAge, players, minutes] of defaultSportRules)
    await sql`insert into sport_rules (organisation_id, sport, from_age, players_on_field, regulation_minutes)
        values (${organisationId}, ${sport}, ${fromAge}, ${players}, ${minutes})`;
  return organisationId;
}

/**
 * The operator's invitation of an organisation's first people. A first lead needs no other lead's confirmation:
 * the operator has seen the licence. The mail goes out with the outbox's next sweep.
 */
export async function inviteFirstPerson(
  sql: postgres.TransactionSql,
  organisationId: string,
  person: FirstPerson,
) {
  const id = randomUUID();
  const expiresAt = expiryInDays(14);
  await sql`insert into invitations
      (organisation_id, id, email, name, roles, all_teams, token_hash, expires_at, confirmed_at)
      values (${organisationId}, ${id}, ${person.email.trim().toLowerCase()}, ${person.name},
        ${[...person.roles]}, true, ${hashToken(linkToken("invitation", id, expiresAt))}, ${expiresAt}, now())`;
  await sql`insert into deliveries (organisation_id, id, template, invitation_id, parameters, created_at)
      values (${organisationId}, ${randomUUID()}, 'invitation', ${id}, '{}', now() - interval '2 minutes')`;
  await sql`insert into audit_events (organisation_id, id, acting_as, action, subject_id, fields)
      values (${organisationId}, ${randomUUID()}, 'operator', 'invitation.send', ${id}, '{}')`;
  return { id, expiresAt };
}
