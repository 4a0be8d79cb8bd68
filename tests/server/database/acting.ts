import { getTableName, sql } from "drizzle-orm";
import { type Scope, sqlState, type Tx, write } from "~db/client.server";
import { type Actor, tenancy } from "~db/schema/tenancy";
import { scopeOf } from "../../harness";
import { type Planted, primaryKeyOf } from "./plant";

/** Acting in the database as one of the actors, through the application's own write, and undoing it. */

export const commands = ["select", "insert", "update", "delete"] as const;
type Command = (typeof commands)[number];

export const members = ["admin", "lead", "trainer", "coach"] as const;
export const actors: readonly Actor[] = [...members, "job", "guardian", "invitee", "person", "sweeper"];
/** Actors who act before or outside any organisation. */
export const outside: readonly Actor[] = ["person", "sweeper"];

export class Undone extends Error {}

/** Runs in a scope and undoes it. */
export async function trying<T>(scope: Scope, fn: (tx: Tx) => Promise<T>): Promise<T> {
  let result: { value: T } | undefined;
  await write(scope, async (tx) => {
    result = { value: await fn(tx) };
    throw new Undone();
  }).catch((error: unknown) => {
    if (!(error instanceof Undone)) throw error;
  });
  if (!result) throw new Error("Nothing ran.");
  return result.value;
}

/** What came of a statement: how many rows it met, or the state it was refused with. The transaction goes on. */
export async function outcome(tx: Tx, text: string, values: unknown[] = []): Promise<number | string> {
  const chunks = text.split(/\$\d+/);
  const query = sql.join(
    chunks.flatMap((chunk, index) =>
      index < values.length ? [sql.raw(chunk), sql`${plain(values[index])}`] : [sql.raw(chunk)],
    ),
  );
  try {
    return await tx.transaction(async (inner) => (await inner.execute(query)).count);
  } catch (error) {
    const state = sqlState(error);
    if (!state) throw error;
    return state;
  }
}

/** Drizzle hands parameters on as they are: what is neither text nor bytes goes as text. */
function plain(value: unknown) {
  if (value instanceof Date) return value.toISOString();
  const isObject = typeof value === "object" && value !== null && !Buffer.isBuffer(value);
  return sql.param(isObject && !Array.isArray(value) ? JSON.stringify(value) : value);
}

export const denied = "42501";

/** A condition that finds one row by its key. */
function byKey(name: string, planted: Planted) {
  const row = planted.rows.get(name) ?? {};
  const entry = tenancy.find(({ table }) => getTableName(table) === name);
  const keys = entry ? primaryKeyOf(entry.table) : [];
  return {
    text: keys.map((key, index) => `${key} = $${index + 1}`).join(" and "),
    values: keys.map((key) => row[key]),
  };
}

export function statement(name: string, command: Command, planted: Planted, updates: readonly string[]) {
  const { text, values } = byKey(name, planted);
  if (command === "select") return { text: `select * from ${name} where ${text}`, values };
  if (command === "delete") return { text: `delete from ${name} where ${text}`, values };
  const column = updates[0] ?? "organisation_id";
  return { text: `update ${name} set ${column} = ${column} where ${text}`, values };
}

export const doorOf = (planted: Planted, actor: Actor) =>
  String(planted.rows.get(actor === "invitee" ? "invitations" : "notices")?.id);

/** The scope of an actor in a planted organisation, bound to the records there. */
export function scopeFor(actor: Actor, bound: Planted): Scope {
  const id = outside.includes(actor) ? "" : bound.organisationId;
  const place = { id, slug: "", timeZone: "UTC" };
  const person = actor === "sweeper" || actor === "guardian" ? null : bound.personId;
  const door = actor === "guardian" || actor === "invitee" ? { doorId: doorOf(bound, actor) } : {};
  return scopeOf(place, [actor], { personId: person, ...door });
}

export const cases = tenancy.map((entry) => ({ ...entry, name: getTableName(entry.table) }));
