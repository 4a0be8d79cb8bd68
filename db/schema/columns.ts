import { customType, integer, text, timestamp, uuid } from "drizzle-orm/pg-core";

/** The tenancy column. It is the first column of every key, so that the schema can be distributed by organisation. */
export const organisationId = () => uuid("organisation_id").notNull();

export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: "date" });

export const createdAt = () => instant("created_at").notNull().defaultNow();

/** Optimistic version: raised by one on each update, compared by the writer. */
export const version = () => integer("version").notNull().default(1);

/** A person who acted: references a membership (organisation, person). */
export const actor = (name: string) => uuid(name);

/** Stored text is trimmed and non-empty where it is required; checks sit in zod, since they name the mend. */
export const code = (name: string) => text(name);

/**
 * Bytes encrypted by the application (AES-256-GCM), bound to organisation, table, column, row and version.
 * The database never sees the clear text. See app/platform/crypto/sealing.server.ts.
 */
export const sealed = customType<{ data: Uint8Array; driverData: Uint8Array }>({
  dataType: () => "bytea",
});
