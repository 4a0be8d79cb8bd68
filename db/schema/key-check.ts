import { pgSchema, text, timestamp } from "drizzle-orm/pg-core";

/** Facts of the installation, belonging to no organisation. */
export const installation = pgSchema("installation");

/** A value sealed by the master key when the database was made: another key does not open it, and the server refuses. */
export const keyCheck = installation.table("key_check", {
  name: text("name").primaryKey(),
  value: text("value").notNull(),
  createdAt: timestamp("created_at", { withTimezone: true, mode: "date" }).notNull().defaultNow(),
});
