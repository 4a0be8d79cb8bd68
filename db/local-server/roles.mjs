/** The SQL that makes a new cluster ours: four roles, one database, what the migrations may not do themselves. */

/** The database's name. */
export const DATABASE = "haleside";

/**
 * Roles and the database, run in the cluster's `postgres` database before it is ever reachable.
 *
 * `haleside_owner` may create databases, here only: a test makes copies of its template as the owner.
 *
 * @param {import("./secrets.mjs").Secrets} secrets
 * @returns {string[]} one statement each
 */
export function roleStatements(secrets) {
  const plain = "LOGIN NOSUPERUSER NOCREATEROLE NOREPLICATION";
  return [
    `ALTER ROLE postgres PASSWORD ${quote(secrets.superuser)}`,
    `CREATE ROLE haleside_owner ${plain} NOBYPASSRLS CREATEDB PASSWORD ${quote(secrets.owner)}`,
    `CREATE ROLE haleside_app ${plain} NOBYPASSRLS NOCREATEDB NOINHERIT PASSWORD ${quote(secrets.app)}`,
    `CREATE ROLE haleside_auth ${plain} NOBYPASSRLS NOCREATEDB NOINHERIT PASSWORD ${quote(secrets.auth)}`,
    `CREATE ROLE haleside_maintenance ${plain} BYPASSRLS NOCREATEDB NOINHERIT PASSWORD ${quote(secrets.maintenance)}`,
    `CREATE DATABASE ${DATABASE} OWNER haleside_owner TEMPLATE template0 ENCODING 'UTF8'`,
    `REVOKE ALL ON DATABASE ${DATABASE} FROM PUBLIC`,
    `GRANT CONNECT ON DATABASE ${DATABASE} TO haleside_app, haleside_auth, haleside_maintenance`,
    "REVOKE ALL ON DATABASE postgres FROM PUBLIC",
    "GRANT CONNECT ON DATABASE postgres TO haleside_owner",
    "REVOKE ALL ON DATABASE template1 FROM PUBLIC",
  ];
}

/**
 * Run in the new database: the extensions that only a superuser may make, and a `public` schema that nobody but
 * the owner makes anything in. (Without `USAGE` the other roles could not call the extensions' operators.)
 *
 * @returns {string[]} one statement each
 */
export function databaseStatements() {
  return [
    "CREATE EXTENSION btree_gist",
    "CREATE EXTENSION pg_trgm",
    "REVOKE ALL ON SCHEMA public FROM PUBLIC",
    "ALTER SCHEMA public OWNER TO haleside_owner",
    "GRANT USAGE ON SCHEMA public TO haleside_app, haleside_maintenance",
  ];
}

/** @param {string} text */
function quote(text) {
  return `'${text.replaceAll("'", "''")}'`;
}
