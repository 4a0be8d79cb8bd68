import { sql } from "drizzle-orm";
import {
  boolean,
  date,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import { allOf, oneOf } from "./check";
import { organisationKinds, roles, sports, teamSexes } from "./codes";
import { actor, createdAt, instant, organisationId, sealed, version } from "./columns";

export type AgeBand = { label: string; from: number; to: number | null };

export const organisations = pgTable(
  "organisations",
  {
    organisationId: organisationId(),
    slug: text("slug").notNull().unique(),
    name: text("name").notNull(),
    kind: text("kind").notNull(),
    timeZone: text("time_zone").notNull(),
    /** Whom a guardian calls: shown in every notice and on an expired link. */
    phone: text("phone").notNull(),
    phoneHours: text("phone_hours"),
    ageBands: jsonb("age_bands").$type<AgeBand[]>().notNull(),
    /** Age in years from which the athlete decides alone and guardians are no longer told. */
    ownDecisionAge: integer("own_decision_age").notNull().default(18),
    /** Counts below this are hidden outside the clinical roles. */
    smallNumber: integer("small_number").notNull().default(5),
    retentionYears: integer("retention_years").notNull().default(8),
    noticeLinkDays: integer("notice_link_days").notNull().default(14),
    createdAt: createdAt(),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId] }),
    oneOf("organisations_kind", t.kind, organisationKinds),
  ],
);

/** Data keys of an organisation, wrapped by the master key; the newest version seals, all of them open. */
export const organisationKeys = pgTable(
  "organisation_keys",
  {
    organisationId: organisationId(),
    keyVersion: integer("key_version").notNull(),
    wrappedKey: sealed("wrapped_key").notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.keyVersion] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
  ],
);

/** Players on the field and regulation minutes of a sport from an age on: the estimated grade of exposure. */
export const sportRules = pgTable(
  "sport_rules",
  {
    organisationId: organisationId(),
    sport: text("sport").notNull(),
    fromAge: integer("from_age").notNull(),
    playersOnField: integer("players_on_field").notNull(),
    regulationMinutes: integer("regulation_minutes").notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.sport, t.fromAge] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    oneOf("sport_rules_sport", t.sport, sports),
  ],
);

export const memberships = pgTable(
  "memberships",
  {
    organisationId: organisationId(),
    personId: uuid("person_id").notNull(),
    displayName: text("display_name").notNull(),
    email: text("email").notNull(),
    /** True: every team, now and later. False: the listed teams, and none when the list is empty. */
    allTeams: boolean("all_teams").notNull().default(false),
    createdAt: createdAt(),
    /** A membership is ended, never deleted: the person stays an actor of what they did. */
    endedAt: instant("ended_at"),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.personId] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    index("memberships_person_idx").on(t.personId),
  ],
);

/** A clinical role counts only once a lead has confirmed it; the first lead comes from the operator's command. */
export const membershipRoles = pgTable(
  "membership_roles",
  {
    organisationId: organisationId(),
    personId: uuid("person_id").notNull(),
    role: text("role").notNull(),
    grantedBy: actor("granted_by"),
    grantedAt: instant("granted_at").notNull().defaultNow(),
    confirmedBy: actor("confirmed_by"),
    confirmedAt: instant("confirmed_at"),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.personId, t.role] }),
    foreignKey({
      columns: [t.organisationId, t.personId],
      foreignColumns: [memberships.organisationId, memberships.personId],
    }),
    oneOf("membership_roles_role", t.role, roles),
  ],
);

export const seasons = pgTable(
  "seasons",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    name: text("name").notNull(),
    startsOn: date("starts_on", { mode: "string" }).notNull(),
    endsOn: date("ends_on", { mode: "string" }).notNull(),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    unique("seasons_name").on(t.organisationId, t.name),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
  ],
);

export const teams = pgTable(
  "teams",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    name: text("name").notNull(),
    /** Normalised name (case, marks, spaces), stored because a lower() filter loses its index under row-level security. */
    nameKey: text("name_key").notNull(),
    sport: text("sport").notNull(),
    sex: text("sex").notNull(),
    /** The age that all athletes of the team are under, in years (16 for an under-16 team); null for senior teams. */
    underAge: integer("under_age"),
    archivedAt: instant("archived_at"),
    createdAt: createdAt(),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    unique("teams_name").on(t.organisationId, t.nameKey),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    oneOf("teams_sport", t.sport, sports),
    oneOf("teams_sex", t.sex, teamSexes),
  ],
);

export const membershipTeams = pgTable(
  "membership_teams",
  {
    organisationId: organisationId(),
    personId: uuid("person_id").notNull(),
    teamId: uuid("team_id").notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.personId, t.teamId] }),
    foreignKey({
      columns: [t.organisationId, t.personId],
      foreignColumns: [memberships.organisationId, memberships.personId],
    }),
    foreignKey({
      columns: [t.organisationId, t.teamId],
      foreignColumns: [teams.organisationId, teams.id],
    }),
  ],
);

export const invitations = pgTable(
  "invitations",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    email: text("email").notNull(),
    name: text("name").notNull(),
    roles: text("roles").array().notNull(),
    allTeams: boolean("all_teams").notNull().default(false),
    teamIds: uuid("team_ids").array().notNull().default(sql`'{}'`),
    tokenHash: text("token_hash").notNull(),
    invitedBy: actor("invited_by"),
    createdAt: createdAt(),
    expiresAt: instant("expires_at").notNull(),
    confirmedBy: actor("confirmed_by"),
    confirmedAt: instant("confirmed_at"),
    acceptedBy: uuid("accepted_by"),
    acceptedAt: instant("accepted_at"),
    revokedAt: instant("revoked_at"),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    unique("invitations_token").on(t.organisationId, t.tokenHash),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    allOf("invitations_roles", t.roles, roles),
  ],
);
