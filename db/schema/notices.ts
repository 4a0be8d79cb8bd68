import {
  boolean,
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
import { organisations } from "./accounts";
import { oneOf } from "./check";
import { deliveryStates, languages, urgencies } from "./codes";
import { actor, createdAt, instant, organisationId, sealed, version } from "./columns";
import { injuries } from "./injuries";
import { athletes, guardians } from "./roster";

/**
 * The message to one guardian about one injury. What stands behind the link is sealed here as it was previewed,
 * so that the guardian's scope needs this row alone and later edits of the injury do not change what was said.
 */
export const notices = pgTable(
  "notices",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    injuryId: uuid("injury_id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    guardianId: uuid("guardian_id").notNull(),
    urgency: text("urgency").notNull(),
    language: text("language").notNull(),
    content: sealed("content").notNull(),
    /** What the guardian is asked before the details open: a keyed hash of the answer (date of birth). */
    answerHash: text("answer_hash").notNull(),
    createdBy: actor("created_by"),
    createdAt: createdAt(),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.injuryId],
      foreignColumns: [injuries.organisationId, injuries.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.guardianId],
      foreignColumns: [guardians.organisationId, guardians.id],
    }),
    index("notices_injury_idx").on(t.organisationId, t.injuryId),
    oneOf("notices_urgency", t.urgency, urgencies),
    oneOf("notices_language", t.language, languages),
  ],
);

/** Links of a notice. The token is stored as a hash; five wrong answers lock the link. */
export const noticeLinks = pgTable(
  "notice_links",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    noticeId: uuid("notice_id").notNull(),
    tokenHash: text("token_hash").notNull(),
    createdAt: createdAt(),
    expiresAt: instant("expires_at").notNull(),
    tries: integer("tries").notNull().default(0),
    /** The 30-minute opening after a right answer: hash of the cookie's value. */
    openHash: text("open_hash"),
    openUntil: instant("open_until"),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    unique("notice_links_token").on(t.organisationId, t.tokenHash),
    foreignKey({
      columns: [t.organisationId, t.noticeId],
      foreignColumns: [notices.organisationId, notices.id],
    }),
  ],
);

/** What happened to a notice, insert-only: the states a person sees are read from here and from its deliveries. */
export const noticeEvents = pgTable(
  "notice_events",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    noticeId: uuid("notice_id").notNull(),
    /** written, opened, acknowledged, call_requested, phoned, phone_tried, fresh_link_requested, e_mail_stopped, locked */
    kind: text("kind").notNull(),
    /** Who was told what in a logged call; when a guardian asks to be called. */
    detail: sealed("detail"),
    by: actor("by"),
    at: instant("at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.noticeId],
      foreignColumns: [notices.organisationId, notices.id],
    }),
    index("notice_events_notice_idx").on(t.organisationId, t.noticeId, t.at),
  ],
);

/**
 * The outbox. The row is the truth, written in the same transaction as its cause; the job carries its id only and a
 * sweeper enqueues again what has no job. `template` and `parameters` hold ids and codes, never a name or a token:
 * link tokens are derived from the delivery's id and the organisation's key when the mail is composed.
 */
export const deliveries = pgTable(
  "deliveries",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    template: text("template").notNull(),
    noticeId: uuid("notice_id"),
    invitationId: uuid("invitation_id"),
    guardianId: uuid("guardian_id"),
    parameters: jsonb("parameters").$type<Record<string, string | number | boolean>>().notNull(),
    state: text("state").notNull().default("waiting"),
    attempts: integer("attempts").notNull().default(0),
    nextAttemptAt: instant("next_attempt_at"),
    lastError: text("last_error"),
    /** The mail service's own id, by which its webhook speaks of the message. */
    providerId: text("provider_id"),
    createdAt: createdAt(),
    sentAt: instant("sent_at"),
    deliveredAt: instant("delivered_at"),
    failedAt: instant("failed_at"),
    urgent: boolean("urgent").notNull().default(false),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    foreignKey({
      columns: [t.organisationId, t.noticeId],
      foreignColumns: [notices.organisationId, notices.id],
    }),
    index("deliveries_state_idx").on(t.organisationId, t.state, t.createdAt),
    index("deliveries_notice_idx").on(t.organisationId, t.noticeId),
    index("deliveries_provider_idx").on(t.organisationId, t.providerId),
    oneOf("deliveries_state", t.state, deliveryStates),
  ],
);
