import { sql } from "drizzle-orm";
import { drizzle, type PostgresJsDatabase } from "drizzle-orm/postgres-js";
import postgres from "postgres";
import { env } from "~/platform/env.server";
import { DomainError } from "~/platform/errors";
import * as schema from "./schema";
import type { Role } from "./schema/codes";
import type { Actor } from "./schema/tenancy";

export type Database = PostgresJsDatabase<typeof schema>;

/**
 * What a transaction is for: the organisation, who acts, and through which door. Made by the middleware or by a
 * door (guardian link, invitation, job), never by a feature.
 */
export type Scope = {
  organisationId: string;
  slug: string;
  timeZone: string;
  /** Today's calendar date in the organisation's time zone, ISO. */
  today: string;
  /** The signed-in person; null for a door without one. */
  personId: string | null;
  actors: readonly Actor[];
  /** The member's roles; empty for a door. */
  roles: readonly Role[];
  /** Teams the membership covers: all of them, or the listed ones. */
  teams: "all" | readonly string[];
  /** The notice or the invitation a door is bound to. */
  doorId?: string;
  requestId?: string;
};

/** A database handle of one scoped transaction. It throws once the transaction is closed. */
export type Tx = Database & { readonly scope: Scope };

let shared: { client: postgres.Sql; db: Database; gate: Gate } | undefined;

/** The application's pool (row-level security applies to it). Made at first use. */
function pool() {
  if (shared) return shared;
  const { DATABASE_URL, DATABASE_POOL, DATABASE_WAIT_SECONDS } = env();
  const client = postgres(DATABASE_URL, {
    max: DATABASE_POOL,
    idle_timeout: 60,
    connect_timeout: 10,
    onnotice: () => {},
    connection: {
      application_name: "haleside",
      statement_timeout: 15_000,
      lock_timeout: 5_000,
      idle_in_transaction_session_timeout: 20_000,
      // Compiling a statement takes longer than any of ours runs.
      jit: "off",
    },
  });
  shared = {
    client,
    db: drizzle(client, { schema }),
    gate: new Gate(DATABASE_POOL, DATABASE_WAIT_SECONDS * 1000),
  };
  return shared;
}

/** Bounds the wait for a connection, since postgres.js has no acquire time-out of its own. */
class Gate {
  #free: number;
  #waiting: Array<() => void> = [];
  readonly #waitMs: number;

  constructor(size: number, waitMs: number) {
    this.#free = size;
    this.#waitMs = waitMs;
  }

  async run<T>(fn: () => Promise<T>): Promise<T> {
    await this.#enter();
    try {
      return await fn();
    } finally {
      const next = this.#waiting.shift();
      if (next) next();
      else this.#free += 1;
    }
  }

  #enter(): Promise<void> {
    if (this.#free > 0) {
      this.#free -= 1;
      return Promise.resolve();
    }
    return new Promise((resolve, reject) => {
      const enter = () => {
        clearTimeout(timer);
        resolve();
      };
      const timer = setTimeout(() => {
        this.#waiting = this.#waiting.filter((other) => other !== enter);
        reject(
          new DomainError(
            "unavailable",
            "Too many people are using Haleside at this moment. Try again shortly.",
          ),
        );
      }, this.#waitMs);
      this.#waiting.push(enter);
    });
  }
}

/** A handle that stops working with its transaction: a late query would run in the next organisation's. */
function closable(tx: Database, scope: Scope): { handle: Tx; close: () => void } {
  let closed = false;
  const handle = new Proxy(tx, {
    get(target, property, receiver) {
      if (property === "scope") return scope;
      if (closed) throw new Error("This transaction is closed: await every query inside read() or write().");
      const value = Reflect.get(target, property, receiver);
      return typeof value === "function" ? value.bind(target) : value;
    },
  }) as Tx;
  return {
    handle,
    close: () => {
      closed = true;
    },
  };
}

type Mode = { accessMode: "read only" | "read write"; isolationLevel?: "serializable" };

async function scoped<T>(scope: Scope, mode: Mode, fn: (tx: Tx) => Promise<T>): Promise<T> {
  const { db, gate } = pool();
  return gate.run(() =>
    db.transaction(async (tx) => {
      await tx.execute(sql`select
          set_config('app.organisation_id', ${scope.organisationId}, true),
          set_config('app.person_id', ${scope.personId ?? ""}, true),
          set_config('app.door_id', ${scope.doorId ?? ""}, true),
          set_config('app.actors', ${scope.actors.join(",")}, true)`);
      const { handle, close } = closable(tx as unknown as Database, scope);
      try {
        return await fn(handle);
      } finally {
        close();
      }
    }, mode),
  );
}

/**
 * One read-only transaction in a scope. A loader opens one, closed before rendering.
 * Inside: no redirect thrown, no mail, no hashing, no deferred data.
 */
export function read<T>(scope: Scope, fn: (tx: Tx) => Promise<T>): Promise<T> {
  return scoped(scope, { accessMode: "read only" }, fn);
}

/**
 * One read-write transaction in a scope: all of it commits or none. An action opens one.
 * @param isolation left out: read committed. Serializable answers every statement from one snapshot and fails with
 *   SQLSTATE 40001 where another such transaction came between: the caller tries again.
 */
export function write<T>(
  scope: Scope,
  fn: (tx: Tx) => Promise<T>,
  { isolation }: { isolation?: "serializable" } = {},
): Promise<T> {
  return scoped(scope, { accessMode: "read write", ...(isolation && { isolationLevel: isolation }) }, fn);
}

/** The scope of a signed-in person before an organisation is chosen: only their own memberships are visible. */
export function personScope(personId: string, requestId?: string): Scope {
  return {
    organisationId: "",
    slug: "",
    timeZone: "UTC",
    today: "",
    personId,
    actors: ["person"],
    roles: [],
    teams: [],
    ...(requestId ? { requestId } : {}),
  };
}

/** The raw pool, for the job queue's adapter and health; never for an organisation's data. */
export function rawClient() {
  return pool().client;
}

/** SQLSTATE of a database error, through Drizzle's wrapping; undefined for other errors. */
export function sqlState(error: unknown): string | undefined {
  for (let current = error; current instanceof Error; current = current.cause) {
    const code = (current as { code?: unknown }).code;
    if (typeof code === "string" && /^[0-9A-Z]{5}$/.test(code)) return code;
  }
  return undefined;
}

/** Refuses a connection that could go round row-level security: the application must own nothing and bypass nothing. */
export async function assertApplicationRole() {
  const { client } = pool();
  const [row] = await client<{ powerful: boolean; owns: string | null }[]>`
    select r.rolsuper or r.rolbypassrls as powerful,
      (select c.relname from pg_class c where c.relowner = r.oid limit 1) as owns
    from pg_roles r where r.rolname = current_user`;
  if (!row || row.powerful || row.owns)
    throw new Error(
      `DATABASE_URL must name a role that owns nothing and cannot bypass row-level security${row?.owns ? ` (it owns ${row.owns})` : ""}. Give the application's role, not the owner's.`,
    );
}

export async function closeDatabase() {
  await shared?.client.end({ timeout: 5 });
  shared = undefined;
}
