import {
  date,
  foreignKey,
  index,
  integer,
  jsonb,
  numeric,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import { organisations, teams } from "./accounts";
import { allOf, oneOf } from "./check";
import { skipReasons, warmUpBlocks, warmUpOutcomes } from "./codes";
import { actor, createdAt, instant, organisationId, version } from "./columns";
import { athletes } from "./roster";
import { sessions } from "./sessions";

export const programmes = pgTable(
  "programmes",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    name: text("name").notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    unique("programmes_name").on(t.organisationId, t.name),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
  ],
);

/** Exercises belong to a version of a programme, so that a record keeps what was done. Insert-only. */
export const exercises = pgTable(
  "exercises",
  {
    organisationId: organisationId(),
    programmeId: uuid("programme_id").notNull(),
    programmeVersion: integer("programme_version").notNull(),
    position: integer("position").notNull(),
    block: text("block").notNull(),
    name: text("name").notNull(),
    dose: text("dose").notNull(),
    cue: text("cue").notNull(),
    progressions: jsonb("progressions").$type<string[]>().notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.programmeId, t.programmeVersion, t.position] }),
    foreignKey({
      columns: [t.organisationId, t.programmeId],
      foreignColumns: [programmes.organisationId, programmes.id],
    }),
    oneOf("exercises_block", t.block, warmUpBlocks),
  ],
);

/** Which programme a team follows from a day on, with the team's targets. */
export const programmeAssignments = pgTable(
  "programme_assignments",
  {
    organisationId: organisationId(),
    teamId: uuid("team_id").notNull(),
    startsOn: date("starts_on", { mode: "string" }).notNull(),
    programmeId: uuid("programme_id").notNull(),
    programmeVersion: integer("programme_version").notNull(),
    /** Target share of held sessions with a warm-up, 0 to 1. */
    targetSessionShare: numeric("target_session_share", { precision: 4, scale: 3, mode: "number" })
      .notNull()
      .default(0.8),
    targetPerWeek: integer("target_per_week").notNull().default(2),
    targetMinutes: integer("target_minutes").notNull().default(15),
    /** Share of the five blocks from which a session counts as compliant, 0 to 1. */
    targetBlockShare: numeric("target_block_share", { precision: 4, scale: 3, mode: "number" })
      .notNull()
      .default(1),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.teamId, t.startsOn] }),
    foreignKey({
      columns: [t.organisationId, t.teamId],
      foreignColumns: [teams.organisationId, teams.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.programmeId],
      foreignColumns: [programmes.organisationId, programmes.id],
    }),
  ],
);

/** The warm-up record of a session. No row: not recorded, which is not the same as skipped. */
export const warmUps = pgTable(
  "warm_ups",
  {
    organisationId: organisationId(),
    sessionId: uuid("session_id").notNull(),
    outcome: text("outcome").notNull(),
    blocks: text("blocks").array().notNull(),
    skipReason: text("skip_reason"),
    skipNote: text("skip_note"),
    minutes: integer("minutes"),
    ledBy: text("led_by"),
    programmeId: uuid("programme_id"),
    programmeVersion: integer("programme_version"),
    recordedBy: actor("recorded_by"),
    recordedAt: instant("recorded_at").notNull().defaultNow(),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.sessionId] }),
    foreignKey({
      columns: [t.organisationId, t.sessionId],
      foreignColumns: [sessions.organisationId, sessions.id],
    }),
    oneOf("warm_ups_outcome", t.outcome, warmUpOutcomes),
    allOf("warm_ups_blocks", t.blocks, warmUpBlocks),
    oneOf("warm_ups_reason", t.skipReason, skipReasons),
  ],
);

/** Who took part in the warm-up. */
export const warmUpAthletes = pgTable(
  "warm_up_athletes",
  {
    organisationId: organisationId(),
    sessionId: uuid("session_id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.sessionId, t.athleteId] }),
    foreignKey({
      columns: [t.organisationId, t.sessionId],
      foreignColumns: [warmUps.organisationId, warmUps.sessionId],
    }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    index("warm_up_athletes_athlete_idx").on(t.organisationId, t.athleteId),
  ],
);
