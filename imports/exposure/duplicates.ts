import { type DuplicateFinding, type FileRow, rejectDuplicate } from "~/features/imports/mapping/duplicates";
import { normaliseName } from "~/features/imports/values/names";
import type { AthleteExposure, ExposureRow } from "./definition";

type Seen = { lineNumber: number; content: string };

/**
 * Finds rows of an exposure file that repeat or contradict an earlier line: the same athlete in the same
 * session, or the same session counted twice. One row at a time in the file's order, accepted rows only; it
 * keeps a key per row (about 150 bytes each).
 */
export class ExposureDuplicateFinder {
  private readonly seen = new Map<string, Seen>();

  add({ lineNumber, value }: FileRow<ExposureRow>): DuplicateFinding[] {
    const key = keyOf(value);
    const first = this.seen.get(key);
    if (first) return [describe(lineNumber, value, first)];
    this.seen.set(key, { lineNumber, content: contentOf(value) });
    return [];
  }
}

/** The duplicates of a whole file, in the order of its lines. */
export function findDuplicatesInFile(rows: Iterable<FileRow<ExposureRow>>): DuplicateFinding[] {
  const finder = new ExposureDuplicateFinder();
  return [...rows].flatMap((row) => finder.add(row));
}

function describe(lineNumber: number, value: ExposureRow, first: Seen): DuplicateFinding {
  const ofLine = first.lineNumber;
  if (first.content === contentOf(value)) {
    return rejectDuplicate(lineNumber, ofLine, {
      column: "Date",
      cell: value.day,
      code: "duplicate.same-row",
      reason: `The row repeats line ${ofLine}.`,
      mend: value.start
        ? "Nothing is lost: the first one is imported. Delete this row."
        : "The first one is imported. Delete this row; if it is a second session of that day, write the start times.",
    });
  }
  const what = value.shape === "by-athlete" ? "this athlete in the same session" : "the same session";
  return rejectDuplicate(lineNumber, ofLine, {
    column: "Minutes",
    cell: String(value.minutes),
    code: "duplicate.contradiction",
    reason: `Line ${ofLine} already has ${what}, with other figures.`,
    mend: value.start
      ? "Keep the row that is right and delete the other."
      : "Keep the row that is right; if these are two sessions of one day, write the start times.",
  });
}

function keyOf(row: ExposureRow) {
  const session = [row.day, row.start ?? "", normaliseName(row.teamName), row.kind];
  return [...session, row.shape === "by-athlete" ? athleteKey(row.athlete) : ""].join("\n");
}

function athleteKey(athlete: AthleteExposure["athlete"]) {
  if (athlete.number) return `number ${athlete.number}`;
  const name = normaliseName(`${athlete.givenName} ${athlete.familyName}`);
  return `name ${name} ${athlete.dateOfBirth ?? ""}`;
}

function contentOf(row: ExposureRow) {
  const figures = row.shape === "by-athlete" ? row.presence : row.players;
  return `${row.minutes} ${figures} ${row.surface ?? ""}`;
}
