import type { RosterRow } from "~imports/roster/definition";
import type { DoubtAnswer } from "../imports.schema";
import { normaliseName } from "../values/names";
import { quoteCell } from "../values/parsed";
import type { AthleteRecord, RowProblem } from "./records";

export type AthleteMatch =
  | { kind: "known"; athlete: AthleteRecord }
  | { kind: "new"; warning?: string }
  | { kind: "problem"; problem: RowProblem }
  /** Only a person can say whether the row means one of these. */
  | { kind: "doubt"; candidates: AthleteRecord[]; separable: boolean; reason: string };

/** The athletes an import knows, by number and by name. */
export class AthleteIndex {
  private readonly byId = new Map<string, AthleteRecord>();
  private readonly byNumber = new Map<string, AthleteRecord>();
  private readonly byName = new Map<string, AthleteRecord[]>();

  constructor(athletes: readonly AthleteRecord[]) {
    for (const athlete of athletes) this.add(athlete);
  }

  add(athlete: AthleteRecord) {
    this.byId.set(athlete.id, athlete);
    if (athlete.number !== null) this.byNumber.set(athlete.number, athlete);
    const namesakes = this.byName.get(athlete.nameKey);
    if (namesakes) namesakes.push(athlete);
    else this.byName.set(athlete.nameKey, [athlete]);
  }

  /** To be called when a row has given a known athlete a number. */
  noteNumber(athlete: AthleteRecord) {
    if (athlete.number !== null) this.byNumber.set(athlete.number, athlete);
  }

  withNumber(number: string) {
    return this.byNumber.get(number);
  }

  named(nameKey: string) {
    return this.byName.get(nameKey) ?? [];
  }

  withId(id: string) {
    return this.byId.get(id);
  }
}

/**
 * Whom a row of a roster means: by number first, then by name and date of birth. Where number, name and birthday
 * contradict each other, or lack, a person decides; two athletes with one name and different numbers stay two.
 */
export function findAthlete(row: RosterRow, index: AthleteIndex, answer?: DoubtAnswer): AthleteMatch {
  const match = judge(row, index);
  if (match.kind !== "doubt") return match;
  if (match.candidates.some(({ visible }) => !visible))
    return { kind: "problem", problem: outsideOwnTeams(row) };
  if (answer && "same" in answer) {
    const chosen = match.candidates.find(({ id }) => id === answer.same);
    if (chosen) return { kind: "known", athlete: chosen };
  }
  if (answer && "separate" in answer && match.separable) return { kind: "new" };
  return match;
}

function judge(row: RosterRow, index: AthleteIndex): AthleteMatch {
  const nameKey = normaliseName(`${row.givenName} ${row.familyName}`);
  const birthday = row.dateOfBirth ?? null;
  if (row.number) {
    const holder = index.withNumber(row.number);
    if (holder) return judgeHolder(row, holder, nameKey, birthday);
  }
  const namesakes = index.named(nameKey);
  const twins = birthday ? namesakes.filter(({ dateOfBirth }) => dateOfBirth === birthday) : [];
  const unborn = namesakes.filter(({ dateOfBirth }) => dateOfBirth === null);
  return row.number ? judgeNewNumber(namesakes, twins, birthday) : judgeNameless(row, twins, unborn);
}

function judgeHolder(
  row: RosterRow,
  holder: AthleteRecord,
  nameKey: string,
  birthday: string | null,
): AthleteMatch {
  if (!holder.visible) return { kind: "problem", problem: outsideOwnTeams(row) };
  const sameBirthday = birthday !== null && holder.dateOfBirth === birthday;
  if (holder.nameKey === nameKey || sameBirthday) return { kind: "known", athlete: holder };
  return {
    kind: "doubt",
    candidates: [holder],
    separable: false,
    reason: `Number ${quoteCell(row.number ?? "")} belongs to an athlete with another name.`,
  };
}

/** A number nobody has yet: a new athlete, unless a namesake may be the same person. */
function judgeNewNumber(
  namesakes: AthleteRecord[],
  twins: AthleteRecord[],
  birthday: string | null,
): AthleteMatch {
  const [twin] = twins;
  if (twin) {
    if (twins.length === 1 && twin.number === null && twin.visible) return { kind: "known", athlete: twin };
    return {
      kind: "doubt",
      candidates: twins,
      separable: true,
      reason: `An athlete with this name and date of birth is known ${twin.number === null ? "already" : "under another number"}.`,
    };
  }
  const open = namesakes.filter(
    ({ number, dateOfBirth }) => number === null && (dateOfBirth === null || birthday === null),
  );
  if (open.length > 0) {
    return {
      kind: "doubt",
      candidates: open,
      separable: true,
      reason: "An athlete with this name is known, without a number to tell them by.",
    };
  }
  const seen = namesakes.find(({ visible }) => visible);
  return seen
    ? {
        kind: "new",
        warning: `There is another athlete with this name (${seen.number ? `number ${seen.number}` : "no number"}). They stay two.`,
      }
    : { kind: "new" };
}

/** Without a number only name and birthday tell athletes apart; the row has a birthday then. */
function judgeNameless(row: RosterRow, twins: AthleteRecord[], unborn: AthleteRecord[]): AthleteMatch {
  const [twin] = twins;
  if (twins.length === 1 && twin)
    return twin.visible
      ? { kind: "known", athlete: twin }
      : { kind: "problem", problem: outsideOwnTeams(row) };
  const candidates = twins.length > 1 ? twins : unborn;
  if (candidates.length === 0) return { kind: "new" };
  return {
    kind: "doubt",
    candidates,
    separable: true,
    reason:
      twins.length > 1
        ? "Several athletes have this name and date of birth."
        : "An athlete with this name is known, without a date of birth.",
  };
}

function outsideOwnTeams(row: RosterRow): RowProblem {
  return {
    column: row.number ? "Number" : "Family name",
    cell: row.number ?? row.familyName,
    code: "athlete.outside",
    reason: "This athlete is in the organisation already, outside your teams.",
    mend: "Ask somebody who covers all teams to import this row.",
  };
}
