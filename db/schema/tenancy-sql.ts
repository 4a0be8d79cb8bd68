import { getTableName } from "drizzle-orm";
import { type Access, type Command, organisationNow } from "./tenancy";

/** The row-level security, policies and grants that follow from the table of tenancy (tenancy.ts). */

export const applicationRole = "haleside_app";
export const authRole = "haleside_auth";
export const maintenanceRole = "haleside_maintenance";

const actorsNow = "string_to_array(nullif(current_setting('app.actors', true), ''), ',')";

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
