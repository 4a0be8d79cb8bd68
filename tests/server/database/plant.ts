import { randomBytes, randomInt, randomUUID } from "node:crypto";
import { getTableName } from "drizzle-orm";
import { getTableConfig, type PgColumn, type PgTable } from "drizzle-orm/pg-core";
import { tenancy } from "~db/schema/tenancy";
import { maintenance, owner } from "../../harness";

/**
 * One row in every table of an organisation, made from the schema itself: a new table is planted without a word here.
 * Columns that may be empty stay empty, unless they refer to another record.
 */

export type Row = Record<string, unknown>;
export type Planted = { organisationId: string; personId: string; rows: ReadonlyMap<string, Row> };

/** The codes that a check allows in a column: the first is planted. */
export async function readCodes() {
  const checks = await owner()<{ table: string; column: string; definition: string }[]>`
    select c.relname as table, a.attname as column, pg_get_constraintdef(k.oid) as definition
    from pg_constraint k join pg_class c on c.oid = k.conrelid
      join pg_attribute a on a.attrelid = c.oid and a.attnum = k.conkey[1]
    where k.contype = 'c' and cardinality(k.conkey) = 1 and c.relnamespace = 'public'::regnamespace`;
  const codes = new Map<string, string>();
  for (const { table, column, definition } of checks) {
    const first = /'([^']+)'::text/.exec(definition)?.[1];
    if (first) codes.set(`${table}.${column}`, first);
  }
  return codes;
}

export type Reference = { columns: string[]; target: string; targets: string[] };

export function referencesOf(table: PgTable): Reference[] {
  return getTableConfig(table).foreignKeys.map((key) => {
    const { columns, foreignColumns, foreignTable } = key.reference();
    return {
      columns: columns.map(({ name }) => name),
      target: getTableName(foreignTable),
      targets: foreignColumns.map(({ name }) => name),
    };
  });
}

/** Tables in an order in which each comes after those it refers to. */
export function inOrder() {
  const left = tenancy.map(({ table }) => ({
    table,
    name: getTableName(table),
    needs: referencesOf(table).map(({ target }) => target),
  }));
  const done: typeof left = [];
  while (left.length > 0) {
    const next = left.findIndex(({ name, needs }) =>
      needs.every((need) => need === name || done.some((table) => table.name === need)),
    );
    const [table] = left.splice(next, 1);
    if (next < 0 || !table) throw new Error("The tables refer to each other in a circle.");
    done.push(table);
  }
  return done;
}

export function primaryKeyOf(table: PgTable): string[] {
  return getTableConfig(table).primaryKeys.flatMap(({ columns }) => columns.map(({ name }) => name));
}

/** A value of a column's type; another one each time. */
function inventValue(column: PgColumn): unknown {
  const type = column.getSQLType();
  if (type.endsWith("[]")) return [];
  if (type === "uuid") return randomUUID();
  if (type === "text") return `x ${randomBytes(6).toString("hex")}`;
  if (type === "boolean") return false;
  if (type === "integer" || type === "bigint") return randomInt(2, 1_000_000);
  if (type === "smallint") return randomInt(2, 30_000);
  if (type.startsWith("numeric") || type === "double precision") return 1;
  if (type === "json" || type === "jsonb") return {};
  if (type === "bytea") return randomBytes(8);
  if (type === "date") return new Date(Date.UTC(2020, 0, randomInt(1, 3000))).toISOString().slice(0, 10);
  if (type.startsWith("timestamp")) return new Date();
  if (type.startsWith("time")) return "10:00";
  throw new Error(`No value is known for a column of the type ${type} (${column.name}).`);
}

/** A row for a table that is not there yet, referring to the planted ones. */
export function makeRow(table: PgTable, planted: Planted, codes: ReadonlyMap<string, string>): Row {
  const name = getTableName(table);
  const keys = primaryKeyOf(table);
  const referred = new Map<string, unknown>();
  for (const { columns, target, targets } of referencesOf(table)) {
    if (target === name) continue;
    for (const [index, column] of columns.entries())
      referred.set(column, planted.rows.get(target)?.[targets[index] ?? ""]);
  }
  const row: Row = {};
  for (const column of getTableConfig(table).columns) {
    const code = codes.get(`${name}.${column.name}`);
    if (column.name === "organisation_id") row[column.name] = planted.organisationId;
    else if (referred.has(column.name)) row[column.name] = referred.get(column.name);
    else if (column.name === "person_id") row[column.name] = planted.personId;
    else if (code) row[column.name] = column.getSQLType().endsWith("[]") ? [code] : code;
    else if ((column.notNull && !column.hasDefault) || keys.includes(column.name))
      row[column.name] = inventValue(column);
  }
  return row;
}

/** The statement of an insert and its parameters, in the database's own words. */
export function insertOf(table: string, row: Row) {
  const columns = Object.keys(row);
  return {
    text: `insert into ${table} (${columns.join(", ")}) values (${columns.map((_, index) => `$${index + 1}`).join(", ")})`,
    values: Object.values(row),
  };
}

/** Plants a row in every table of an organisation that has been founded. */
export async function plant(
  organisationId: string,
  personId: string,
  codes: ReadonlyMap<string, string>,
): Promise<Planted> {
  const rows = new Map<string, Row>([["organisations", { organisation_id: organisationId }]]);
  const planted = { organisationId, personId, rows };
  for (const { table, name } of inOrder()) {
    if (name === "organisations") continue;
    const row = makeRow(table, planted, codes);
    await maintenance()`insert into ${maintenance()(name)} ${maintenance()(row as Record<string, string>)}`;
    rows.set(name, row);
  }
  // An injury points to its current revision, and a revision planted anew has another number each time.
  await maintenance()`update injuries i set version = r.version from injury_revisions r
    where i.organisation_id = ${organisationId} and r.organisation_id = i.organisation_id and r.injury_id = i.id`;
  return planted;
}
