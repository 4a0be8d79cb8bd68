import { date, foreignKey, index, integer, pgTable, primaryKey, text, uuid } from "drizzle-orm/pg-core";
import { allOf, oneOf } from "./check";
import { availabilityCauses, availabilityStates, restrictions } from "./codes";
import { actor, instant, organisationId } from "./columns";
import { coachReports, injuries } from "./injuries";
import { athletes } from "./roster";

/**
 * Why an athlete is not fully available. Clinical: coaches never read it. One row per reason; the dated
 * changes it owns stand in availability_changes, which coaches read and which holds no injury id.
 */
export const availabilityReasons = pgTable(
  "availability_reasons",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    cause: text("cause").notNull(),
    injuryId: uuid("injury_id"),
    reportId: uuid("report_id"),
    recordedBy: actor("recorded_by"),
    recordedAt: instant("recorded_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.injuryId],
      foreignColumns: [injuries.organisationId, injuries.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.reportId],
      foreignColumns: [coachReports.organisationId, coachReports.id],
    }),
    index("availability_reasons_injury_idx").on(t.organisationId, t.injuryId),
    index("availability_reasons_athlete_idx").on(t.organisationId, t.athleteId),
    oneOf("availability_reasons_cause", t.cause, availabilityCauses),
  ],
);

/**
 * Dated changes, insert-only. A change holds from its day until the day before the next change of the same
 * reason, so the contributions of one reason can never overlap; of two changes on one day the later `seq` counts,
 * which is how a correction is made without losing the earlier value.
 */
export const availabilityChanges = pgTable(
  "availability_changes",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    reasonId: uuid("reason_id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    fromDay: date("from_day", { mode: "string" }).notNull(),
    state: text("state").notNull(),
    restrictions: text("restrictions").array().notNull(),
    /** Minutes allowed when the restrictions hold minutes_limit. */
    minutesLimit: integer("minutes_limit"),
    expectedOn: date("expected_on", { mode: "string" }),
    setBy: actor("set_by"),
    setAt: instant("set_at").notNull().defaultNow(),
    /** Order of entry within the reason. */
    seq: integer("seq").notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.reasonId],
      foreignColumns: [availabilityReasons.organisationId, availabilityReasons.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    index("availability_changes_athlete_idx").on(t.organisationId, t.athleteId, t.fromDay),
    index("availability_changes_reason_idx").on(t.organisationId, t.reasonId, t.seq),
    oneOf("availability_changes_state", t.state, availabilityStates),
    allOf("availability_changes_restrictions", t.restrictions, restrictions),
  ],
);
