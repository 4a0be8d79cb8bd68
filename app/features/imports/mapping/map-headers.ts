import { foldText } from "~/platform/fold-text";

/** One column that an import knows. */
export type ColumnDefinition<Key extends string = string> = {
  key: Key;
  label: string;
  description: string;
  required: boolean;
  example: string;
  /** Headings people use, in several languages; case, accents and punctuation do not matter. */
  aliases: readonly string[];
};
/** For each mapped column the place of its cell in a row, from 0. */
export type ColumnMapping<Key extends string> = Partial<Record<Key, number>>;
/** remembered: confirmed in an earlier import; exact: label or key; alias; close: one letter off, to confirm. */
export type MappingConfidence = "remembered" | "exact" | "alias" | "close";
export type MappedColumn<Key extends string> = {
  key: Key;
  index: number;
  header: string;
  confidence: MappingConfidence;
};
export type MappingProblem = {
  code: "duplicate-header" | "two-columns";
  indexes: number[];
  reason: string;
  mend: string;
};
export type HeaderMapping<Key extends string> = {
  mapping: ColumnMapping<Key>;
  mapped: MappedColumn<Key>[];
  /** Headings that no column took, with those a person has told to leave out. */
  unmapped: { index: number; header: string; ignored: boolean }[];
  /** What only a person can decide: nothing is mapped from these headings. */
  problems: MappingProblem[];
};
/** What an organisation confirmed before: `rememberedKey(header)` to a column, or null for "leave out". */
export type RememberedHeadings<Key extends string> = Readonly<Record<string, Key | null>>;

type Match<Key extends string> = { key: Key; confidence: MappingConfidence };
const ranks: Record<MappingConfidence, number> = { remembered: 3, exact: 2, alias: 1, close: 0 };
const shortestCloseHeading = 6;

/** The form under which a heading is remembered. */
export const rememberedKey = foldText;

/**
 * Finds for each heading the column it means. A heading maps to one column and a column takes one heading;
 * equal claims and repeated headings are named as problems rather than decided.
 */
export function mapHeaders<Key extends string>(
  headers: readonly string[],
  columns: readonly ColumnDefinition<Key>[],
  remembered: RememberedHeadings<Key> = {},
): HeaderMapping<Key> {
  const known = indexHeadings(columns);
  const claims = new Map<Key, MappedColumn<Key>[]>();
  const result: HeaderMapping<Key> = { mapping: {}, mapped: [], unmapped: [], problems: [] };
  headers.forEach((header, index) => {
    const folded = foldText(header);
    const match = findMatch(folded, known, remembered);
    const ignored = remembered[folded] === null && folded in remembered;
    if (match)
      claims.set(match.key, [...(claims.get(match.key) ?? []), { ...match, index, header: header.trim() }]);
    else if (folded !== "") result.unmapped.push({ index, header: header.trim(), ignored });
  });
  for (const { key, label } of columns) decide(label, claims.get(key) ?? [], result);
  // Rivals for one column are named already.
  const named = new Set(result.problems.flatMap(({ indexes }) => indexes));
  result.problems.push(
    ...findRepeatedHeadings(result.unmapped.filter(({ index, ignored }) => !ignored && !named.has(index))),
  );
  result.mapped.sort((a, b) => a.index - b.index);
  result.unmapped.sort((a, b) => a.index - b.index);
  return result;
}

/** Says whether a cell is a heading of any of these columns; for finding the header row. */
export function makeHeaderWordTest(...definitions: (readonly ColumnDefinition[])[]) {
  const known = indexHeadings(definitions.flat());
  return (cell: string) => known.has(foldText(cell));
}

function indexHeadings<Key extends string>(columns: readonly ColumnDefinition<Key>[]) {
  const known = new Map<string, Match<Key>>();
  for (const { key, label } of columns) {
    for (const name of [key, key.replace(/[A-Z]/gu, (letter) => ` ${letter}`), label]) {
      known.set(foldText(name), { key, confidence: "exact" });
    }
  }
  for (const { key, aliases } of columns) {
    for (const alias of aliases) {
      const folded = foldText(alias);
      if (!known.has(folded)) known.set(folded, { key, confidence: "alias" });
    }
  }
  return known;
}

function findMatch<Key extends string>(
  folded: string,
  known: ReadonlyMap<string, Match<Key>>,
  remembered: RememberedHeadings<Key>,
): Match<Key> | undefined {
  if (folded === "") return undefined;
  if (Object.hasOwn(remembered, folded)) {
    const key = remembered[folded];
    return key ? { key, confidence: "remembered" } : undefined;
  }
  const match = known.get(folded);
  if (match || folded.length < shortestCloseHeading) return match;
  const close = new Set(
    [...known].filter(([heading]) => isOneLetterOff(heading, folded)).map(([, { key }]) => key),
  );
  const [key] = close;
  return key !== undefined && close.size === 1 ? { key, confidence: "close" } : undefined;
}

function decide<Key extends string>(label: string, claims: MappedColumn<Key>[], result: HeaderMapping<Key>) {
  const best = Math.max(...claims.map(({ confidence }) => ranks[confidence]));
  const winners = claims.filter(({ confidence }) => ranks[confidence] === best);
  const [winner] = winners;
  if (winners.length === 1 && winner) {
    result.mapped.push(winner);
    result.mapping[winner.key] = winner.index;
  } else if (winners.length > 1) {
    result.problems.push(describeRivals(label, winners));
  }
  for (const { index, header } of claims) {
    if (winners.length > 1 || index !== winner?.index)
      result.unmapped.push({ index, header, ignored: false });
  }
}

function describeRivals<Key extends string>(label: string, rivals: MappedColumn<Key>[]): MappingProblem {
  const indexes = rivals.map(({ index }) => index);
  const same = new Set(rivals.map(({ header }) => foldText(header))).size === 1;
  const places = listPlaces(indexes);
  const names = rivals.map(({ header }) => `“${header}”`).join(" and ");
  return {
    code: same ? "duplicate-header" : "two-columns",
    indexes,
    reason: same
      ? `The heading “${rivals[0]?.header}” stands over ${places}.`
      : `${names} (${places}) could both be “${label}”.`,
    mend: `Choose which of them is “${label}”.`,
  };
}

function findRepeatedHeadings(unmapped: readonly { index: number; header: string }[]): MappingProblem[] {
  return [...groupByHeading(unmapped).values()]
    .filter((group) => group.length > 1)
    .map((group) => ({
      code: "duplicate-header",
      indexes: group.map(({ index }) => index),
      reason: `The heading “${group[0]?.header}” stands over ${listPlaces(group.map(({ index }) => index))}.`,
      mend: "Map the one that is needed by hand, or give the columns different headings.",
    }));
}

function groupByHeading(unmapped: readonly { index: number; header: string }[]) {
  const groups = new Map<string, { index: number; header: string }[]>();
  for (const item of unmapped) {
    const folded = foldText(item.header);
    groups.set(folded, [...(groups.get(folded) ?? []), item]);
  }
  return groups;
}

function listPlaces(indexes: readonly number[]) {
  const places = indexes.map((index) => index + 1);
  return `columns ${places.slice(0, -1).join(", ")} and ${places.at(-1)}`;
}

/** One letter added, left out, changed, or two neighbours swapped. */
function isOneLetterOff(a: string, b: string) {
  if (a === b || Math.abs(a.length - b.length) > 1) return a === b;
  let start = 0;
  while (start < Math.min(a.length, b.length) && a[start] === b[start]) start += 1;
  const [restA, restB] = [a.slice(start), b.slice(start)];
  if (restA.slice(1) === restB || restA === restB.slice(1) || restA.slice(1) === restB.slice(1)) return true;
  return restA[0] === restB[1] && restA[1] === restB[0] && restA.slice(2) === restB.slice(2);
}
