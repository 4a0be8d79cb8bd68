import { z } from "zod";
import {
  type ColumnMapping,
  type HeaderMapping,
  makeHeaderWordTest,
  mapHeaders,
  type RememberedHeadings,
} from "~/features/imports/mapping/map-headers";
import { labelColumns, RowReader, type RowResult } from "~/features/imports/mapping/read-row";
import { mostMinutes, mostPlayers, parseMinutes, parsePlayers } from "~/features/imports/values/amounts";
import { parseKind, parsePresence, parseSurface } from "~/features/imports/values/coded";
import { type KnownDayOrder, parseDayCell, splitDayAndTime } from "~/features/imports/values/days";
import { parseIdentifier } from "~/features/imports/values/identifiers";
import { type NameOrder, parseNamePart, parsePersonName } from "~/features/imports/values/names";
import { quoteCell } from "~/features/imports/values/parsed";
import { parseTimeCell } from "~/features/imports/values/times";
import { presences, sessionKinds, surfaces } from "~db/schema/codes";
import { type ExposureColumn, exposureColumns } from "./columns";

export { type ExposureColumn, exposureColumns } from "./columns";

const day = z.iso.date();
const session = {
  day,
  /** Local start as HH:MM; absent without the column, null for an empty cell. */
  start: z
    .string()
    .regex(/^\d{2}:\d{2}$/u)
    .nullish(),
  teamName: z.string().min(1),
  kind: z.enum(sessionKinds),
  surface: z.enum(surfaces).nullish(),
};

/** One athlete in one session: exposure of the grade "recorded". */
export const athleteExposureSchema = z.object({
  shape: z.literal("by-athlete"),
  ...session,
  athlete: z.object({
    number: z.string().min(1).nullish(),
    givenName: z.string().min(1).nullish(),
    familyName: z.string().min(1).nullish(),
    dateOfBirth: day.nullish(),
  }),
  /** 0 unless the athlete took part. */
  minutes: z.number().min(0).max(mostMinutes),
  presence: z.enum(presences),
});

/** One session with the number of athletes: exposure of the grade "headcount". */
export const headcountExposureSchema = z.object({
  shape: z.literal("by-headcount"),
  ...session,
  players: z.number().int().min(0).max(mostPlayers),
  minutes: z.number().min(0).max(mostMinutes),
});

export const exposureRowSchema = z.discriminatedUnion("shape", [
  athleteExposureSchema,
  headcountExposureSchema,
]);
export type AthleteExposure = z.infer<typeof athleteExposureSchema>;
export type HeadcountExposure = z.infer<typeof headcountExposureSchema>;
export type ExposureRow = z.infer<typeof exposureRowSchema>;
export type ExposureShape = ExposureRow["shape"];

export type ExposureOptions = {
  /** How the file writes its days; undefined while nobody has said (only clear days are read then). */
  dayOrder?: KnownDayOrder;
  /** For names in one column without a comma. */
  nameOrder?: NameOrder;
  /** The team of every row, for a file without a team column. */
  teamName?: string;
};
type Reader = RowReader<ExposureColumn>;
type Mapping = ColumnMapping<ExposureColumn>;

const labels = labelColumns(exposureColumns);

/** Columns whose cells are days: their order is detected over all of them together. */
export const exposureDayColumns: readonly ExposureColumn[] = ["day", "dateOfBirth"];

/** Says whether a cell is a heading of an exposure file. */
export const isExposureHeading = makeHeaderWordTest(exposureColumns);

/** Maps an exposure file’s headings. */
export function mapExposureHeaders(
  headers: readonly string[],
  remembered?: RememberedHeadings<ExposureColumn>,
): HeaderMapping<ExposureColumn> {
  return mapHeaders(headers, exposureColumns, remembered);
}

/** Which of the two shapes the mapped columns make; undefined when it is neither, or both at once. */
export function detectExposureShape(mapping: Mapping): ExposureShape | undefined {
  const byAthlete = identifiesAthletes(mapping);
  const byHeadcount = mapping.players !== undefined;
  if (byAthlete === byHeadcount) return undefined;
  return byAthlete ? "by-athlete" : "by-headcount";
}

/** What a mapping lacks to be exposure, each as a sentence; empty when it can be imported. */
export function findMissingExposureColumns(mapping: Mapping, options: ExposureOptions = {}): string[] {
  const missing: string[] = [];
  if (mapping.day === undefined) missing.push("Map the date of the session.");
  if (mapping.teamName === undefined && !options.teamName) {
    missing.push("Map the team, or choose the team that the whole file is about.");
  }
  if (mapping.kind === undefined)
    missing.push("Map the kind of session: training, match, strength or other.");
  if (mapping.minutes === undefined) missing.push("Map the minutes.");
  if (detectExposureShape(mapping)) return missing;
  const both = mapping.players !== undefined;
  missing.push(
    both
      ? "Map either the athletes or the number of players, not both: leave one of them out."
      : "Map the athlete’s number or name, or the number of players.",
  );
  return missing;
}

/** Reads one row of exposure in the shape that its mapping makes; everything wrong with it is named. */
export function parseExposureRow(
  cells: readonly string[],
  mapping: Mapping,
  options: ExposureOptions = {},
): RowResult<ExposureRow> {
  const reader: Reader = new RowReader(cells, mapping, labels);
  const common = readSession(reader, options);
  const value =
    detectExposureShape(mapping) === "by-headcount"
      ? readHeadcount(reader, common)
      : readAthleteExposure(reader, common, mapping, options);
  const { rejected, warnings } = reader;
  if (rejected.length > 0) return { ok: false, rejected, warnings };
  return { ok: true, value: exposureRowSchema.parse(value), warnings };
}

function identifiesAthletes(mapping: Mapping) {
  const named = mapping.givenName !== undefined && mapping.familyName !== undefined;
  return mapping.athleteNumber !== undefined || mapping.athleteName !== undefined || named;
}

function readSession(reader: Reader, options: ExposureOptions) {
  const parseTeam = (text: string) => parseNamePart(text, "team");
  const teamCell = reader.cell("teamName");
  const useChosen = options.teamName !== undefined && (teamCell ?? "").trim() === "";
  return {
    ...readWhen(reader, options),
    teamName: useChosen ? options.teamName : reader.require("teamName", parseTeam),
    kind: reader.require("kind", parseKind),
    ...withKey("surface", reader.read("surface", parseSurface)),
  };
}

/** Day and start; a time written behind the day is the start where there is no column for it. */
function readWhen(reader: Reader, options: ExposureOptions) {
  const parseDay = (text: string) => parseDayCell(text, options.dayOrder);
  const { day: dayText, time } = splitDayAndTime(reader.cell("day") ?? "");
  if (reader.cell("start") !== undefined || time === undefined) {
    return { day: reader.require("day", parseDay), ...withKey("start", reader.read("start", parseTimeCell)) };
  }
  return {
    day: reader.require("day", () => parseDay(dayText)),
    start: reader.take("day", parseTimeCell(time)),
  };
}

function readHeadcount(reader: Reader, common: object) {
  return {
    shape: "by-headcount",
    ...common,
    players: reader.require("players", parsePlayers),
    minutes: reader.require("minutes", parseMinutes),
  };
}

function readAthleteExposure(reader: Reader, common: object, mapping: Mapping, options: ExposureOptions) {
  const athlete = readAthlete(reader, mapping, options);
  return { shape: "by-athlete", ...common, athlete, ...readParticipation(reader) };
}

function readAthlete(reader: Reader, mapping: Mapping, options: ExposureOptions) {
  const parseDay = (text: string) => parseDayCell(text, options.dayOrder);
  const fullName = reader.read("athleteName", (text) => parsePersonName(text, options.nameOrder));
  const given = reader.read("givenName", (text) => parseNamePart(text, "given name"));
  const family = reader.read("familyName", (text) => parseNamePart(text, "family name"));
  const hasNames = mapping.athleteName !== undefined || mapping.familyName !== undefined;
  const athlete = {
    ...withKey("number", reader.read("athleteNumber", parseIdentifier)),
    ...(hasNames
      ? { givenName: fullName?.givenName ?? given, familyName: fullName?.familyName ?? family }
      : {}),
    ...withKey("dateOfBirth", reader.read("dateOfBirth", parseDay)),
  };
  const named = Boolean(athlete.givenName && athlete.familyName);
  if (!athlete.number && !named) refuseNameless(reader, mapping);
  return athlete;
}

function refuseNameless(reader: Reader, mapping: Mapping) {
  const keys: ExposureColumn[] = ["athleteNumber", "athleteName", "familyName"];
  const written = keys.some((key) => (reader.cell(key) ?? "").trim() !== "");
  // A cell that was rejected is named already.
  if (written && reader.rejected.length > 0) return;
  const key = keys.find((candidate) => mapping[candidate] !== undefined) ?? "athleteNumber";
  reader.reject(
    key,
    "athlete.missing",
    "The row does not say which athlete it is about.",
    "Fill in the athlete’s number, or the given and the family name.",
  );
}

/** Only minutes above 0 of somebody who took part are exposure; the two columns must not contradict. */
function readParticipation(reader: Reader) {
  const presence = reader.read("presence", parsePresence);
  const minutesCell = (reader.cell("minutes") ?? "").trim();
  const minutes =
    presence === "absent" || presence === "present_only"
      ? reader.read("minutes", parseMinutes)
      : reader.require("minutes", parseMinutes);
  if (presence === "took_part" && minutes === 0) {
    reject("Somebody who took part has more than 0 minutes.", "Write the minutes, or present only.");
  }
  if ((presence === "absent" || presence === "present_only") && minutes) {
    const state = presence.replace("_", " ");
    reject(
      `The athlete is marked ${state}, yet has ${quoteCell(minutesCell)} minutes.`,
      "Correct the presence, or empty the minutes.",
    );
  }
  if (!presence && minutes === 0)
    reader.warn("minutes", "0 minutes: recorded as present only, which is no exposure.");
  return { minutes: minutes ?? 0, presence: presence ?? (minutes ? "took_part" : "present_only") };

  function reject(reason: string, mend: string) {
    reader.reject("presence", "presence.contradiction", reason, mend);
  }
}

/** The key only where the column is there. */
function withKey<Key extends string, T>(key: Key, value: T | undefined): { [K in Key]?: T } {
  const object: { [K in Key]?: T } = {};
  if (value !== undefined) object[key] = value;
  return object;
}
