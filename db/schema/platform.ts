import { bigint, foreignKey, index, jsonb, pgTable, primaryKey, text, uuid } from "drizzle-orm/pg-core";
import { organisations } from "./accounts";
import { actor, instant, organisationId, sealed } from "./columns";

/** Idempotent writes: the first result under a client-made id. A replay returns it, another body is refused. */
export const operations = pgTable(
  "operations",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    personId: actor("person_id").notNull(),
    bodyHash: text("body_hash").notNull(),
    result: jsonb("result").$type<Record<string, unknown>>().notNull(),
    at: instant("at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
  ],
);

/** Who did and who saw what: ids and codes only, never clinical text. Insert-only; sealed in order by one job. */
export const auditEvents = pgTable(
  "audit_events",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    at: instant("at").notNull().defaultNow(),
    personId: actor("person_id"),
    /** A role, or the door a person without a sign-in came through (guardian, job, operator). */
    actingAs: text("acting_as").notNull(),
    /** The trade's verb and object, such as injury.read or roster.import. */
    action: text("action").notNull(),
    subjectId: text("subject_id"),
    athleteId: uuid("athlete_id"),
    requestId: text("request_id"),
    fields: jsonb("fields").$type<Record<string, string | number | boolean | string[]>>().notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    index("audit_events_at_idx").on(t.organisationId, t.at),
    index("audit_events_athlete_idx").on(t.organisationId, t.athleteId, t.at),
  ],
);

/** The chain: each sealed event's hash includes the one before. A changed or missing event no longer fits. */
export const auditSeals = pgTable(
  "audit_seals",
  {
    organisationId: organisationId(),
    position: bigint("position", { mode: "number" }).notNull(),
    eventId: uuid("event_id").notNull(),
    hash: text("hash").notNull(),
    sealedAt: instant("sealed_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.position] }),
    foreignKey({
      columns: [t.organisationId, t.eventId],
      foreignColumns: [auditEvents.organisationId, auditEvents.id],
    }),
    index("audit_seals_event_idx").on(t.organisationId, t.eventId),
  ],
);

/** Drafts of long forms, kept as they are typed; sealed like the record they become. */
export const formDrafts = pgTable(
  "form_drafts",
  {
    organisationId: organisationId(),
    personId: actor("person_id").notNull(),
    form: text("form").notNull(),
    body: sealed("body").notNull(),
    savedAt: instant("saved_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.personId, t.form] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
  ],
);
