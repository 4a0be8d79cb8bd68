import { type AgeBand, ageBand } from "~/statistics";
import type {
  BodyArea,
  Contact,
  ExposureGrade,
  Movement,
  Onset,
  pathologies,
  SessionKind,
  SessionState,
  Sex,
  Side,
  subsequences,
  tissues,
} from "~db/schema/codes";
import type { CaseDefinition, RateUnit, SessionChoice } from "./filters";

/**
 * From records to counts: which injuries enter which numerator, and which exposure stands under it. Pure; the rows
 * come from the queries beside it. Everything that shows a rate of injuries counts through this file.
 */

export type CountedGrade = Exclude<ExposureGrade, "none">;
export const countedKinds = ["training", "match"] as const;
export type CountedKind = (typeof countedKinds)[number];
export type Tissue = (typeof tissues)[number];
export type Pathology = (typeof pathologies)[number];
export type CountedSex = Sex | "unknown";

/**
 * Exposure of one team, day, kind, grade, sex and age, summed in the database. `aes` is 0 for the estimated grade. What
 * a headcount holds above the roster has the sex "unknown" and no age.
 */
export type ExposureCell = {
  teamId: string;
  /** ISO date of the sessions. */
  day: string;
  kind: CountedKind;
  grade: CountedGrade;
  sex: CountedSex;
  age: number | null;
  aes: number;
  hours: number;
};

/** One injury event with what decides whether it counts. Further diagnoses of the event are no rows of their own. */
export type InjuryRow = {
  id: string;
  athleteId: string;
  sex: Sex;
  /** Completed years on the day of onset; null without a date of birth. */
  age: number | null;
  /** ISO date of the onset. */
  onsetDay: string;
  /** The day it is counted on: that of its session, for a gradual injury or without a session that of the onset. */
  day: string;
  sessionId: string | null;
  onset: Onset | null;
  contact: Contact | null;
  movement: Movement | null;
  bodyArea: BodyArea;
  side: Side;
  /** The principal diagnosis; null until one is given. */
  tissue: Tissue | null;
  pathology: Pathology | null;
  /** Whether this athlete had been warmed up, as the injury's own record says; null when it does not. */
  warmedUp: boolean | null;
  subsequence: (typeof subsequences)[number] | null;
  outsideSport: boolean;
  withdrawn: boolean;
  /** The session's team; without a session the athlete's team on the day of onset; null when there was none. */
  teamId: string | null;
  sessionKind: SessionKind | null;
  sessionState: SessionState | null;
  /** Whether the named session has exposure that counts, in each unit. */
  sessionAes: boolean;
  sessionHours: boolean;
  /** Whether the team's week of the onset has a training or match with exposure, in each unit. */
  weekAes: boolean;
  weekHours: boolean;
  /** Days of time loss up to today, or up to the day the athlete left; onset is day 0. */
  daysLost: number;
  /** Still not fully available then: the days are the least it can end with. */
  ongoing: boolean;
};

export type CountingRules = { definition: CaseDefinition; sessions: SessionChoice; unit: RateUnit };

export const kindsOf: Record<SessionChoice, readonly CountedKind[]> = {
  "training-and-matches": countedKinds,
  training: ["training"],
  match: ["match"],
};

const isGradual = (injury: InjuryRow) => injury.onset === "gradual";
const isCountedKind = (kind: SessionKind | null): kind is CountedKind =>
  kind !== null && (countedKinds as readonly string[]).includes(kind);
const wasHeld = (state: SessionState | null) => state === "held" || state === "abandoned";

type NumeratorRule = {
  reason: string;
  /** What is left out, in the words of the table. */
  words: string;
  /** The case definitions it belongs to. */
  definitions: readonly CaseDefinition[];
  leavesOut: (injury: InjuryRow, rules: CountingRules) => boolean;
};

const both: readonly CaseDefinition[] = ["time-loss", "medical-attention"];

/**
 * The one table that says which injuries enter which numerator: the first rule that leaves an injury out names the
 * reason; an injury that none leaves out counts once. Index, local, other-site and re-injuries count alike.
 */
export const numeratorRules = [
  {
    reason: "withdrawn",
    words: "Withdrawn: recorded in error",
    definitions: both,
    leavesOut: ({ withdrawn }) => withdrawn,
  },
  {
    reason: "outside_sport",
    words: "Outside organised sport",
    definitions: both,
    leavesOut: ({ outsideSport }) => outsideSport,
  },
  {
    reason: "exacerbation",
    words: "Exacerbation of an injury that had not closed",
    definitions: both,
    leavesOut: ({ subsequence }) => subsequence === "exacerbation",
  },
  {
    reason: "other_kind",
    words: "From a strength or other session, which these rates do not count",
    definitions: both,
    leavesOut: ({ sessionKind }) => sessionKind !== null && !isCountedKind(sessionKind),
  },
  {
    reason: "no_session",
    words: "Sudden or not said how, and no session named",
    definitions: both,
    leavesOut: (injury) => !isGradual(injury) && injury.sessionKind === null,
  },
  {
    reason: "not_held",
    words: "From a session that is not confirmed as held, or is cancelled",
    definitions: both,
    leavesOut: (injury) => !isGradual(injury) && !wasHeld(injury.sessionState),
  },
  {
    reason: "session_without_exposure",
    words: "From a session whose exposure is not recorded",
    definitions: both,
    leavesOut: (injury) => !isGradual(injury) && !injury.sessionAes && !injury.sessionHours,
  },
  {
    reason: "session_without_aes",
    words: "From a match with estimated hours, which gives no athlete-exposures",
    definitions: both,
    leavesOut: (injury, { unit }) => !isGradual(injury) && unit === "aes" && !injury.sessionAes,
  },
  {
    reason: "week_without_exposure",
    words: "Gradual, in a week in which the team has no exposure of this unit",
    definitions: both,
    leavesOut: (injury, { unit }) =>
      isGradual(injury) && !(unit === "aes" ? injury.weekAes : injury.weekHours),
  },
  {
    reason: "no_one_kind",
    words: "Gradual and tied to no session, so of neither training nor matches alone",
    definitions: both,
    leavesOut: ({ sessionKind }, { sessions }) => sessionKind === null && sessions !== "training-and-matches",
  },
  {
    reason: "no_time_loss",
    words: "No time loss: full part again the next day, or nothing entered on availability",
    definitions: ["time-loss"],
    leavesOut: ({ daysLost }) => daysLost < 1,
  },
] as const satisfies readonly NumeratorRule[];

export type LeftOutReason = (typeof numeratorRules)[number]["reason"];

/** Why an injury is left out of the numerator; null when it counts. */
export function reasonLeftOut(injury: InjuryRow, rules: CountingRules): LeftOutReason | null {
  const rule = numeratorRules.find(
    ({ definitions, leavesOut }: NumeratorRule) =>
      definitions.includes(rules.definition) && leavesOut(injury, rules),
  );
  return rule?.reason ?? null;
}

/** Whether an injury belongs to the sessions looked at: one of a training does when only matches are not asked for. */
export function isInView({ sessionKind }: InjuryRow, { sessions }: CountingRules) {
  const kinds: readonly string[] = kindsOf[sessions];
  return !isCountedKind(sessionKind) || kinds.includes(sessionKind);
}

export type CountedInjuries = {
  counted: InjuryRow[];
  leftOut: { reason: LeftOutReason; words: string; count: number }[];
};

/** Splits injuries into those that count and, by reason, those that are left out. */
export function countInjuries(injuries: readonly InjuryRow[], rules: CountingRules): CountedInjuries {
  const counted: InjuryRow[] = [];
  const tally = new Map<LeftOutReason, number>();
  for (const injury of injuries) {
    if (!isInView(injury, rules)) continue;
    const reason = reasonLeftOut(injury, rules);
    if (reason === null) counted.push(injury);
    else tally.set(reason, (tally.get(reason) ?? 0) + 1);
  }
  const leftOut = numeratorRules.flatMap(({ reason, words }) => {
    const count = tally.get(reason);
    return count ? [{ reason, words, count }] : [];
  });
  return { counted, leftOut };
}

/** The label of the age band of an age; null for an unknown age, and for one that no band of the organisation holds. */
export function bandOf(age: number | null, bands: readonly (AgeBand & { label: string })[]) {
  if (age === null || age < 0) return null;
  const holds = bands.some(({ from, to }) => age >= from && (to === null || age <= to));
  return holds ? ageBand(age, bands).label : null;
}

export type GradedExposure = Record<CountedGrade, number>;
export type ExposureByUnit = Record<RateUnit, GradedExposure>;

export const noExposure = (): ExposureByUnit => ({
  aes: { recorded: 0, headcount: 0, estimated: 0 },
  hours: { recorded: 0, headcount: 0, estimated: 0 },
});

/** Adds cells up, keeping units and grades apart. */
export function sumExposure(cells: readonly ExposureCell[]): ExposureByUnit {
  const sum = noExposure();
  for (const { grade, aes, hours } of cells) {
    sum.aes[grade] += aes;
    sum.hours[grade] += hours;
  }
  return sum;
}

/** The denominator: AEs of recorded sessions and headcounts, or hours of every grade; never mixed. */
export const denominator = (exposure: ExposureByUnit, unit: RateUnit) =>
  exposure[unit].recorded + exposure[unit].headcount + (unit === "hours" ? exposure.hours.estimated : 0);
