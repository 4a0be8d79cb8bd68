import { type DuplicateFinding, type FileRow, rejectDuplicate } from "~/features/imports/mapping/duplicates";
import { normaliseName } from "~/features/imports/values/names";
import type { RosterRow } from "./definition";

type Row = FileRow<RosterRow>;

/**
 * Finds rows of a roster that repeat or contradict an earlier line of the same file, one row at a time in the
 * file's order. Give it only rows that were accepted. It keeps every row it has seen (about 300 bytes each).
 */
export class RosterDuplicateFinder {
  private readonly byNumber = new Map<string, Row[]>();
  private readonly byPerson = new Map<string, Row[]>();

  /** The findings that a row gives rise to; a finding may concern the earlier line too. */
  add(row: Row): DuplicateFinding[] {
    const { number } = row.value;
    const findings = number ? this.compareByNumber(row, number) : this.compareByPerson(row);
    const rejected = findings.some(
      (finding) => finding.outcome === "rejected" && finding.lineNumber === row.lineNumber,
    );
    if (!rejected) this.remember(row);
    return findings;
  }

  private compareByNumber(row: Row, number: string): DuplicateFinding[] {
    const earlier = this.byNumber.get(number) ?? [];
    const [first] = earlier;
    if (!first) return this.compareToNamesakes(row);
    if (!isSamePerson(first.value, row.value)) return takenNumber(row, first, number);
    return [compareContent(row, earlier, first, `number “${number}”`, "Number", number)];
  }

  /** A row without a number can only be told by name and birthday. */
  private compareByPerson(row: Row): DuplicateFinding[] {
    const earlier = this.byPerson.get(personKey(row.value)) ?? [];
    const [first] = earlier;
    if (!first) return [];
    if (first.value.number) return [withoutNumber(row, first)];
    return [
      compareContent(row, earlier, first, "name and date of birth", "Family name", row.value.familyName),
    ];
  }

  /** Another number: two athletes, even with one name; with one birthday too, a person should look. */
  private compareToNamesakes(row: Row): DuplicateFinding[] {
    const [first] = row.value.dateOfBirth ? (this.byPerson.get(personKey(row.value)) ?? []) : [];
    if (!first) return [];
    if (!first.value.number) return [withoutNumber(row, first)];
    const { lineNumber } = row;
    const ofLine = first.lineNumber;
    const warning = `Line ${ofLine} has the same name and date of birth under another number: check that these are two athletes.`;
    return [{ outcome: "doubtful", lineNumber, ofLine, warning }];
  }

  private remember(row: Row) {
    const { number } = row.value;
    if (number) push(this.byNumber, number, row);
    push(this.byPerson, personKey(row.value), row);
  }
}

/** The duplicates of a whole file, in the order of its lines. */
export function findDuplicatesInFile(rows: Iterable<Row>): DuplicateFinding[] {
  const finder = new RosterDuplicateFinder();
  return [...rows].flatMap((row) => finder.add(row));
}

function compareContent(
  row: Row,
  earlier: Row[],
  first: Row,
  what: string,
  column: string,
  cell: string,
): DuplicateFinding {
  const { lineNumber } = row;
  const same = earlier.find((other) => contentOf(other.value) === contentOf(row.value));
  if (same) {
    return rejectDuplicate(lineNumber, same.lineNumber, {
      column,
      cell,
      code: "duplicate.same-row",
      reason: `The row repeats line ${same.lineNumber}.`,
      mend: "Nothing is lost: the first one is imported. Delete this row.",
    });
  }
  const adds = addsTo(row.value, earlier);
  if (adds) return { outcome: "same-athlete", lineNumber, ofLine: first.lineNumber, adds };
  return rejectDuplicate(lineNumber, first.lineNumber, {
    column,
    cell,
    code: "duplicate.contradiction",
    reason: `Line ${first.lineNumber} has the same ${what}, but other details.`,
    mend: "Keep the row that is right and delete the other.",
  });
}

/** What a further row of one athlete adds without contradicting: a team, or a guardian. */
function addsTo(row: RosterRow, earlier: Row[]): "team" | "guardian" | undefined {
  const agrees = earlier.every(({ value }) => athleteOf(value) === athleteOf(row));
  if (!agrees) return undefined;
  if (row.teamName && earlier.every(({ value }) => value.teamName && teamOf(value) !== teamOf(row)))
    return "team";
  if (!row.guardian) return undefined;
  return earlier.every(({ value }) => isOtherGuardian(value.guardian, row.guardian)) ? "guardian" : undefined;
}

function takenNumber(row: Row, first: Row, number: string): DuplicateFinding[] {
  const { lineNumber } = row;
  const ofLine = first.lineNumber;
  const holder = `${first.value.givenName} ${first.value.familyName}`;
  const rejection = {
    column: "Number",
    cell: number,
    code: "duplicate.number-taken",
    reason: `Number “${number}” already stands on line ${ofLine} for another athlete, ${holder}.`,
    mend: `Give each athlete an own number. Check line ${ofLine} too.`,
  };
  const warning = `Line ${lineNumber} gives number “${number}” to another athlete: check which of them has it.`;
  return [
    rejectDuplicate(lineNumber, ofLine, rejection),
    { outcome: "doubtful", lineNumber: ofLine, ofLine: lineNumber, warning },
  ];
}

function withoutNumber(row: Row, first: Row): DuplicateFinding {
  const ofLine = first.lineNumber;
  const lacking = row.value.number ? `line ${ofLine}` : "this row";
  return rejectDuplicate(row.lineNumber, ofLine, {
    column: "Number",
    cell: row.value.number ?? "",
    code: "duplicate.one-without-number",
    reason: `Line ${ofLine} has the same name and date of birth, and ${lacking} has no number.`,
    mend: "If these are two athletes, fill in both numbers; if not, keep one of the rows.",
  });
}

function isSamePerson(a: RosterRow, b: RosterRow) {
  if (nameOf(a) !== nameOf(b)) return false;
  return !a.dateOfBirth || !b.dateOfBirth || a.dateOfBirth === b.dateOfBirth;
}

function isOtherGuardian(a: RosterRow["guardian"], b: RosterRow["guardian"]) {
  if (!a || !b) return false;
  const name = normaliseName(a.name ?? "") !== normaliseName(b.name ?? "");
  const address = (a.email ?? "").toLowerCase() !== (b.email ?? "").toLowerCase();
  // A corrected spelling or a second address of one guardian changes only one of the two.
  return a.name && b.name ? name : address && Boolean(a.email && b.email);
}

function nameOf(row: RosterRow) {
  return normaliseName(`${row.givenName} ${row.familyName}`);
}

function personKey(row: RosterRow) {
  return `${nameOf(row)}\n${row.dateOfBirth ?? ""}`;
}

function teamOf(row: RosterRow) {
  return normaliseName(row.teamName ?? "");
}

/** What must agree on every row of one athlete. */
function athleteOf(row: RosterRow) {
  return JSON.stringify([personKey(row), row.number, row.sex, row.dominantLeg]);
}

function contentOf(row: RosterRow) {
  const { guardian } = row;
  const told = [guardian?.name, guardian?.email, guardian?.phone, guardian?.language, guardian?.relation];
  return JSON.stringify([athleteOf(row), teamOf(row), row.fromDay, told]);
}

function push(map: Map<string, Row[]>, key: string, row: Row) {
  const rows = map.get(key);
  if (rows) rows.push(row);
  else map.set(key, [row]);
}
