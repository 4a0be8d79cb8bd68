import {
  boolean,
  date,
  foreignKey,
  index,
  integer,
  pgTable,
  primaryKey,
  text,
  time,
  uuid,
} from "drizzle-orm/pg-core";
import { teams } from "./accounts";
import { allOf, oneOf } from "./check";
import {
  bodyAreas,
  certainties,
  contacts,
  encounterKinds,
  firstCare,
  movements,
  onsets,
  pathologies,
  referrals,
  sides,
  signs,
  subsequences,
  surfaces,
  tissues,
} from "./codes";
import { actor, createdAt, instant, organisationId, sealed } from "./columns";
import { athletes } from "./roster";
import { sessions } from "./sessions";

/**
 * The identity of an injury. What is known of it stands in injury_revisions, insert-only: nothing clinical is
 * ever overwritten. `version` points to the current revision and is the only column the application may update.
 */
export const injuries = pgTable(
  "injuries",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    createdBy: actor("created_by"),
    createdAt: createdAt(),
    version: integer("version").notNull().default(1),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    index("injuries_athlete_idx").on(t.organisationId, t.athleteId),
  ],
);

export const injuryRevisions = pgTable(
  "injury_revisions",
  {
    organisationId: organisationId(),
    injuryId: uuid("injury_id").notNull(),
    version: integer("version").notNull(),
    recordedBy: actor("recorded_by"),
    recordedAt: instant("recorded_at").notNull().defaultNow(),
    changeReason: text("change_reason"),
    // now
    onsetDay: date("onset_day", { mode: "string" }).notNull(),
    onsetTime: time("onset_time", { precision: 0 }),
    sessionId: uuid("session_id"),
    outsideSport: boolean("outside_sport").notNull().default(false),
    bodyArea: text("body_area").notNull(),
    side: text("side").notNull(),
    suspectedConcussion: boolean("suspected_concussion").notNull().default(false),
    couldContinue: boolean("could_continue"),
    // how
    onset: text("onset"),
    contact: text("contact"),
    movement: text("movement"),
    minuteOfPlay: integer("minute_of_play"),
    surface: text("surface"),
    footwear: text("footwear"),
    warmedUp: boolean("warmed_up"),
    // signs, first care
    signs: text("signs").array().notNull(),
    swellingNoticed: text("swelling_noticed"),
    firstCare: text("first_care").array().notNull(),
    referredTo: text("referred_to").array().notNull(),
    phoned: sealed("phoned"),
    // what: the principal diagnosis; further ones stand in injury_diagnoses
    tissue: text("tissue"),
    pathology: text("pathology"),
    diagnosis: sealed("diagnosis"),
    certainty: text("certainty"),
    surgery: boolean("surgery"),
    surgeryDay: date("surgery_day", { mode: "string" }),
    description: sealed("description"),
    // course
    subsequence: text("subsequence"),
    subsequentTo: uuid("subsequent_to"),
    closedOn: date("closed_on", { mode: "string" }),
    /** A record made in error: kept for ever, counted nowhere. */
    withdrawn: boolean("withdrawn").notNull().default(false),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.injuryId, t.version] }),
    foreignKey({
      columns: [t.organisationId, t.injuryId],
      foreignColumns: [injuries.organisationId, injuries.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.sessionId],
      foreignColumns: [sessions.organisationId, sessions.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.subsequentTo],
      foreignColumns: [injuries.organisationId, injuries.id],
    }),
    index("injury_revisions_onset_idx").on(t.organisationId, t.onsetDay),
    oneOf("injury_revisions_area", t.bodyArea, bodyAreas),
    oneOf("injury_revisions_side", t.side, sides),
    oneOf("injury_revisions_onset", t.onset, onsets),
    oneOf("injury_revisions_contact", t.contact, contacts),
    oneOf("injury_revisions_movement", t.movement, movements),
    oneOf("injury_revisions_surface", t.surface, surfaces),
    oneOf("injury_revisions_tissue", t.tissue, tissues),
    oneOf("injury_revisions_pathology", t.pathology, pathologies),
    oneOf("injury_revisions_certainty", t.certainty, certainties),
    oneOf("injury_revisions_subsequence", t.subsequence, subsequences),
    allOf("injury_revisions_signs", t.signs, signs),
    allOf("injury_revisions_first_care", t.firstCare, firstCare),
    allOf("injury_revisions_referred_to", t.referredTo, referrals),
  ],
);

/** Further diagnoses of the same event. They never count as injuries of their own. Insert-only, by revision. */
export const injuryDiagnoses = pgTable(
  "injury_diagnoses",
  {
    organisationId: organisationId(),
    injuryId: uuid("injury_id").notNull(),
    version: integer("version").notNull(),
    position: integer("position").notNull(),
    tissue: text("tissue").notNull(),
    pathology: text("pathology").notNull(),
    diagnosis: sealed("diagnosis"),
    certainty: text("certainty").notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.injuryId, t.version, t.position] }),
    foreignKey({
      columns: [t.organisationId, t.injuryId, t.version],
      foreignColumns: [injuryRevisions.organisationId, injuryRevisions.injuryId, injuryRevisions.version],
    }),
    oneOf("injury_diagnoses_tissue", t.tissue, tissues),
    oneOf("injury_diagnoses_pathology", t.pathology, pathologies),
    oneOf("injury_diagnoses_certainty", t.certainty, certainties),
  ],
);

/** Follow-up notes: dated, signed, never changed. */
export const injuryNotes = pgTable(
  "injury_notes",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    injuryId: uuid("injury_id").notNull(),
    text: sealed("text").notNull(),
    writtenBy: actor("written_by"),
    writtenAt: instant("written_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.injuryId],
      foreignColumns: [injuries.organisationId, injuries.id],
    }),
    index("injury_notes_injury_idx").on(t.organisationId, t.injuryId),
  ],
);

/** Sent by whoever was there when no athletic trainer was. Not readable by coaches afterwards. */
export const coachReports = pgTable(
  "coach_reports",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    sessionId: uuid("session_id"),
    onsetDay: date("onset_day", { mode: "string" }).notNull(),
    onsetTime: time("onset_time", { precision: 0 }),
    bodyArea: text("body_area").notNull(),
    side: text("side").notNull(),
    suspectedConcussion: boolean("suspected_concussion").notNull().default(false),
    couldContinue: boolean("could_continue"),
    signs: text("signs").array().notNull(),
    phoned: sealed("phoned"),
    note: sealed("note"),
    reportedBy: actor("reported_by"),
    reportedAt: instant("reported_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.sessionId],
      foreignColumns: [sessions.organisationId, sessions.id],
    }),
    oneOf("coach_reports_area", t.bodyArea, bodyAreas),
    oneOf("coach_reports_side", t.side, sides),
    allOf("coach_reports_signs", t.signs, signs),
  ],
);

/** What became of a coach's report: an injury, or closed with a reason. Insert-only, one per report. */
export const coachReportOutcomes = pgTable(
  "coach_report_outcomes",
  {
    organisationId: organisationId(),
    reportId: uuid("report_id").notNull(),
    injuryId: uuid("injury_id"),
    reason: sealed("reason"),
    decidedBy: actor("decided_by"),
    decidedAt: instant("decided_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.reportId] }),
    foreignKey({
      columns: [t.organisationId, t.reportId],
      foreignColumns: [coachReports.organisationId, coachReports.id],
    }),
    foreignKey({
      columns: [t.organisationId, t.injuryId],
      foreignColumns: [injuries.organisationId, injuries.id],
    }),
  ],
);

/** An athlete seen by the athletic trainer without a new injury. */
export const encounters = pgTable(
  "encounters",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    athleteId: uuid("athlete_id").notNull(),
    day: date("day", { mode: "string" }).notNull(),
    kind: text("kind").notNull(),
    minutes: integer("minutes"),
    note: sealed("note"),
    recordedBy: actor("recorded_by"),
    recordedAt: instant("recorded_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      columns: [t.organisationId, t.athleteId],
      foreignColumns: [athletes.organisationId, athletes.id],
    }),
    index("encounters_day_idx").on(t.organisationId, t.day),
    oneOf("encounters_kind", t.kind, encounterKinds),
  ],
);

/**
 * A team's week in which somebody who knows confirmed that nobody was newly hurt. Without it, a week without an injury
 * reads "not reported". Insert-only: an injury that is entered later for that week counts all the same.
 */
export const noInjuryWeeks = pgTable(
  "no_injury_weeks",
  {
    organisationId: organisationId(),
    teamId: uuid("team_id").notNull(),
    /** The Monday (ISO 8601). */
    weekStart: date("week_start", { mode: "string" }).notNull(),
    confirmedBy: actor("confirmed_by"),
    confirmedAt: instant("confirmed_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.teamId, t.weekStart] }),
    foreignKey({
      columns: [t.organisationId, t.teamId],
      foreignColumns: [teams.organisationId, teams.id],
    }),
  ],
);
