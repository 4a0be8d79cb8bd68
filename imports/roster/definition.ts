import { z } from "zod";
import {
  type ColumnMapping,
  type HeaderMapping,
  makeHeaderWordTest,
  mapHeaders,
  type RememberedHeadings,
} from "~/features/imports/mapping/map-headers";
import { labelColumns, RowReader, type RowResult } from "~/features/imports/mapping/read-row";
import { parseDominantLeg, parseRelation, parseSex } from "~/features/imports/values/coded";
import { nameLanguage, parseEmail, parseLanguage, parsePhone } from "~/features/imports/values/contacts";
import { type KnownDayOrder, parseDayCell } from "~/features/imports/values/days";
import { parseIdentifier } from "~/features/imports/values/identifiers";
import { type NameOrder, parseNamePart, parsePersonName } from "~/features/imports/values/names";
import { quoteCell } from "~/features/imports/values/parsed";
import { foldText } from "~/platform/fold-text";
import { languages, legs, relations, sexes } from "~db/schema/codes";
import { type RosterColumn, rosterColumns } from "./columns";

export { type RosterColumn, rosterColumns } from "./columns";

const day = z.iso.date();

/**
 * One row of a roster. A key that is absent had no column in the file and must leave a stored value alone;
 * null had a column and an empty cell. The names are always there.
 */
export const rosterRowSchema = z.object({
  number: z.string().min(1).nullish(),
  givenName: z.string().min(1),
  familyName: z.string().min(1),
  dateOfBirth: day.nullish(),
  sex: z.enum(sexes).nullish(),
  teamName: z.string().min(1).nullish(),
  dominantLeg: z.enum(legs).nullish(),
  fromDay: day.nullish(),
  guardian: z
    .object({
      name: z.string().min(1).nullish(),
      email: z.string().min(3).nullish(),
      phone: z.string().min(1).nullish(),
      language: z.enum(languages).nullish(),
      relation: z.enum(relations).nullish(),
    })
    .optional(),
});
export type RosterRow = z.infer<typeof rosterRowSchema>;

export type RosterOptions = {
  /** How the file writes its days; undefined while nobody has said (only clear days are read then). */
  dayOrder?: KnownDayOrder;
  /** For names in one column without a comma. */
  nameOrder?: NameOrder;
  /** No birthday may be later (YYYY-MM-DD): today in the organisation’s time zone. */
  latestBirthday?: string;
};
type Reader = RowReader<RosterColumn>;

const labels = labelColumns(rosterColumns);

/** Columns whose cells are days: their order is detected over all of them together. */
export const rosterDayColumns: readonly RosterColumn[] = ["dateOfBirth", "fromDay"];

/** Says whether a cell is a heading of a roster. */
export const isRosterHeading = makeHeaderWordTest(rosterColumns);

/** Maps a roster’s headings. A bare “Name” beside a given name is the family name. */
export function mapRosterHeaders(
  headers: readonly string[],
  remembered?: RememberedHeadings<RosterColumn>,
): HeaderMapping<RosterColumn> {
  const result = mapHeaders(headers, rosterColumns, remembered);
  const bare = result.mapped.find(({ key, header }) => key === "fullName" && isBareName(header));
  const { mapping } = result;
  if (!bare || bare.confidence === "remembered") return result;
  if (mapping.givenName === undefined || mapping.familyName !== undefined) return result;
  delete mapping.fullName;
  mapping.familyName = bare.index;
  bare.key = "familyName";
  return result;
}

/** What a mapping lacks to be a roster, each as a sentence; empty when it can be imported. */
export function findMissingRosterColumns(mapping: ColumnMapping<RosterColumn>): string[] {
  const missing: string[] = [];
  const both = mapping.givenName !== undefined && mapping.familyName !== undefined;
  if (!both && mapping.fullName === undefined) {
    missing.push("Map the given name and the family name, or a column with the full name.");
  }
  if (mapping.number === undefined && mapping.dateOfBirth === undefined) {
    missing.push(
      "Map the number or the date of birth: without either, two athletes with one name become one.",
    );
  }
  return missing;
}

/** Reads one row of a roster; everything wrong with it is named. */
export function parseRosterRow(
  cells: readonly string[],
  mapping: ColumnMapping<RosterColumn>,
  options: RosterOptions = {},
): RowResult<RosterRow> {
  const reader: Reader = new RowReader(cells, mapping, labels);
  const name = readName(reader, mapping, options);
  const parseDay = (text: string) => parseDayCell(text, options.dayOrder);
  const value = dropAbsent({
    ...name,
    number: reader.read("number", parseIdentifier),
    dateOfBirth: reader.read("dateOfBirth", parseDay),
    sex: reader.read("sex", parseSex),
    teamName: reader.read("teamName", (text) => parseNamePart(text, "team")),
    dominantLeg: reader.read("dominantLeg", parseDominantLeg),
    fromDay: reader.read("fromDay", parseDay),
    guardian: readGuardian(reader),
  });
  checkBirthday(reader, value.dateOfBirth, options);
  requireIdentity(reader);
  const { rejected, warnings } = reader;
  if (rejected.length > 0 || !name) return { ok: false, rejected, warnings };
  return { ok: true, value: { ...value, ...name }, warnings };
}

function isBareName(header: string) {
  return ["name", "names"].includes(foldText(header));
}

function readName(reader: Reader, mapping: ColumnMapping<RosterColumn>, options: RosterOptions) {
  if (mapping.givenName === undefined && mapping.familyName === undefined) {
    return reader.require("fullName", (text) => parsePersonName(text, options.nameOrder));
  }
  const givenName = reader.require("givenName", (text) => parseNamePart(text, "given name"));
  const familyName = reader.require("familyName", (text) => parseNamePart(text, "family name"));
  return givenName !== null && familyName !== null ? { givenName, familyName } : null;
}

function readGuardian(reader: Reader): RosterRow["guardian"] {
  const guardian = dropAbsent({
    name: reader.read("guardianName", (text) => parseNamePart(text, "guardian’s name")),
    email: reader.read("guardianEmail", parseEmail),
    phone: reader.read("guardianPhone", parsePhone),
    language: readLanguage(reader),
    relation: reader.read("guardianRelation", parseRelation),
  });
  return Object.keys(guardian).length > 0 ? guardian : undefined;
}

/** A language in which no notice is written leaves the stored one alone, with a warning. */
function readLanguage(reader: Reader) {
  const code = reader.read("guardianLanguage", parseLanguage);
  if (code === null || code === undefined) return code;
  const written = languages.find((language) => language === code);
  if (written) return written;
  const name = nameLanguage(code);
  reader.warn(
    "guardianLanguage",
    `Notices are not written in ${name} yet: the guardian’s language is left as it is.`,
  );
  return undefined;
}

function checkBirthday(reader: Reader, birthday: string | null | undefined, options: RosterOptions) {
  if (!birthday || !options.latestBirthday || birthday <= options.latestBirthday) return;
  const cell = reader.cell("dateOfBirth") ?? "";
  reader.reject(
    "dateOfBirth",
    "day.future",
    `${quoteCell(cell)} lies in the future.`,
    "Correct the date of birth.",
  );
}

/** A name alone does not tell two athletes apart. Rejected cells count: they are named already. */
function requireIdentity(reader: Reader) {
  const number = reader.cell("number")?.trim();
  const birthday = reader.cell("dateOfBirth")?.trim();
  if (number || birthday) return;
  reader.reject(
    reader.cell("number") === undefined ? "dateOfBirth" : "number",
    "identity.missing",
    "The row has neither a number nor a date of birth.",
    "Fill in one of them, so that athletes with the same name stay apart.",
  );
}

/** Leaves out the keys whose column is absent, so that they cannot overwrite anything. */
function dropAbsent<T extends object>(value: T): T {
  const kept = { ...value };
  for (const key of Object.keys(kept) as (keyof T)[]) {
    if (kept[key] === undefined) delete kept[key];
  }
  return kept;
}
