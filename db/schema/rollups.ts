import { sql } from "drizzle-orm";
import {
  boolean,
  date,
  doublePrecision,
  foreignKey,
  integer,
  json,
  pgTable,
  primaryKey,
  smallint,
  text,
  uuid,
} from "drizzle-orm/pg-core";
import { organisations } from "./accounts";
import { oneOf } from "./check";
import { organisationId } from "./columns";

/**
 * What rates read instead of the records: exposure and injuries counted per day beforehand. Rows are replaced whole,
 * never changed, by the job that cleans up after `rollup_marks`. They refer to no record, only to the organisation:
 * a team can be taken away before its rows are, and marks say so.
 */

/** What was written since the roll-ups were last made: ids alone, to be looked up when they are read. */
export const rollupCauses = [
  "session",
  "attendance",
  "athlete",
  "roster",
  "availability",
  "team",
  "sport_rule",
  "injury",
  "organisation",
] as const;

/** Sex, age in completed years (null where it is not known), AEs and hours. */
export type RolledGroup = [sex: string, age: number | null, aes: number, hours: number];

/**
 * Exposure per team, day, kind and grade: the cells of `sumExposureCells`. What sex and age take of it stands in one
 * value: it is always read whole, and as rows of their own they cost more to hand over than to count.
 */
export const exposureRollup = pgTable(
  "exposure_rollup",
  {
    organisationId: organisationId(),
    day: date("day", { mode: "string" }).notNull(),
    teamId: uuid("team_id").notNull(),
    kind: text("kind").notNull(),
    grade: text("grade").notNull(),
    aes: doublePrecision("aes").notNull(),
    hours: doublePrecision("hours").notNull(),
    groups: json("groups").$type<RolledGroup[]>().notNull(),
  },
  (t) => [
    // The day before the team: a season is one stretch of the index, and so is a week.
    primaryKey({
      name: "exposure_rollup_pk",
      columns: [t.organisationId, t.day, t.teamId, t.kind, t.grade],
    }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
  ],
);

/**
 * Injuries per day they are counted on and per whatever decides, apart from the question asked, whether they count.
 * What depends on the question (unit, case definition, sessions, today) is left open: `aes` and `hours` say in which
 * unit there is exposure, `time_loss_from` from which day on there is time loss.
 */
export const injuryRollup = pgTable(
  "injury_rollup",
  {
    organisationId: organisationId(),
    day: date("day", { mode: "string" }).notNull(),
    /** The nil UUID where the injury belongs to no team. */
    teamId: uuid("team_id").notNull(),
    /** Of the session; `none` without one. */
    kind: text("kind").notNull(),
    sex: text("sex").notNull(),
    age: smallint("age").notNull(),
    gradual: boolean("gradual").notNull(),
    /** The first reason that leaves it out whatever is asked; `none` where it may count. */
    leftOut: text("left_out").notNull(),
    aes: boolean("aes").notNull(),
    hours: boolean("hours").notNull(),
    /** The first day of time loss; `infinity` where none was entered. */
    timeLossFrom: date("time_loss_from", { mode: "string" }).notNull(),
    injuries: integer("injuries").notNull(),
  },
  (t) => [
    primaryKey({
      name: "injury_rollup_pk",
      columns: [
        t.organisationId,
        t.day,
        t.teamId,
        t.kind,
        t.sex,
        t.age,
        t.gradual,
        t.leftOut,
        t.aes,
        t.hours,
        t.timeLossFrom,
      ],
    }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
  ],
);

/**
 * What the roll-ups do not hold yet. Written by triggers in the transaction of the change, insert-only, without a key
 * on what they name: a mark that two writers shared could be cleaned away by the first one's commit while the second
 * is still open, and a locked one would make a coach wait for an import. A mark names what changed, not the days it
 * touches: those are looked up by whoever reads the mark, who sees records that were not committed yet when the mark
 * was written. Whoever cleans deletes exactly the marks that were seen.
 */
export const rollupMarks = pgTable(
  "rollup_marks",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull().default(sql`gen_random_uuid()`),
    cause: text("cause").notNull(),
    teamId: uuid("team_id"),
    sessionId: uuid("session_id"),
    athleteId: uuid("athlete_id"),
    injuryId: uuid("injury_id"),
    reasonId: uuid("reason_id"),
    sport: text("sport"),
    fromDay: date("from_day", { mode: "string" }),
    toDay: date("to_day", { mode: "string" }),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    oneOf("rollup_marks_cause", t.cause, rollupCauses),
  ],
);
