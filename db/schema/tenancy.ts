import { getTableName } from "drizzle-orm";
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
type Command = "select" | "insert" | "update" | "delete";

type Access = {
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

const organisationNow = "(select nullif(current_setting('app.organisation_id', true), '')::uuid)";
const personNow = "(select nullif(current_setting('app.person_id', true), '')::uuid)";
const doorNow = "(select nullif(current_setting('app.door_id', true), '')::uuid)";
const actorsNow = "string_to_array(nullif(current_setting('app.actors', true), ''), ',')";

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

export const applicationRole = "haleside_app";
export const authRole = "haleside_auth";
export const maintenanceRole = "haleside_maintenance";

const list = (actors: readonly string[]) => `array[${actors.map((actor) => `'${actor}'`).join(", ")}]`;

/**
 * One of the transaction's actors is among these. Asked once a statement, not once a row; and as "not 0", of which the
 * planner expects that it lets every row through, as it does. Of an overlap of arrays it expects one row in two hundred
 * and then joins large tables as if they were small.
 */
const isAmong = (actors: readonly string[]) => `(select (${actorsNow} && ${list(actors)})::int) <> 0`;

/** The condition under which the actors of this transaction may run a command: any one of them suffices. */
function commandCondition({ allow, only }: Access, command: Command) {
  const actors = allow[command] ?? [];
  const limited = actors.filter((actor) => only?.[actor]?.[command]);
  const free = actors.filter((actor) => !limited.includes(actor));
  const parts = limited.map((actor) => `(${isAmong([actor])} and ${only?.[actor]?.[command]})`);
  if (free.length > 0) parts.unshift(isAmong(free));
  return parts.join(" or ");
}

/** SQL that sets row-level security, policies and grants of one table; running it again changes nothing. */
export function tenancySql(access: Access): string[] {
  const name = getTableName(access.table);
  const tenant = `organisation_id = ${organisationNow}`;
  const visible = [
    tenant,
    ...(access.personRows ? [`(${isAmong(["person"])} and ${access.personRows})`] : []),
    ...(access.sweeperSees ? [isAmong(["sweeper"])] : []),
  ].join(" or ");
  const statements = [
    `alter table ${name} enable row level security`,
    `alter table ${name} force row level security`,
    `drop policy if exists tenancy on ${name}`,
    `create policy tenancy on ${name} as permissive for all to public using (${visible}) with check (${tenant})`,
    `revoke all on ${name} from public, ${applicationRole}`,
    `grant select, insert, update, delete, truncate on ${name} to ${maintenanceRole}`,
  ];
  for (const command of ["select", "insert", "update", "delete"] as const) {
    const policy = `${command}_actors`;
    statements.push(`drop policy if exists ${policy} on ${name}`);
    if (!access.allow[command]) continue;
    const condition = commandCondition(access, command);
    const outside = [...(access.personRows ? ["person"] : []), ...(access.sweeperSees ? ["sweeper"] : [])];
    const full =
      command === "select" && outside.length > 0 ? `${condition} or ${isAmong(outside)}` : condition;
    const clause =
      command === "insert"
        ? `with check (${full})`
        : command === "update"
          ? `using (${full}) with check (${full})`
          : `using (${full})`;
    statements.push(`create policy ${policy} on ${name} as restrictive for ${command} to public ${clause}`);
    const columns =
      command === "update" && access.updateColumns ? ` (${access.updateColumns.join(", ")})` : "";
    statements.push(`grant ${command}${columns} on ${name} to ${applicationRole}`);
  }
  return statements;
}

/** Views read with the reader's own rights. */
const readableViews = ["current_injuries", "availability_contributions"];

/** Grants outside the organisations' tables. */
export function platformSql(): string[] {
  return [
    `grant usage on schema public to ${applicationRole}, ${maintenanceRole}`,
    ...readableViews.map((view) => `grant select on ${view} to ${applicationRole}, ${maintenanceRole}`),
    // Which migrations a backup stands at.
    `grant usage on schema drizzle to ${maintenanceRole}`,
    `grant select on all tables in schema drizzle to ${maintenanceRole}`,
    `grant select on all sequences in schema drizzle to ${maintenanceRole}`,
    "revoke all on schema auth from public",
    `grant usage on schema auth to ${authRole}, ${maintenanceRole}`,
    `grant select, insert, update, delete on all tables in schema auth to ${authRole}, ${maintenanceRole}`,
    "revoke all on schema installation from public",
    `grant usage on schema installation to ${applicationRole}, ${maintenanceRole}`,
    `grant select on installation.key_check to ${applicationRole}`,
    `grant select, insert, update, delete on installation.key_check to ${maintenanceRole}`,
  ];
}
