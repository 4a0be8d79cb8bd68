import { foldText } from "~/platform/fold-text";
import { type Tx, write } from "~db/client.server";
import type { MemberScope } from "../accounts/scope.server";
import { loadTeams } from "./bulk.queries.server";
import { guessTeam } from "./guess-team";
import {
  addWarnings,
  allowLongWork,
  deleteChunks,
  deleteRows,
  findAliases,
  findImport,
  type ImportRecord,
  insertRows,
  takeTurn,
  updateImport,
} from "./imports.queries.server";
import { type Answers, answersSchema, type Question, type Reading } from "./imports.schema";
import { definitions, type ImportDefinition } from "./kinds";
import { type Decision, reject, type TeamRecord } from "./matching/records";
import { batchSize, defaultFromDay, openMatching, type RowToMatch } from "./matching.server";
import { reportProgress } from "./progress.server";
import {
  Evidence,
  type FileReading,
  inspectFile,
  mapColumns,
  readFileRows,
  rowOptions,
} from "./read-file.server";
import type { ReadRow } from "./reading/read-rows";
import { FileRefusal } from "./refusal";
import { parseNamePart } from "./values/names";

/**
 * Reads an uploaded file into its preview, or into the questions that stop it. Safe to run twice: the second waits
 * for the first and finds nothing left to do. A file that is no table ends the import with the reason and the mend.
 */
export async function prepareImport(scope: MemberScope, id: string) {
  await write(scope, (tx) => updateImport(tx, id, ["uploaded"], { state: "reading", progressDone: 0 }));
  try {
    await write(scope, async (tx) => {
      await allowLongWork(tx);
      await takeTurn(tx, id);
      const record = await findImport(tx, id);
      if (record?.state === "reading") await prepare(tx, record);
    });
  } catch (error) {
    if (!(error instanceof FileRefusal)) throw error;
    await refuse(scope, id, error);
  }
}

/** What a person set may be set otherwise; what the file is cannot. */
async function refuse(scope: MemberScope, id: string, { code, reason, mend }: FileRefusal) {
  await write(scope, async (tx) => {
    const record = await findImport(tx, id);
    const { encoding, delimiter, headerLine } = answersSchema.parse(record?.answers ?? {});
    const mendable = code === "wrong-encoding" || encoding || delimiter || headerLine;
    if (mendable) {
      const question: Question = { kind: "reading", reason, mend };
      await updateImport(tx, id, ["reading"], { state: "needs_answers", questions: [question] });
      return;
    }
    await updateImport(tx, id, ["reading"], { state: "failed", failure: `${reason} ${mend}` });
    await deleteChunks(tx, id);
  });
}

async function prepare(tx: Tx, record: ImportRecord) {
  const definition = definitions[record.kind as keyof typeof definitions];
  const answers = answersSchema.parse(record.answers);
  const file = await inspectFile(tx, record, definition, answers);
  const remembered = await findAliases(tx, record.kind);
  const columns = mapColumns(definition, file.dialect.header, remembered, answers.columns);
  const evidence = new Evidence(definition, columns.mapping);
  for await (const rows of readFileRows(tx, record, file)) for (const row of rows) evidence.add(row);
  const teams = await loadTeams(tx);
  const teamName = teams.find(({ id, covered }) => covered && id === answers.teamId)?.name;
  const options = rowOptions(answers, evidence.dayOrder, tx.scope.today, teamName);
  const missing = definition.findMissing(columns.mapping, options);
  const questions = ask(evidence, answers, [...missing, ...columns.doubts], teams, tx.scope.teams === "all");
  const described = {
    reading: await describe(tx, record, file, evidence, answers),
    mapping: { headings: columns.headings },
    progressTotal: evidence.rows,
  };
  await deleteRows(tx, record.id);
  if (questions.length > 0) {
    await updateImport(tx, record.id, ["reading"], { ...described, state: "needs_answers", questions });
    return;
  }
  const staging = new Staging(tx, record, definition, evidence.rows);
  for await (const rows of readFileRows(tx, record, file)) {
    for (const row of rows) staging.add(row, columns.mapping, options);
    await staging.stageFullBatches();
  }
  const counts = await staging.finish();
  await updateImport(tx, record.id, ["reading"], {
    ...described,
    state: "previewed",
    questions: [],
    counts,
    progressDone: evidence.rows,
  });
}

async function describe(
  tx: Tx,
  record: ImportRecord,
  file: FileReading,
  evidence: Evidence,
  answers: Answers,
) {
  const { dialect, encoding, detected } = file;
  const reading: Reading = {
    encoding,
    encodingSure: answers.encoding !== undefined || detected.confidence !== "unsure",
    delimiter: dialect.delimiter,
    delimiterSure: answers.delimiter !== undefined || dialect.confidence !== "unsure",
    headerLine: dialect.headerLine,
    titleLines: dialect.titleLines,
    header: dialect.header,
    sample: evidence.sample,
    dayOrder: answers.dayOrder ?? evidence.dayOrder,
    fromDay: record.kind === "roster" ? (answers.fromDay ?? (await defaultFromDay(tx))) : null,
    notes: evidence.notes.slice(0, 20),
  };
  return reading;
}

/** Everything that only a person can say, gathered so that it is asked once. */
function ask(
  evidence: Evidence,
  answers: Answers,
  columnReasons: string[],
  teams: readonly TeamRecord[],
  coversAll: boolean,
): Question[] {
  const questions: Question[] = [];
  if (columnReasons.length > 0) questions.push({ kind: "columns", reasons: columnReasons });
  const { dayOrder, nameExample } = evidence;
  if ((dayOrder === "ambiguous" || dayOrder === "mixed") && !answers.dayOrder)
    questions.push({ kind: "day-order", order: dayOrder, examples: evidence.dayExamples });
  if (nameExample !== undefined && !answers.nameOrder)
    questions.push({ kind: "name-order", example: nameExample });
  // Who covers listed teams cannot make one: those rows are rejected instead.
  const unknown = coversAll ? findUnknownTeams(evidence, answers, teams) : [];
  if (unknown.length > 0) questions.push({ kind: "teams", teams: unknown });
  return questions;
}

function findUnknownTeams(evidence: Evidence, answers: Answers, teams: readonly TeamRecord[]) {
  const known = new Set([...teams.map(({ nameKey }) => nameKey), ...Object.keys(answers.teams ?? {})]);
  const unknown = new Map<
    string,
    { key: string; name: string; rows: number; guess: ReturnType<typeof guessTeam> }
  >();
  for (const [text, rows] of evidence.teams) {
    const parsed = parseNamePart(text, "team");
    const key = foldText(text);
    if (!parsed.ok || known.has(key)) continue;
    const seen = unknown.get(key);
    if (seen) seen.rows += rows;
    else unknown.set(key, { key, name: parsed.value, rows, guess: guessTeam(parsed.value) });
  }
  return [...unknown.values()];
}

type Judged = {
  line: number;
  cells: string[];
  value: RowToMatch["value"] | null;
  decision: Decision | undefined;
};

/** Stages the rows in batches: parsed, checked against the file itself, compared with what is stored. */
class Staging {
  private readonly counts: Record<string, number> = {
    create: 0,
    update: 0,
    unchanged: 0,
    rejected: 0,
    warned: 0,
    doubtful: 0,
    rows: 0,
  };
  private readonly findDuplicates: ReturnType<ImportDefinition["duplicates"]>;
  /** Warnings about lines that are staged already, by line. */
  private readonly late: Record<string, { column: string; cell: string; warning: string }[]> = {};
  private readonly tx: Tx;
  private readonly record: ImportRecord;
  private readonly definition: ImportDefinition;
  private readonly total: number;
  private readonly parseWarnings = new Map<number, Decision["warnings"]>();
  private pending: Judged[] = [];
  private matching: Awaited<ReturnType<typeof openMatching>> | undefined;

  constructor(tx: Tx, record: ImportRecord, definition: ImportDefinition, total: number) {
    this.tx = tx;
    this.record = record;
    this.definition = definition;
    this.total = total;
    this.findDuplicates = definition.duplicates();
  }

  add(row: ReadRow, mapping: Record<string, number>, options: Parameters<ImportDefinition["parseRow"]>[2]) {
    if (row.kind === "header" || row.kind === "skipped") return;
    const { lineNumber: line, cells } = row;
    if (row.kind === "problem") {
      const problem = { column: "", cell: "", code: row.code, reason: row.reason, mend: row.mend };
      this.pending.push({ line, cells, value: null, decision: reject(problem) });
      return;
    }
    const result = this.definition.parseRow(cells, mapping, options);
    if (!result.ok) {
      const decision: Decision = {
        outcome: "rejected",
        problems: result.rejected,
        changes: [],
        warnings: result.warnings,
      };
      this.pending.push({ line, cells, value: null, decision });
      return;
    }
    this.parseWarnings.set(line, result.warnings);
    const findings = this.findDuplicates({ lineNumber: line, value: result.value });
    const refused = findings.find((one) => one.outcome === "rejected" && one.lineNumber === line);
    for (const finding of findings) {
      if (finding.outcome !== "doubtful") continue;
      const warning = { column: "", cell: "", warning: finding.warning };
      if (finding.lineNumber === line) this.parseWarnings.get(line)?.push(warning);
      else this.late[finding.lineNumber] = [...(this.late[finding.lineNumber] ?? []), warning];
    }
    const decision = refused?.outcome === "rejected" ? reject(refused.rejection, result.warnings) : undefined;
    this.pending.push({ line, cells, value: decision ? null : result.value, decision });
  }

  async stageFullBatches() {
    while (this.pending.length >= batchSize) await this.stage(this.pending.splice(0, batchSize));
  }

  /** @returns the counts of the preview: rows by outcome, and the records that would be made and changed */
  async finish() {
    while (this.pending.length > 0) await this.stage(this.pending.splice(0, batchSize));
    this.matching?.finish();
    await addWarnings(this.tx, this.record.id, this.late);
    return { ...this.counts, ...this.matching?.tally };
  }

  private async stage(rows: Judged[]) {
    this.matching ??= await openMatching(this.tx, this.record);
    const open = rows.flatMap(({ line, value, decision }) => (value && !decision ? [{ line, value }] : []));
    const decisions = await this.matching.decide(open);
    // The preview writes nothing.
    this.matching.writes.clear();
    const decided = new Map(open.map(({ line }, index) => [line, decisions[index]]));
    const staged = rows.map(({ line, cells, value, decision }) => {
      const { outcome, problems, changes, warnings } = decision ?? decided.get(line) ?? reject(unread);
      const all = decision ? warnings : [...(this.parseWarnings.get(line) ?? []), ...warnings];
      this.parseWarnings.delete(line);
      this.count(
        outcome,
        all.length > 0 || line in this.late,
        problems.some((problem) => problem.candidates),
      );
      return { line, cells, value, outcome, problems, changes, warnings: all };
    });
    await insertRows(this.tx, this.record.id, staged);
    await reportProgress(this.tx.scope, this.record.id, this.counts.rows ?? 0, this.total);
  }

  private count(outcome: Decision["outcome"], warned: boolean, doubtful: boolean) {
    const add = (key: string) => {
      this.counts[key] = (this.counts[key] ?? 0) + 1;
    };
    add("rows");
    add(outcome);
    if (warned && outcome !== "rejected") add("warned");
    if (doubtful) add("doubtful");
  }
}

const unread = {
  column: "",
  cell: "",
  code: "row.unread",
  reason: "The row was not read.",
  mend: "Upload the file again.",
};
