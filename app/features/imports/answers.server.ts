import { randomUUID } from "node:crypto";
import { parseDay } from "~/platform/days";
import { DomainError } from "~/platform/errors";
import { sports, teamSexes } from "~db/schema/codes";
import {
  type Answers,
  answersSchema,
  type DoubtAnswer,
  doubtAnswerSchema,
  type Reading,
  type TeamAnswer,
} from "./imports.schema";
import type { ImportDefinition } from "./kinds";
import { delimiters } from "./reading/detect-dialect";
import { textEncodings } from "./reading/detect-text";

const oneOf = <T extends string>(codes: readonly T[], text: string) => codes.find((code) => code === text);

/**
 * Adds what a form says to what was answered before. A part that the form does not hold stays; another encoding,
 * delimiter or header row makes the confirmed columns void.
 * @throws DomainError invalid with the fields concerned
 */
export function mergeAnswers(
  before: Answers,
  reading: Reading | null,
  form: FormData,
  definition: ImportDefinition,
): Answers {
  const fields: Record<string, string[]> = {};
  const said = newlySaid(readTable(form, fields), before, reading);
  const answers: Answers = { ...before, ...said };
  if (said.encoding || said.delimiter || said.headerLine) delete answers.columns;
  else Object.assign(answers, readColumns(form, definition, fields));
  answers.teams = { ...before.teams, ...readTeams(form, fields) };
  answers.doubts = { ...before.doubts, ...readDoubts(form) };
  if (Object.keys(fields).length > 0) throw new DomainError("invalid", "", { fields });
  return answersSchema.parse(answers);
}

/** What the form shows, as answered or else as read, and sends back unchanged says nothing. */
function newlySaid(table: Answers, before: Answers, reading: Reading | null): Answers {
  const shown: Record<string, unknown> = { ...reading, ...before };
  return Object.fromEntries(Object.entries(table).filter(([key, value]) => shown[key] !== value));
}

function text(form: FormData, name: string) {
  const value = form.get(name);
  return typeof value === "string" ? value.trim() : "";
}

function readTable(form: FormData, fields: Record<string, string[]>): Answers {
  const answers: Answers = {};
  const encoding = oneOf(textEncodings, text(form, "encoding"));
  if (encoding) answers.encoding = encoding;
  // A tab does not survive trimming.
  const delimiter = oneOf(delimiters, String(form.get("delimiter") ?? ""));
  if (delimiter) answers.delimiter = delimiter;
  const headerLine = text(form, "headerLine");
  if (headerLine !== "") {
    if (/^[1-9]\d{0,6}$/u.test(headerLine)) answers.headerLine = Number(headerLine);
    else fields.headerLine = ["Write the line of the headings as a number, counted from 1."];
  }
  const dayOrder = oneOf(["day-first", "month-first"] as const, text(form, "dayOrder"));
  if (dayOrder) answers.dayOrder = dayOrder;
  const nameOrder = oneOf(["family-first", "given-first"] as const, text(form, "nameOrder"));
  if (nameOrder) answers.nameOrder = nameOrder;
  const fromDay = text(form, "fromDay");
  if (fromDay !== "") {
    const parsed = parseDay(fromDay, "day-month-year");
    if (parsed.ok) answers.fromDay = parsed.day;
    else fields.fromDay = [parsed.reason];
  }
  return answers;
}

function readColumns(
  form: FormData,
  definition: ImportDefinition,
  fields: Record<string, string[]>,
): Answers {
  const names = [...form.keys()].filter((name) => /^column\.\d+$/u.test(name));
  const teamId = text(form, "teamId");
  const answers: Answers = /^[0-9a-f-]{36}$/u.test(teamId) ? { teamId } : {};
  if (names.length === 0) return answers;
  const known = new Map(definition.columns.map(({ key, label }) => [key, label]));
  const columns: Record<string, string | null> = {};
  const taken = new Map<string, string>();
  for (const name of names) {
    const key = text(form, name);
    const label = known.get(key);
    const other = taken.get(key);
    if (label && other) fields[name] = [`“${label}” is chosen twice. Choose it for one heading only.`];
    if (label) taken.set(key, name);
    columns[name.slice("column.".length)] = label ? key : null;
  }
  return { ...answers, columns };
}

/** Teams come as `team.0.key`, `team.0.name`, `team.0.decision` and, to make one, its sport, sex and age group. */
function readTeams(form: FormData, fields: Record<string, string[]>) {
  const teams: Record<string, TeamAnswer> = {};
  for (let at = 0; form.has(`team.${at}.key`); at += 1) {
    const of = (what: string) => `team.${at}.${what}`;
    const answer = readTeam(form, of, fields);
    if (answer) teams[text(form, of("key"))] = answer;
  }
  return teams;
}

function readTeam(form: FormData, of: (what: string) => string, fields: Record<string, string[]>) {
  const name = text(form, of("name"));
  const decision = text(form, of("decision"));
  if (decision === "leave") return { decision: "leave" } as const;
  if (decision.startsWith("use:")) return { decision: "use", id: decision.slice(4) } as const;
  if (decision !== "create") {
    fields[of("decision")] = [`Say what to do with ${name}.`];
    return undefined;
  }
  const sport = oneOf(sports, text(form, of("sport")));
  const sex = oneOf(teamSexes, text(form, of("sex")));
  const age = text(form, of("underAge"));
  const underAge = age === "" ? null : Number(age);
  if (!sport) fields[of("sport")] = [`Choose the sport of ${name}.`];
  if (!sex) fields[of("sex")] = [`Choose who plays in ${name}.`];
  if (underAge !== null && !(Number.isInteger(underAge) && underAge >= 5 && underAge <= 25))
    fields[of("underAge")] = [
      "Write the age group as a number of years from 5 to 25, or leave it empty for seniors.",
    ];
  if (!sport || !sex) return undefined;
  return { decision: "create", id: randomUUID(), name, sport, sex, underAge } as const;
}

/** `doubt.12` holds `same:ID`, `separate` or `leave`; nothing chosen leaves the row rejected. */
function readDoubts(form: FormData) {
  const doubts: Record<string, DoubtAnswer> = {};
  for (const [name, value] of form) {
    const line = /^doubt\.(\d+)$/u.exec(name)?.[1];
    if (!line || typeof value !== "string" || value === "") continue;
    const answer = value.startsWith("same:") ? { same: value.slice(5) } : { [value]: true };
    const parsed = doubtAnswerSchema.safeParse(answer);
    if (parsed.success) doubts[line] = parsed.data;
  }
  return doubts;
}
