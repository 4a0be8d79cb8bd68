import {
  customType,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import { organisations } from "./accounts";
import { oneOf } from "./check";
import { importKinds, importStates, rowOutcomes } from "./codes";
import { actor, createdAt, instant, organisationId } from "./columns";

const bytes = customType<{ data: Uint8Array; driverData: Uint8Array }>({ dataType: () => "bytea" });

export const imports = pgTable(
  "imports",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    kind: text("kind").notNull(),
    state: text("state").notNull(),
    fileName: text("file_name").notNull(),
    fileHash: text("file_hash").notNull(),
    fileSize: integer("file_size").notNull(),
    /** How the file was read: encoding, delimiter, header row, date order; what a person changed. */
    reading: jsonb("reading").$type<Record<string, unknown>>().notNull(),
    /** Column of the file to field of the record. */
    mapping: jsonb("mapping").$type<Record<string, unknown>>().notNull(),
    /** Answers a person gave: date order, teams to create, name order. */
    answers: jsonb("answers").$type<Record<string, unknown>>().notNull(),
    /** Questions that stop the import until answered. */
    questions: jsonb("questions").$type<unknown[]>().notNull(),
    counts: jsonb("counts").$type<Record<string, number>>().notNull(),
    progressDone: integer("progress_done").notNull().default(0),
    progressTotal: integer("progress_total").notNull().default(0),
    failure: text("failure"),
    createdBy: actor("created_by"),
    createdAt: createdAt(),
    committedBy: actor("committed_by"),
    committedAt: instant("committed_at"),
    undoneBy: actor("undone_by"),
    undoneAt: instant("undone_at"),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
    index("imports_hash_idx").on(t.organisationId, t.kind, t.fileHash),
    oneOf("imports_kind", t.kind, importKinds),
    oneOf("imports_state", t.state, importStates),
  ],
);

/** The uploaded bytes, in chunks. Removed once the import has been committed, cancelled or has failed. */
export const importChunks = pgTable(
  "import_chunks",
  {
    organisationId: organisationId(),
    importId: uuid("import_id").notNull(),
    position: integer("position").notNull(),
    bytes: bytes("bytes").notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.importId, t.position] }),
    foreignKey({
      columns: [t.organisationId, t.importId],
      foreignColumns: [imports.organisationId, imports.id],
    }),
  ],
);

/** Staging: each line of the file as read, what it would do, and why it is rejected. */
export const importRows = pgTable(
  "import_rows",
  {
    organisationId: organisationId(),
    importId: uuid("import_id").notNull(),
    /** Line number in the file, from 1, as a person sees it in an editor. */
    line: integer("line").notNull(),
    cells: jsonb("cells").$type<string[]>().notNull(),
    value: jsonb("value").$type<Record<string, unknown> | null>(),
    outcome: text("outcome").notNull(),
    /** For a rejected row: column, cell, reason, mend. For an update: field, old, new. */
    problems: jsonb("problems").$type<unknown[]>().notNull(),
    changes: jsonb("changes").$type<unknown[]>().notNull(),
    warnings: jsonb("warnings").$type<unknown[]>().notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.importId, t.line] }),
    foreignKey({
      columns: [t.organisationId, t.importId],
      foreignColumns: [imports.organisationId, imports.id],
    }),
    index("import_rows_outcome_idx").on(t.organisationId, t.importId, t.outcome, t.line),
    oneOf("import_rows_outcome", t.outcome, rowOutcomes),
  ],
);

/** The change list of a committed import: before-image and resulting version of each row, for undo. */
export const importChanges = pgTable(
  "import_changes",
  {
    organisationId: organisationId(),
    importId: uuid("import_id").notNull(),
    position: integer("position").notNull(),
    recordTable: text("record_table").notNull(),
    recordKey: jsonb("record_key").$type<Record<string, string>>().notNull(),
    /** Null: the import created the row. */
    before: jsonb("before").$type<Record<string, unknown> | null>(),
    resultVersion: integer("result_version").notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.importId, t.position] }),
    foreignKey({
      columns: [t.organisationId, t.importId],
      foreignColumns: [imports.organisationId, imports.id],
    }),
  ],
);

/** Header words a person mapped by hand, offered again next time. */
export const importAliases = pgTable(
  "import_aliases",
  {
    organisationId: organisationId(),
    kind: text("kind").notNull(),
    headerKey: text("header_key").notNull(),
    columnKey: text("column_key").notNull(),
    setBy: actor("set_by"),
    setAt: instant("set_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.kind, t.headerKey] }),
    unique("import_aliases_header").on(t.organisationId, t.kind, t.headerKey),
    foreignKey({ columns: [t.organisationId], foreignColumns: [organisations.organisationId] }),
  ],
);
