import { z } from "zod";
import { importKinds, sports, teamSexes } from "~db/schema/codes";
import { delimiters } from "./reading/detect-dialect";
import { textEncodings } from "./reading/detect-text";

const id = z.uuid();

/** What a person decided about a team that the file names and the organisation does not have. */
export const teamAnswerSchema = z.discriminatedUnion("decision", [
  z.object({
    decision: z.literal("create"),
    /** Given when the answer is taken, so that preview and import speak of one team. */
    id,
    name: z.string().min(1).max(100),
    sport: z.enum(sports),
    sex: z.enum(teamSexes),
    underAge: z.number().int().min(5).max(25).nullable(),
  }),
  z.object({ decision: z.literal("use"), id }),
  z.object({ decision: z.literal("leave") }),
]);
export type TeamAnswer = z.infer<typeof teamAnswerSchema>;

/** What a person decided about a row that may or may not be an athlete who is known. */
export const doubtAnswerSchema = z.union([
  z.object({ same: id }),
  z.object({ separate: z.literal(true) }),
  z.object({ leave: z.literal(true) }),
]);
export type DoubtAnswer = z.infer<typeof doubtAnswerSchema>;

/** Everything a person told an import. What is absent is detected, or asked for. */
export const answersSchema = z.object({
  encoding: z.enum(textEncodings).optional(),
  delimiter: z.enum(delimiters).optional(),
  headerLine: z.number().int().min(1).optional(),
  dayOrder: z.enum(["day-first", "month-first"]).optional(),
  nameOrder: z.enum(["family-first", "given-first"]).optional(),
  /** Column of the import by the place of its heading, from 0; null: left out. Set once the columns were confirmed. */
  columns: z.record(z.string(), z.string().nullable()).optional(),
  /** The team of every row, for a file without a team column. */
  teamId: id.optional(),
  /** First day in the team where the file does not say. */
  fromDay: z.iso.date().optional(),
  /** By the normalised name of the team. */
  teams: z.record(z.string(), teamAnswerSchema).optional(),
  /** By the line of the file. */
  doubts: z.record(z.string(), doubtAnswerSchema).optional(),
});
export type Answers = z.infer<typeof answersSchema>;

/** What can be guessed of a team from its name; null: nothing. */
const teamGuess = z.object({
  sport: z.enum(sports).nullable(),
  sex: z.enum(teamSexes).nullable(),
  underAge: z.number().nullable(),
});
export type TeamGuess = z.infer<typeof teamGuess>;

/** What stops an import until a person has answered. */
export const questionSchema = z.discriminatedUnion("kind", [
  /** The file could not be read as a person said it should be. */
  z.object({ kind: z.literal("reading"), reason: z.string(), mend: z.string() }),
  z.object({ kind: z.literal("columns"), reasons: z.array(z.string()) }),
  z.object({
    kind: z.literal("day-order"),
    order: z.enum(["ambiguous", "mixed"]),
    examples: z.array(z.string()),
  }),
  z.object({ kind: z.literal("name-order"), example: z.string() }),
  z.object({
    kind: z.literal("teams"),
    teams: z.array(z.object({ key: z.string(), name: z.string(), rows: z.number(), guess: teamGuess })),
  }),
]);
export type Question = z.infer<typeof questionSchema>;

/** How the file was read, for showing and changing. */
export const readingSchema = z.object({
  encoding: z.enum(textEncodings),
  encodingSure: z.boolean(),
  delimiter: z.enum(delimiters),
  delimiterSure: z.boolean(),
  headerLine: z.number(),
  titleLines: z.array(z.string()),
  header: z.array(z.string()),
  /** The first rows below the header, so that a wrong reading is seen at once. */
  sample: z.array(z.object({ line: z.number(), cells: z.array(z.string()) })),
  dayOrder: z.string(),
  fromDay: z.string().nullable(),
  /** Lines left out on purpose (totals), with the reason. */
  notes: z.array(z.string()),
});
export type Reading = z.infer<typeof readingSchema>;

/** One heading of the file and the column it was taken for. */
export const mappedHeadingSchema = z.object({
  index: z.number(),
  header: z.string(),
  key: z.string().nullable(),
  confidence: z.enum(["remembered", "exact", "alias", "close", "person", "none"]),
});
export type MappedHeading = z.infer<typeof mappedHeadingSchema>;

export const uploadFieldsSchema = z.object({
  kind: z.enum(importKinds, "Choose what the file holds: a roster or exposure."),
});
