import type { Tx } from "~db/client.server";
import { findChunk, type ImportRecord } from "./imports.queries.server";
import type { Answers, MappedHeading } from "./imports.schema";
import { type ImportDefinition, mappingOf, type RowOptions } from "./kinds";
import type { HeaderMapping, RememberedHeadings } from "./mapping/map-headers";
import { decodeHead, decodeStream } from "./reading/decode-stream";
import { type Dialect, detectDialect } from "./reading/detect-dialect";
import { type DetectedText, detectText, detectTextOfStream, type TextEncoding } from "./reading/detect-text";
import { headBytes } from "./reading/limits";
import { type ReadRow, readRowBatches } from "./reading/read-rows";
import { DayOrderDetector } from "./values/days";
import { needsNameOrder } from "./values/names";

/** The uploaded bytes, chunk by chunk. */
async function* chunksOf(tx: Tx, importId: string): AsyncGenerator<Uint8Array> {
  for (let position = 0; ; position += 1) {
    const bytes = await findChunk(tx, importId, position);
    if (!bytes) return;
    yield bytes;
  }
}

export type FileReading = { detected: DetectedText; encoding: TextEncoding; dialect: Dialect };

/**
 * Finds out how the file is written; what a person said wins.
 * @throws FileRefusal for a file that is no table
 */
export async function inspectFile(
  tx: Tx,
  record: ImportRecord,
  definition: ImportDefinition,
  answers: Answers,
): Promise<FileReading> {
  const first = (await findChunk(tx, record.id, 0)) ?? new Uint8Array();
  const head = first.slice(0, headBytes);
  detectText(head);
  const detected = await detectTextOfStream(chunksOf(tx, record.id));
  const encoding = answers.encoding ?? detected.encoding;
  const dialect = detectDialect(decodeHead(head, encoding), {
    isHeaderWord: definition.isHeading,
    complete: head.length === record.fileSize,
    ...(answers.delimiter ? { delimiter: answers.delimiter } : {}),
    ...(answers.headerLine ? { headerLine: answers.headerLine } : {}),
  });
  return { detected, encoding, dialect };
}

/** The rows of the file, in batches of a chunk each. */
export function readFileRows(tx: Tx, record: ImportRecord, { encoding, dialect }: FileReading) {
  return readRowBatches(decodeStream(chunksOf(tx, record.id), encoding), dialect);
}

export type Columns = {
  mapping: Record<string, number>;
  headings: MappedHeading[];
  /** What only a person can decide, each as a sentence. */
  doubts: string[];
};

/** Which heading is which column: as a person confirmed it, else as the headings say. */
export function mapColumns(
  definition: ImportDefinition,
  header: readonly string[],
  remembered: RememberedHeadings<string>,
  answered: Answers["columns"],
): Columns {
  const found = definition.mapHeaders(header, remembered);
  const byIndex = new Map(found.mapped.map((one) => [one.index, one]));
  const headings = header.map((text, index): MappedHeading => {
    const automatic = byIndex.get(index);
    const key = answered ? (answered[index] ?? null) : (automatic?.key ?? null);
    const same = key === (automatic?.key ?? null);
    const confidence = answered && !same ? "person" : (automatic?.confidence ?? "none");
    return {
      index,
      header: text,
      key,
      confidence: answered && confidence === "close" ? "person" : confidence,
    };
  });
  const mapping = answered ? mappingOf(answered) : found.mapping;
  return {
    mapping: definedOnly(mapping),
    headings,
    doubts: answered ? [] : describeDoubts(found, definition),
  };
}

function definedOnly(mapping: Partial<Record<string, number>>) {
  const kept: Record<string, number> = {};
  for (const [key, index] of Object.entries(mapping)) if (index !== undefined) kept[key] = index;
  return kept;
}

function describeDoubts(found: HeaderMapping<string>, definition: ImportDefinition) {
  const labels = new Map(definition.columns.map(({ key, label }) => [key, label]));
  const close = found.mapped.filter(({ confidence }) => confidence === "close");
  return [
    ...found.problems.map(({ reason, mend }) => `${reason} ${mend}`),
    ...close.map(
      ({ header, key }) =>
        `“${header}” looks like “${labels.get(key)}”: confirm it, or choose another column.`,
    ),
  ];
}

/** What a first reading of the whole file tells, so that everything can be asked at once. */
export class Evidence {
  readonly sample: { line: number; cells: string[] }[] = [];
  readonly notes: string[] = [];
  readonly teams = new Map<string, number>();
  rows = 0;
  nameExample: string | undefined;
  private readonly days = new DayOrderDetector();
  private readonly dayIndexes: number[];
  private readonly nameIndex: number | undefined;
  private readonly teamIndex: number | undefined;

  constructor(definition: ImportDefinition, mapping: Record<string, number>) {
    this.dayIndexes = definition.dayColumns.flatMap((key) => mapping[key] ?? []);
    this.nameIndex = mapping[definition.fullNameColumn];
    this.teamIndex = mapping.teamName;
  }

  add(row: ReadRow) {
    if (row.kind === "skipped") this.notes.push(row.note);
    if (row.kind !== "row" && row.kind !== "problem") return;
    this.rows += 1;
    if (this.sample.length < sampleRows) this.sample.push({ line: row.lineNumber, cells: row.cells });
    if (row.kind === "problem") return;
    for (const index of this.dayIndexes) this.days.add(row.cells[index] ?? "");
    const name = this.nameIndex === undefined ? "" : (row.cells[this.nameIndex] ?? "");
    if (this.nameExample === undefined && needsNameOrder([name])) this.nameExample = name.trim();
    const team = this.teamIndex === undefined ? "" : (row.cells[this.teamIndex] ?? "").trim();
    if (team !== "" && (this.teams.has(team) || this.teams.size < mostTeamNames))
      this.teams.set(team, (this.teams.get(team) ?? 0) + 1);
  }

  get dayOrder() {
    return this.days.order;
  }

  /** Cells to show beside the question which comes first, the day or the month. */
  get dayExamples() {
    const telling = this.days.evidence.filter(({ kind }) => kind !== "clear" && kind !== "unreadable");
    return telling.map(({ example }) => example);
  }
}

const sampleRows = 6;
/** Past this many names a column is hardly the teams: bounds what is kept of a wrong mapping. */
const mostTeamNames = 200;

export function rowOptions(
  answers: Answers,
  order: DayOrderDetector["order"],
  today: string,
  teamName: string | undefined,
): RowOptions {
  const detected = order === "ambiguous" || order === "mixed" ? undefined : order;
  const dayOrder = answers.dayOrder ?? detected;
  return {
    latestBirthday: today,
    ...(dayOrder ? { dayOrder } : {}),
    ...(answers.nameOrder ? { nameOrder: answers.nameOrder } : {}),
    ...(teamName ? { teamName } : {}),
  };
}
