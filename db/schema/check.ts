import { type AnyColumn, sql } from "drizzle-orm";
import { check } from "drizzle-orm/pg-core";

/** A check that a text column holds one of the codes (or null, where the column allows it). */
export function oneOf(name: string, column: AnyColumn, codes: readonly string[]) {
  const list = sql.raw(codes.map((code) => `'${code}'`).join(", "));
  return check(name, sql`${column} in (${list})`);
}

/** A check that a text array holds only the codes. */
export function allOf(name: string, column: AnyColumn, codes: readonly string[]) {
  const list = sql.raw(codes.map((code) => `'${code}'`).join(", "));
  return check(name, sql`${column} <@ array[${list}]::text[]`);
}
