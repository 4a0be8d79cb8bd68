import type { Sex } from "~db/schema/codes";
import {
  bandOf,
  type CountedInjuries,
  countInjuries,
  type ExposureByUnit,
  type ExposureCell,
  type InjuryRow,
  kindsOf,
  sumExposure,
} from "./counting";
import { type Coverage, coverageOf, type SessionTally } from "./coverage";
import type { ContactChoice, RatesFilters } from "./filters";
import type { Band, RatedTeam } from "./groups";
import type { SeasonDays } from "./periods";
import type { ConfirmedWeek } from "./silence";

/**
 * What a view of rates looks at: the counts of its days, and the part of them that its filters leave. Pure. Every
 * view (incidence, burden, comparisons, trends, teams) begins with `select`, so that they count alike.
 */
export type Counts = {
  /** The days looked at, from the first to the last, ISO. */
  from: string;
  to: string;
  /** Exposure of the teams that reported; what silent teams had stands in `silent`. */
  cells: readonly ExposureCell[];
  silent: readonly ExposureCell[];
  injuries: readonly InjuryRow[];
  sessions: readonly SessionTally[];
  teams: readonly RatedTeam[];
  confirmedWeeks: readonly ConfirmedWeek[];
  bands: readonly Band[];
  seasons: readonly SeasonDays[];
};

export type Selection = CountedInjuries & {
  cells: ExposureCell[];
  silent: ExposureCell[];
  sessions: SessionTally[];
  exposure: ExposureByUnit;
  coverage: Coverage;
};

const contactsOf: Record<ContactChoice, (contact: InjuryRow["contact"]) => boolean> = {
  any: () => true,
  without: (contact) => contact === "non_contact" || Boolean(contact?.startsWith("indirect")),
  non_contact: (contact) => contact === "non_contact",
  indirect: (contact) => Boolean(contact?.startsWith("indirect")),
  direct: (contact) => Boolean(contact?.startsWith("direct")),
  unknown: (contact) => contact === null || contact === "unknown",
};

const onsetIs = ({ onset }: InjuryRow, choice: RatesFilters["onset"]) =>
  choice === "any" || (choice === "gradual" ? onset === "gradual" : onset !== null && onset !== "gradual");

const occursAs = ({ subsequence }: InjuryRow, choice: RatesFilters["occurrence"]) =>
  choice === "all" ||
  (choice === "recurrent" ? subsequence === "recurrent" : subsequence === null || subsequence === "index");

/** Whether an injury is of the kind that the filters ask for; sex, sport and age are asked of cells as well. */
export const isOfKind = (injury: InjuryRow, filters: RatesFilters) =>
  (filters.area === "any" || injury.bodyArea === filters.area) &&
  (filters.side === "any" || injury.side === filters.side) &&
  contactsOf[filters.contact](injury.contact) &&
  onsetIs(injury, filters.onset) &&
  occursAs(injury, filters.occurrence);

type Whose = { sex: Sex | "unknown"; age: number | null; teamId: string | null };

/** Whether somebody's exposure or injury belongs to the people that the filters ask for. */
export function peopleOf({ teams, bands }: Pick<Counts, "teams" | "bands">, filters: RatesFilters) {
  const sportOf = new Map(teams.map(({ id, sport }) => [id, sport]));
  return ({ sex, age, teamId }: Whose) =>
    (filters.sex === "any" || sex === filters.sex) &&
    (filters.age === "any" || (bandOf(age, bands) ?? "unknown") === filters.age) &&
    (filters.sport === "any" || (teamId !== null && sportOf.get(teamId) === filters.sport));
}

/** Narrows counts to what the filters ask for, and counts its injuries by the one table of numerators. */
export function select(counts: Counts, filters: RatesFilters): Selection {
  const kinds: readonly string[] = kindsOf[filters.sessions];
  const isWhose = peopleOf(counts, filters);
  const isOfSport = peopleOf(counts, { ...filters, sex: "any", age: "any" });
  const cells = counts.cells.filter((cell) => kinds.includes(cell.kind) && isWhose(cell));
  const silent = counts.silent.filter((cell) => kinds.includes(cell.kind) && isWhose(cell));
  const sessions = counts.sessions.filter(
    ({ kind, teamId }) => kinds.includes(kind) && isOfSport({ teamId, sex: "unknown", age: null }),
  );
  const injuries = counts.injuries.filter((injury) => isWhose(injury) && isOfKind(injury, filters));
  const rules = { definition: filters.injuries, sessions: filters.sessions, unit: filters.per };
  return {
    cells,
    silent,
    sessions,
    ...countInjuries(injuries, rules),
    exposure: sumExposure(cells),
    coverage: coverageOf(sessions),
  };
}
