import {
  bodyAreaWords,
  certaintyWords,
  contactWords,
  firstCareWords,
  movementWords,
  onsetWords,
  pathologyWords,
  referralWords,
  sideWords,
  signWords,
  subsequenceWords,
  surfaceWords,
  tissueWords,
} from "~/features/vocabulary";
import { formatDay } from "~/platform/days";

/** A revision with its texts in clear, as the history compares it. Keys follow the table's columns. */
export type ReadableRevision = Readonly<Record<string, unknown>>;

export type Change = { field: string; from: string; to: string };

const nothing = "nothing";
const inWords = (words: Readonly<Record<string, string>>) => (value: unknown) =>
  words[String(value)] ?? String(value);
const listOf = (words: Readonly<Record<string, string>>) => (value: unknown) =>
  Array.isArray(value) ? value.map((code) => words[String(code)] ?? String(code)).join(", ") : "";
const yesNo = (value: unknown) => (value ? "yes" : "no");
const asText = (value: unknown) => String(value);
const asDay = (value: unknown) => formatDay(String(value));
const asTime = (value: unknown) => String(value).slice(0, 5);

/** The fields of a record in the order of its form, with their words. */
const fields: [key: string, label: string, words: (value: unknown) => string][] = [
  ["onsetDay", "day of onset", asDay],
  ["onsetTime", "time", asTime],
  ["session", "session", asText],
  ["outsideSport", "outside organised sport", yesNo],
  ["bodyArea", "body area", inWords(bodyAreaWords)],
  ["side", "side", inWords(sideWords)],
  ["suspectedConcussion", "suspected concussion", yesNo],
  ["couldContinue", "could continue", yesNo],
  ["onset", "onset", inWords(onsetWords)],
  ["contact", "contact", inWords(contactWords)],
  ["movement", "movement", inWords(movementWords)],
  ["minuteOfPlay", "minute of play", asText],
  ["surface", "surface", inWords(surfaceWords)],
  ["footwear", "footwear", asText],
  ["warmedUp", "warmed up", yesNo],
  ["signs", "signs", listOf(signWords)],
  ["swellingNoticed", "swelling noticed", asText],
  ["firstCare", "first care", listOf(firstCareWords)],
  ["referredTo", "referred to", listOf(referralWords)],
  ["phoned", "who was phoned", asText],
  ["tissue", "tissue", inWords(tissueWords)],
  ["pathology", "pathology", inWords(pathologyWords)],
  ["diagnosis", "diagnosis", asText],
  ["certainty", "certainty", inWords(certaintyWords)],
  ["further", "further diagnoses", asText],
  ["surgery", "surgery", yesNo],
  ["surgeryDay", "day of surgery", asDay],
  ["description", "description", asText],
  ["subsequence", "relation to earlier injuries", inWords(subsequenceWords)],
  ["closedOn", "closed on", asDay],
  ["withdrawn", "withdrawn", yesNo],
];

const isEmpty = (value: unknown) =>
  value === null || value === undefined || value === "" || (Array.isArray(value) && value.length === 0);

const inOrder = (value: unknown) =>
  JSON.stringify(Array.isArray(value) ? [...value].sort() : (value ?? null));

/** What one edit changed: each field in words, before and after. Nothing changed gives an empty list. */
export function diffRevisions(before: ReadableRevision, after: ReadableRevision): Change[] {
  return fields
    .filter(([key]) => inOrder(before[key]) !== inOrder(after[key]))
    .map(([key, field, words]) => ({
      field,
      from: isEmpty(before[key]) ? nothing : words(before[key]),
      to: isEmpty(after[key]) ? nothing : words(after[key]),
    }));
}

/** Names of the fields that an edit changed, for the audit: codes, never their values. */
export const changedKeys = (before: ReadableRevision, after: ReadableRevision) =>
  fields.map(([key]) => key).filter((key) => inOrder(before[key]) !== inOrder(after[key]));
