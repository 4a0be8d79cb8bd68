import {
  boolean,
  date,
  foreignKey,
  index,
  integer,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import { organisations, teams } from "./accounts";
import { oneOf } from "./check";
import { bodyAreas, languages, legs, relations, sexes, sides } from "./codes";
import { actor, createdAt, instant, organisationId, sealed, version } from "./columns";

export const athletes = pgTable(
  "athletes",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    givenName: text("given_name").notNull(),
    familyName: text("family_name").notNull(),
    /** Normalised "given family" for search and matching. */
    nameKey: text("name_key").notNull(),
    /** The organisation's own number, text so that leading zeros survive. */
    number: text("number"),
    dateOfBirth: date("date_of_birth", { mode: "string" }),
    sex: text("sex").notNull().default("not_stated"),
    dominantLeg: text("dominant_leg").notNull().default("unknown"),
    visitor: boolean("visitor").notNull().default(false),
    researchConsent: boolean("research_consent").notNull().default(false),
    archivedAt: instant("archived_at"),
    createdAt: createdAt(),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    unique("athletes_number").on(t.organisationId, t.number),
    index("athletes_name_idx").on(t.organisationId, t.nameKey),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    oneOf("athletes_sex", t.sex, sexes),
    oneOf("athletes_leg", t.dominantLeg, legs),
  ],
);

/** A safeguarding hold stops every notice until a clinical role lifts it. Clinical, since its existence tells. */
export const safeguardingHolds = pgTable(
  "safeguarding_holds",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    reason: sealed("reason"),
    setBy: actor("set_by"),
    setAt: instant("set_at").notNull().defaultNow(),
    liftedBy: actor("lifted_by"),
    liftedAt: instant("lifted_at"),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    index("safeguarding_holds_athlete_idx").on(t.organisationId, t.athleteId),
  ],
);

/** What a family lets coaches see and act on. */
export const actionAlerts = pgTable(
  "action_alerts",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    text: text("text").notNull(),
    agreedWith: text("agreed_with").notNull(),
    setBy: actor("set_by"),
    setAt: instant("set_at").notNull().defaultNow(),
    endedAt: instant("ended_at"),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    index("action_alerts_athlete_idx").on(t.organisationId, t.athleteId),
  ],
);

/** Injuries from before the organisation used Haleside, so that the other knee of a former ACL athlete is known. */
export const earlierInjuries = pgTable(
  "earlier_injuries",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    bodyArea: text("body_area").notNull(),
    side: text("side").notNull(),
    pathology: text("pathology").notNull(),
    year: integer("year"),
    recordedBy: actor("recorded_by"),
    recordedAt: instant("recorded_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    index("earlier_injuries_athlete_idx").on(t.organisationId, t.athleteId),
    oneOf("earlier_injuries_area", t.bodyArea, bodyAreas),
    oneOf("earlier_injuries_side", t.side, sides),
  ],
);

export const guardians = pgTable(
  "guardians",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    name: text("name").notNull(),
    email: text("email"),
    phone: text("phone"),
    language: text("language").notNull().default("en"),
    wantsEmail: boolean("wants_email").notNull().default(true),
    /** Set by a hard bounce or a complaint: no more e-mail until a corrected address is entered. */
    emailStoppedAt: instant("email_stopped_at"),
    createdAt: createdAt(),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    index("guardians_email_idx").on(t.organisationId, t.email),
    oneOf("guardians_language", t.language, languages),
  ],
);

export const guardianships = pgTable(
  "guardianships",
  {
    organisationId: organisationId(),
    athleteId: uuid("athlete_id").notNull(),
    guardianId: uuid("guardian_id").notNull(),
    relation: text("relation").notNull().default("parent"),
    mayBeTold: boolean("may_be_told").notNull().default(true),
    mayDecide: boolean("may_decide").notNull().default(true),
    phoneOrder: integer("phone_order").notNull().default(1),
    legalLimits: sealed("legal_limits"),
    limitsReviewOn: date("limits_review_on", { mode: "string" }),
    endedAt: instant("ended_at"),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.athleteId, t.guardianId] }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.guardianId],
      foreignColumns: [guardians.organisationId, guardians.id],
    }),
    index("guardianships_guardian_idx").on(t.organisationId, t.guardianId),
    oneOf("guardianships_relation", t.relation, relations),
  ],
);

/** An athlete's membership of a team, from a day to a day (inclusive; null: still). Overlaps are excluded by the database. */
export const rosterEntries = pgTable(
  "roster_entries",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    teamId: uuid("team_id").notNull(),
    fromDay: date("from_day", { mode: "string" }).notNull(),
    toDay: date("to_day", { mode: "string" }),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.teamId],
      foreignColumns: [teams.organisationId, teams.id],
    }),
    index("roster_entries_athlete_idx").on(t.organisationId, t.athleteId),
    index("roster_entries_team_idx").on(t.organisationId, t.teamId, t.fromDay),
  ],
);
