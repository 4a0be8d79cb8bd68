import { type Column, getTableName, getViewName, is, type SQL, sql, View } from "drizzle-orm";

/**
 * A column with its table's name. Among the selected fields of a statement with one table Drizzle leaves the name
 * out; inside a correlated sub-select the bare name would then mean the inner table's column.
 */
export function qualified(column: Column): SQL {
  const source: unknown = column.table;
  const name = is(source, View) ? getViewName(source) : getTableName(column.table);
  return sql`${sql.identifier(name)}.${sql.identifier(column.name)}`;
}
