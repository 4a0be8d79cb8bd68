import {
  date,
  foreignKey,
  index,
  integer,
  numeric,
  pgTable,
  primaryKey,
  text,
  time,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import { organisations, teams } from "./accounts";
import { oneOf } from "./check";
import { exposureGrades, presences, sessionKinds, sessionStates, surfaces } from "./codes";
import { actor, createdAt, instant, organisationId, version } from "./columns";
import { athletes } from "./roster";

export const venues = pgTable(
  "venues",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    name: text("name").notNull(),
    address: text("address").notNull().default(""),
    access: text("access").notNull().default(""),
    defibrillator: text("defibrillator").notNull().default(""),
    emergencyNumbers: text("emergency_numbers").notNull().default(""),
    surface: text("surface"),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    unique("venues_name").on(t.organisationId, t.name),
  ],
);

/** One training, match or other organised activity of a team. Day and start are the organisation's calendar and clock. */
export const sessions = pgTable(
  "sessions",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    teamId: uuid("team_id").notNull(),
    day: date("day", { mode: "string" }).notNull(),
    startTime: time("start_time", { precision: 0 }),
    kind: text("kind").notNull(),
    state: text("state").notNull().default("planned"),
    plannedMinutes: integer("planned_minutes"),
    actualMinutes: integer("actual_minutes"),
    /** Minutes after which an abandoned session stopped. */
    abandonedAfter: integer("abandoned_after"),
    cancelReason: text("cancel_reason"),
    surface: text("surface"),
    venueId: uuid("venue_id"),
    /** The one grade of this session's exposure; "none" until something is entered. */
    exposureGrade: text("exposure_grade").notNull().default("none"),
    headcount: integer("headcount"),
    headcountMinutes: numeric("headcount_minutes", { precision: 6, scale: 2, mode: "number" }),
    createdBy: actor("created_by"),
    createdAt: createdAt(),
    updatedAt: instant("updated_at").notNull().defaultNow(),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.teamId],
      foreignColumns: [teams.organisationId, teams.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.venueId],
      foreignColumns: [venues.organisationId, venues.id],
    }),
    index("sessions_team_day_idx").on(t.organisationId, t.teamId, t.day),
    index("sessions_day_idx").on(t.organisationId, t.day),
    oneOf("sessions_kind", t.kind, sessionKinds),
    oneOf("sessions_state", t.state, sessionStates),
    oneOf("sessions_grade", t.exposureGrade, exposureGrades),
    oneOf("sessions_surface", t.surface, surfaces),
  ],
);

/** One athlete in one session. Only "took_part" with minutes above zero is an exposure. */
export const participations = pgTable(
  "participations",
  {
    organisationId: organisationId(),
    sessionId: uuid("session_id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    presence: text("presence").notNull(),
    minutes: numeric("minutes", { precision: 6, scale: 2, mode: "number" }).notNull().default(0),
    recordedBy: actor("recorded_by"),
    recordedAt: instant("recorded_at").notNull().defaultNow(),
    version: version(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.sessionId, t.athleteId] }),
    foreignKey({
      columns: [t.organisationId, t.sessionId],
      foreignColumns: [sessions.organisationId, sessions.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    index("participations_athlete_idx").on(t.organisationId, t.athleteId),
    oneOf("participations_presence", t.presence, presences),
  ],
);
