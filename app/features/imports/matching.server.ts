import type { Tx } from "~db/client.server";
import type { ExposureRow } from "~imports/exposure/definition";
import type { RosterRow } from "~imports/roster/definition";
import {
  carryOut,
  loadAthletes,
  loadEntries,
  loadGuardians,
  loadGuardianships,
  loadParticipations,
  loadSessions,
  loadTeams,
} from "./bulk.queries.server";
import { findSeasons, type ImportRecord } from "./imports.queries.server";
import { type Answers, answersSchema } from "./imports.schema";
import type { ImportRowValue } from "./kinds";
import { ExposureMatcher } from "./matching/exposure-matcher";
import { AthleteIndex } from "./matching/find-athlete";
import { GuardianBook } from "./matching/match-guardian";
import { type Decision, PendingWrites, type SessionRecord, type Tally } from "./matching/records";
import { RosterMatcher } from "./matching/roster-matcher";
import { TeamBook } from "./matching/team-book";

export type RowToMatch = { line: number; value: ImportRowValue };

/**
 * Compares the rows of an import with what is stored. The preview and the import itself use the same one, so that
 * what is written is what was shown; only the import carries the writes out.
 */
export type Matching = {
  /** Decides the next rows of the file, in its order. */
  decide: (rows: readonly RowToMatch[]) => Promise<Decision[]>;
  /** After the last rows. */
  finish: () => void;
  writes: PendingWrites;
  tally: Tally;
};

/** Rows that are compared, staged and written at once: bounds the memory and keeps the statements few. */
export const batchSize = 2000;

export async function openMatching(tx: Tx, record: ImportRecord): Promise<Matching> {
  const answers = answersSchema.parse(record.answers);
  const writes = new PendingWrites();
  const coversAll = tx.scope.teams === "all";
  const teams = new TeamBook(await loadTeams(tx), answers.teams, writes, coversAll);
  return record.kind === "roster"
    ? openRoster(tx, answers, teams, writes, coversAll)
    : openExposure(tx, teams, writes);
}

async function openRoster(
  tx: Tx,
  answers: Answers,
  teams: TeamBook,
  writes: PendingWrites,
  coversAll: boolean,
) {
  const athletes = new AthleteIndex(await loadAthletes(tx, tx.scope.today));
  const guardians = new GuardianBook(await loadGuardians(tx), await loadGuardianships(tx), writes);
  const fromDay = answers.fromDay ?? (await defaultFromDay(tx));
  const state = { athletes, teams, guardians, entries: await loadEntries(tx) };
  const choices = { doubts: answers.doubts ?? {}, fromDay, coversAll };
  const matcher = new RosterMatcher(state, choices, writes);
  return {
    decide: async (rows: readonly RowToMatch[]) =>
      rows.map(({ line, value }) => matcher.decide(line, value as RosterRow)),
    finish: () => matcher.finish(),
    writes,
    tally: matcher.tally,
  };
}

async function openExposure(tx: Tx, teams: TeamBook, writes: PendingWrites): Promise<Matching> {
  const athletes = new AthleteIndex(await loadAthletes(tx, null));
  const state = { athletes, teams, entries: await loadEntries(tx), seasons: await findSeasons(tx) };
  const matcher = new ExposureMatcher(state, tx.scope.today, writes);
  const loaded = new Set<string>();
  return {
    decide: async (rows) => {
      await loadFor(tx, matcher, rows, loaded);
      return rows.map(({ line, value }) => matcher.decide(line, value as ExposureRow));
    },
    finish: () => matcher.finish(),
    writes,
    tally: matcher.tally,
  };
}

/** Loads the sessions that these rows may mean and their participations, each once. */
async function loadFor(tx: Tx, matcher: ExposureMatcher, rows: readonly RowToMatch[], loaded: Set<string>) {
  const values = rows.map(({ value }) => value as ExposureRow);
  const days = values.map(({ day }) => day).sort();
  const teamIds = new Set(values.flatMap((value) => matcher.teamOf(value)?.id ?? []));
  const [first, last] = [days[0], days.at(-1)];
  if (teamIds.size === 0 || !first || !last) return;
  const asked = new Set(values.map(({ day }) => day));
  const sessions = (await loadSessions(tx, [...teamIds], first, last)).filter(({ day }) => asked.has(day));
  matcher.sessions.add(sessions);
  const fresh = sessions.filter(({ id }: SessionRecord) => !loaded.has(id)).map(({ id }) => id);
  for (const id of fresh) loaded.add(id);
  if (fresh.length > 0) matcher.addParticipations(await loadParticipations(tx, fresh));
}

/** The season's first day while a season runs; else today. */
export async function defaultFromDay(tx: Tx) {
  const { today } = tx.scope;
  const season = (await findSeasons(tx)).find(({ startsOn, endsOn }) => startsOn <= today && endsOn >= today);
  return season?.startsOn ?? today;
}

export { carryOut };
