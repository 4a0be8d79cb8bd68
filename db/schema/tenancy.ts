import type { PgTable } from "drizzle-orm/pg-core";
import * as accounts from "./accounts";
import * as availability from "./availability";
import type { Role } from "./codes";
import * as evaluation from "./evaluation";
import * as importing from "./imports";
import * as injuring from "./injuries";
import * as noticing from "./notices";
import * as platform from "./platform";
import * as rollups from "./rollups";
import * as roster from "./roster";
import * as sessions from "./sessions";
import * as warmUps from "./warm-ups";

/**
 * Who reaches a transaction: a member's roles, or one of the doors without a member. `job` is a worker of ours,
 * `guardian` holds one notice's link, `invitee` one invitation, `person` is signed in and has chosen no organisation,
 * `sweeper` finds the organisations in which work may be waiting and sees nothing else.
 */
export type Actor = Role | "job" | "guardian" | "invitee" | "person" | "sweeper";
export type Command = "select" | "insert" | "update" | "delete";

export type Access = {
  table: PgTable;
  /** Who may run which command; a command that is not named is granted to nobody. */
  allow: Partial<Record<Command, readonly Actor[]>>;
  /** Columns the application may update, where not all. */
  updateColumns?: readonly string[];
  /** A further condition for an actor, by command: SQL over the row. */
  only?: Partial<Record<Actor, Partial<Record<Command, string>>>>;
  /** Rows a signed-in person may read before an organisation is chosen. */
  personRows?: string;
  /** Rows of every organisation are visible to the sweeper. */
  sweeperSees?: true;
};

const staff = ["admin", "lead", "trainer", "job"] as const;
const everyone = ["admin", "lead", "trainer", "coach", "job"] as const;
const clinical = ["lead", "trainer", "job"] as const;

export const organisationNow = "(select nullif(current_setting('app.organisation_id', true), '')::uuid)";
const personNow = "(select nullif(current_setting('app.person_id', true), '')::uuid)";
const doorNow = "(select nullif(current_setting('app.door_id', true), '')::uuid)";

const own = `person_id = ${personNow}`;

/** The one table of tenancy and grants. It generates row-level security, policies and grants; a catalogue test compares. */
export const tenancy: readonly Access[] = [
  {
    table: accounts.organisations,
    allow: { select: [...everyone, "guardian", "invitee"], update: ["admin"] },
    personRows: `exists (select 1 from memberships m where m.organisation_id = organisations.organisation_id and m.person_id = ${personNow} and m.ended_at is null)`,
    sweeperSees: true,
  },
  { table: accounts.organisationKeys, allow: { select: [...everyone, "guardian", "invitee"] } },
  {
    table: accounts.sportRules,
    allow: { select: everyone, insert: ["admin"], update: ["admin"], delete: ["admin"] },
  },
  {
    table: accounts.memberships,
    allow: { select: [...everyone, "invitee"], insert: ["invitee"], update: ["admin", "invitee"] },
    only: { invitee: { select: own, insert: own, update: own } },
    personRows: own,
  },
  {
    table: accounts.membershipRoles,
    allow: {
      select: [...everyone, "invitee"],
      insert: ["admin", "invitee"],
      update: ["lead", "invitee"],
      delete: ["admin"],
    },
    updateColumns: ["confirmed_by", "confirmed_at"],
    only: { invitee: { select: own, insert: own, update: own } },
    personRows: own,
  },
  {
    table: accounts.membershipTeams,
    allow: { select: [...everyone, "invitee"], insert: ["admin", "invitee"], delete: ["admin"] },
    only: { invitee: { select: own, insert: own } },
    personRows: own,
  },
  {
    table: accounts.seasons,
    allow: { select: everyone, insert: ["admin"], update: ["admin"], delete: ["admin"] },
  },
  {
    table: accounts.teams,
    allow: { select: [...everyone, "invitee"], insert: staff, update: staff, delete: staff },
  },
  {
    table: accounts.invitations,
    allow: {
      select: ["admin", "lead", "job", "invitee"],
      insert: ["admin"],
      update: ["admin", "lead", "invitee"],
    },
    updateColumns: [
      "confirmed_by",
      "confirmed_at",
      "accepted_by",
      "accepted_at",
      "revoked_at",
      "token_hash",
      "expires_at",
    ],
    only: { invitee: { select: `id = ${doorNow}`, update: `id = ${doorNow}` } },
  },
  { table: roster.athletes, allow: { select: everyone, insert: staff, update: staff, delete: staff } },
  {
    table: roster.safeguardingHolds,
    allow: { select: clinical, insert: clinical, update: clinical },
    updateColumns: ["lifted_by", "lifted_at"],
  },
  {
    table: roster.actionAlerts,
    allow: { select: everyone, insert: staff, update: staff },
    updateColumns: ["ended_at"],
  },
  { table: roster.earlierInjuries, allow: { select: clinical, insert: clinical } },
  { table: roster.guardians, allow: { select: staff, insert: staff, update: staff, delete: staff } },
  { table: roster.guardianships, allow: { select: staff, insert: staff, update: staff, delete: staff } },
  { table: roster.rosterEntries, allow: { select: everyone, insert: staff, update: staff, delete: staff } },
  { table: sessions.venues, allow: { select: everyone, insert: staff, update: staff } },
  {
    table: sessions.sessions,
    allow: { select: everyone, insert: everyone, update: everyone, delete: staff },
  },
  {
    table: sessions.participations,
    allow: { select: everyone, insert: everyone, update: everyone, delete: everyone },
  },
  { table: warmUps.programmes, allow: { select: everyone, insert: staff } },
  { table: warmUps.exercises, allow: { select: everyone, insert: staff } },
  { table: warmUps.programmeAssignments, allow: { select: everyone, insert: staff, update: staff } },
  {
    table: warmUps.warmUps,
    allow: { select: everyone, insert: everyone, update: everyone, delete: everyone },
  },
  { table: warmUps.warmUpAthletes, allow: { select: everyone, insert: everyone, delete: everyone } },
  {
    table: injuring.injuries,
    allow: { select: clinical, insert: clinical, update: clinical },
    updateColumns: ["version"],
  },
  { table: injuring.injuryRevisions, allow: { select: clinical, insert: clinical } },
  { table: injuring.injuryDiagnoses, allow: { select: clinical, insert: clinical } },
  { table: injuring.injuryNotes, allow: { select: clinical, insert: clinical } },
  { table: injuring.coachReports, allow: { select: clinical, insert: [...clinical, "coach"] } },
  { table: injuring.coachReportOutcomes, allow: { select: clinical, insert: clinical } },
  { table: injuring.encounters, allow: { select: clinical, insert: clinical } },
  { table: injuring.noInjuryWeeks, allow: { select: everyone, insert: [...clinical, "coach"] } },
  {
    table: availability.availabilityReasons,
    allow: { select: clinical, insert: [...clinical, "coach"] },
    only: { coach: { insert: "cause = 'coach_report'" } },
  },
  {
    table: availability.availabilityChanges,
    allow: { select: everyone, insert: [...clinical, "coach"] },
    only: { coach: { insert: "state = 'unavailable'" } },
  },
  {
    table: noticing.notices,
    allow: { select: [...clinical, "guardian"], insert: clinical },
    only: { guardian: { select: `id = ${doorNow}` } },
  },
  {
    table: noticing.noticeLinks,
    allow: { select: [...clinical, "guardian"], insert: clinical, update: [...clinical, "guardian"] },
    updateColumns: ["tries", "open_hash", "open_until"],
    only: { guardian: { select: `notice_id = ${doorNow}`, update: `notice_id = ${doorNow}` } },
  },
  {
    table: noticing.noticeEvents,
    allow: { select: [...clinical, "guardian"], insert: [...clinical, "guardian"] },
    only: { guardian: { select: `notice_id = ${doorNow}`, insert: `notice_id = ${doorNow}` } },
  },
  {
    table: noticing.deliveries,
    allow: { select: [...staff, "guardian"], insert: [...staff, "guardian"], update: staff },
    only: { guardian: { select: `notice_id = ${doorNow}`, insert: `notice_id = ${doorNow}` } },
  },
  { table: importing.imports, allow: { select: staff, insert: staff, update: staff } },
  { table: importing.importChunks, allow: { select: staff, insert: staff, delete: staff } },
  { table: importing.importRows, allow: { select: staff, insert: staff, delete: staff } },
  { table: importing.importChanges, allow: { select: staff, insert: staff } },
  { table: importing.importAliases, allow: { select: staff, insert: staff, update: staff } },
  {
    table: platform.operations,
    allow: { select: everyone, insert: everyone, update: everyone },
    updateColumns: ["result"],
    only: Object.fromEntries(everyone.map((actor) => [actor, { select: own, update: own }])),
  },
  {
    table: platform.auditEvents,
    allow: { select: ["admin", "lead", "job"], insert: [...everyone, "guardian", "invitee"] },
  },
  // The plan counts for the organisation, so it is the lead's alone; whoever reads clinical rates reads it.
  { table: evaluation.evaluationPlans, allow: { select: clinical, insert: ["lead"] } },
  { table: rollups.exposureRollup, allow: { select: staff, insert: ["job"], delete: ["job"] } },
  // Not the administrator's: single injuries by team, day, sex and age could be told apart.
  { table: rollups.injuryRollup, allow: { select: clinical, insert: ["job"], delete: ["job"] } },
  {
    table: rollups.rollupMarks,
    // Whoever may write a record marks it, by the triggers of its table. A mark says which athlete or session an injury
    // or an availability was of, so it is read by those who read injuries.
    allow: { select: clinical, insert: everyone, delete: ["job"] },
    sweeperSees: true,
  },
  { table: platform.auditSeals, allow: { select: ["admin", "lead", "job"], insert: ["job"] } },
  {
    table: platform.formDrafts,
    allow: { select: clinical, insert: clinical, update: clinical, delete: clinical },
    only: Object.fromEntries(
      clinical.map((actor) => [actor, { select: own, insert: own, update: own, delete: own }]),
    ),
  },
];
