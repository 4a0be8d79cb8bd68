import { sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { type BulkTable, bulkTables } from "./matching/records";

const org = (tx: Tx) => sql`${tx.scope.organisationId}::uuid`;

const keysOf: Record<BulkTable, readonly string[]> = {
  teams: ["id"],
  athletes: ["id"],
  guardians: ["id"],
  guardianships: ["athlete_id", "guardian_id"],
  roster_entries: ["id"],
  sessions: ["id"],
  participations: ["session_id", "athlete_id"],
};
/** What a person calls a record, in SQL over its row `t`. */
const nameOf: Record<BulkTable, string> = {
  teams: "t.name",
  athletes: "t.given_name || ' ' || t.family_name",
  guardians: "'guardian ' || t.name",
  guardianships:
    "(select 'guardian of ' || a.given_name || ' ' || a.family_name from athletes a where a.organisation_id = t.organisation_id and a.id = t.athlete_id)",
  roster_entries:
    "(select a.given_name || ' ' || a.family_name from athletes a where a.organisation_id = t.organisation_id and a.id = t.athlete_id) || ' in ' || (select m.name from teams m where m.organisation_id = t.organisation_id and m.id = t.team_id)",
  sessions:
    "(select m.name from teams m where m.organisation_id = t.organisation_id and m.id = t.team_id) || ', ' || t.kind || ' of ' || t.day",
  participations:
    "(select a.given_name || ' ' || a.family_name from athletes a where a.organisation_id = t.organisation_id and a.id = t.athlete_id) || ', session of ' || (select s.day::text from sessions s where s.organisation_id = t.organisation_id and s.id = t.session_id)",
};

export type Blocker = { table: string; name: string };
const listed = 50;

const keyMatch = (table: BulkTable, row: string) =>
  sql.raw(keysOf[table].map((key) => `${row}.${key} = (c.record_key ->> '${key}')::uuid`).join(" and "));

/** One line per record that the import wrote: its first before-image and the version it was left in. */
const changed = (tx: Tx, importId: string, table: BulkTable) => sql`(
  select record_key, (array_agg(before order by position))[1] as before,
    max(result_version) as version
  from import_changes
  where organisation_id = ${org(tx)} and import_id = ${importId}::uuid and record_table = ${table}
  group by record_key
)`;

/** Records that were edited, or deleted, since the import: undoing would lose that. */
export async function findLaterEdits(tx: Tx, importId: string): Promise<Blocker[]> {
  const blockers: Blocker[] = [];
  for (const table of bulkTables) {
    const rows = await tx.execute(sql`
      select coalesce(${sql.raw(nameOf[table])}, 'a record that is gone') as name
      from ${changed(tx, importId, table)} c
      left join ${sql.identifier(table)} t on t.organisation_id = ${org(tx)} and ${keyMatch(table, "t")}
      where t.version is null or t.version <> c.version
      order by 1 limit ${listed}`);
    blockers.push(...rows.map(({ name }) => ({ table, name: String(name) })));
  }
  return blockers;
}

/** Records that others now refer to and that the import had made: they cannot be taken away. */
export async function findLaterReferences(tx: Tx, importId: string): Promise<Blocker[]> {
  const blockers: Blocker[] = [];
  for (const table of ["teams", "athletes", "guardians", "sessions"] as const) {
    for (const { child, column } of await findForeignKeys(tx, table)) {
      const own = bulkTables.find((name) => name === child);
      const notOwn = own
        ? sql`not exists (select 1 from import_changes c where c.organisation_id = ${org(tx)}
            and c.import_id = ${importId}::uuid and c.record_table = ${own} and c.before is null and ${keyMatch(own, "r")})`
        : sql`true`;
      const rows = await tx.execute(sql`
        select distinct ${sql.raw(nameOf[table])} as name
        from ${changed(tx, importId, table)} c
        join ${sql.identifier(table)} t on t.organisation_id = ${org(tx)} and ${keyMatch(table, "t")}
        join ${sql.identifier(child)} r on r.organisation_id = ${org(tx)} and r.${sql.identifier(column)} = t.id
        where c.before is null and ${notOwn}
        order by 1 limit ${listed}`);
      blockers.push(...rows.map(({ name }) => ({ table: child, name: String(name) })));
    }
  }
  return blockers;
}

/** The tables that refer to a table by its id, from the database's own catalogue. */
async function findForeignKeys(tx: Tx, table: BulkTable) {
  const rows = await tx.execute(sql`
    select child.relname as child, column_.attname as "column"
    from pg_constraint k
    join pg_class child on child.oid = k.conrelid
    join pg_class parent on parent.oid = k.confrelid
    join pg_attribute column_ on column_.attrelid = k.conrelid and column_.attnum = k.conkey[2]
    where k.contype = 'f' and parent.relname = ${table} and parent.relnamespace = 'public'::regnamespace
      and array_length(k.conkey, 1) = 2
      and has_table_privilege(child.oid, 'select')
    order by 1, 2`);
  return rows.map(({ child, column }) => ({ child: String(child), column: String(column) }));
}

/** Whether the import touched a team that is not one of the person's own. */
export async function reachesOtherTeams(tx: Tx, importId: string) {
  const { teams } = tx.scope;
  if (teams === "all") return false;
  const own = sql`${`{${teams.join(",")}}`}::uuid[]`;
  const touched = (table: "sessions" | "roster_entries") => sql`
    select 1 from ${changed(tx, importId, table)} c join ${sql.identifier(table)} t
      on t.organisation_id = ${org(tx)} and ${keyMatch(table, "t")} where not t.team_id = any(${own})`;
  const rows = await tx.execute(sql`${touched("sessions")} union all ${touched("roster_entries")} limit 1`);
  return rows.length > 0;
}

/** Takes away what the import made and puts back what it changed, children before parents. */
export async function takeBack(tx: Tx, importId: string) {
  for (const table of [...bulkTables].reverse()) {
    await tx.execute(sql`
      delete from ${sql.identifier(table)} t using ${changed(tx, importId, table)} c
      where t.organisation_id = ${org(tx)} and c.before is null and ${keyMatch(table, "t")}`);
  }
  for (const table of bulkTables) {
    const columns = await findColumns(tx, table);
    const set = columns.map((name) => `"${name}" = b."${name}"`).join(", ");
    await tx.execute(sql`
      update ${sql.identifier(table)} t set ${sql.raw(set)}
      from ${changed(tx, importId, table)} c
      cross join lateral jsonb_populate_record(null::${sql.identifier(table)}, c.before) b
      where t.organisation_id = ${org(tx)} and c.before is not null and ${keyMatch(table, "t")}`);
  }
}

async function findColumns(tx: Tx, table: BulkTable) {
  const rows = await tx.execute(sql`
    select column_name as name from information_schema.columns
    where table_schema = 'public' and table_name = ${table} order by ordinal_position`);
  const keys = ["organisation_id", ...keysOf[table]];
  return rows.map(({ name }) => String(name)).filter((name) => !keys.includes(name));
}
