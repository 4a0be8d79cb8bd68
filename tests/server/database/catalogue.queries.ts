import type postgres from "postgres";
import { owner } from "../../harness";

/** What PostgreSQL's own catalogue says of the schema `public`, leaving out what the extensions brought. */

const own = `c.relnamespace = 'public'::regnamespace and not exists (
  select 1 from pg_depend d where d.objid = c.oid and d.deptype = 'e')`;

export function listTables() {
  return owner().unsafe<{ name: string; secured: boolean; forced: boolean; owner: string }[]>(`
    select c.relname as name, c.relrowsecurity as secured, c.relforcerowsecurity as forced,
      pg_get_userbyid(c.relowner) as owner
    from pg_class c where ${own} and c.relkind in ('r', 'p', 'f') order by 1`);
}

export function listViews() {
  return owner().unsafe<{ name: string; kind: string; options: string[] | null }[]>(`
    select c.relname as name, c.relkind::text as kind, c.reloptions as options
    from pg_class c where ${own} and c.relkind in ('v', 'm') order by 1`);
}

/** Every index, the primary key's and the constraints' own among them, with its columns in order. */
export function listIndexes() {
  return owner().unsafe<
    { table: string; name: string; unique: boolean; primary: boolean; columns: string[] }[]
  >(`
    select c.relname as table, i.relname as name, x.indisunique as unique, x.indisprimary as primary,
      array(select coalesce(a.attname, '(expression)') from unnest(x.indkey) with ordinality k(number, place)
        left join pg_attribute a on a.attrelid = c.oid and a.attnum = k.number order by k.place) as columns
    from pg_index x join pg_class c on c.oid = x.indrelid join pg_class i on i.oid = x.indexrelid
    where ${own} order by 1, 2`);
}

export function listForeignKeys() {
  return owner().unsafe<
    { table: string; name: string; target: string; schema: string; columns: string[]; targets: string[] }[]
  >(`
    select c.relname as table, k.conname as name, t.relname as target, t.relnamespace::regnamespace::text as schema,
      array(select a.attname from unnest(k.conkey) with ordinality n(number, place)
        join pg_attribute a on a.attrelid = k.conrelid and a.attnum = n.number order by n.place) as columns,
      array(select a.attname from unnest(k.confkey) with ordinality n(number, place)
        join pg_attribute a on a.attrelid = k.confrelid and a.attnum = n.number order by n.place) as targets
    from pg_constraint k join pg_class c on c.oid = k.conrelid join pg_class t on t.oid = k.confrelid
    where k.contype = 'f' and ${own} order by 1, 2`);
}

export type PolicyRow = {
  table: string;
  name: string;
  permissive: string;
  roles: string[];
  command: string;
  using: string | null;
  check: string | null;
};

export function listPolicies(sql: Pick<postgres.Sql, "unsafe"> = owner()) {
  return sql.unsafe<PolicyRow[]>(`
    select tablename as table, policyname as name, permissive, roles::text[] as roles, lower(cmd) as command,
      qual as using, with_check as check
    from pg_policies where schemaname = 'public' order by 1, 2`);
}

/** Grants on tables, views and single columns to anybody but the owner: `column` is null for the whole. */
export function listGrants() {
  return owner().unsafe<{ table: string; column: string | null; grantee: string; privilege: string }[]>(`
    with granted as (
      select c.relname, null::name as column, x.* from pg_class c, aclexplode(c.relacl) x
      where ${own} and c.relkind in ('r', 'p', 'f', 'v', 'm', 'S')
      union all
      select c.relname, a.attname, x.* from pg_class c join pg_attribute a on a.attrelid = c.oid, aclexplode(a.attacl) x
      where ${own})
    select relname as table, "column", case when grantee = 0 then 'public' else pg_get_userbyid(grantee) end as grantee,
      lower(privilege_type) as privilege
    from granted where grantee <> (select nspowner from pg_namespace where nspname = 'public') order by 1, 2, 3, 4`);
}

/** What each of our roles is, holds and owns. */
export function listRoles() {
  return owner().unsafe<
    { name: string; powers: string[]; member: boolean; owns: string[]; schemas: string[] }[]
  >(`
    select r.rolname as name,
      array_remove(array[case when rolsuper then 'superuser' end, case when rolbypassrls then 'bypassrls' end,
        case when rolcreatedb then 'createdb' end, case when rolcreaterole then 'createrole' end,
        case when rolreplication then 'replication' end], null) as powers,
      exists (select 1 from pg_auth_members m where m.member = r.oid) as member,
      array(select relname::text from pg_class where relowner = r.oid
        union select nspname::text from pg_namespace where nspowner = r.oid
        union select proname::text from pg_proc where proowner = r.oid
        union select typname::text from pg_type where typowner = r.oid) as owns,
      array(select nspname::text from pg_namespace n
        where has_schema_privilege(r.oid, n.oid, 'create') and nspname !~ '^pg_(toast|temp)') as schemas
    from pg_roles r where r.rolname like 'haleside_%' order by 1`);
}
