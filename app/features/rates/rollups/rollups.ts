import type { SessionKind, Sex } from "~db/schema/codes";
import { type CountedKind, type CountingRules, countedKinds, kindsOf, type LeftOutReason } from "../counting";

/**
 * Injuries that were counted beforehand, and how the numerator rules read them. Pure. What is said here must leave in
 * and out what `countInjuries` does with the injuries one by one; a test compares the two over every question.
 */

/** Injuries of one day that are alike in whatever decides whether they count. */
export type RolledInjuries = {
  /** The session's team; without a session the athlete's team on the day of onset; null when there was none. */
  teamId: string | null;
  /** ISO date on which they are counted. */
  day: string;
  /** The session's kind; null without a session. */
  kind: SessionKind | null;
  sex: Sex;
  /** Completed years on the day of onset; null without a date of birth. */
  age: number | null;
  gradual: boolean;
  /** The first reason that leaves them out whatever is asked. */
  leftOut: LeftOutReason | null;
  /** Whether there is exposure of that unit: of the session, for gradual ones of the team's week. */
  aes: boolean;
  hours: boolean;
  /** Whether there is a day of time loss up to today. */
  timeLoss: boolean;
  injuries: number;
};

/** Why rolled-up injuries are left out of a numerator; null when they count. The order is that of `numeratorRules`. */
export function reasonRolledOut(
  { leftOut, gradual, kind, timeLoss, ...exposed }: RolledInjuries,
  { definition, unit, sessions }: CountingRules,
): LeftOutReason | null {
  if (leftOut !== null) return leftOut;
  if (!exposed[unit]) return gradual ? "week_without_exposure" : "session_without_aes";
  if (kind === null && sessions !== "training-and-matches") return "no_one_kind";
  return definition === "time-loss" && !timeLoss ? "no_time_loss" : null;
}

const isCountedKind = (kind: SessionKind | null): kind is CountedKind =>
  kind !== null && (countedKinds as readonly string[]).includes(kind);

/** Splits rolled-up injuries into those that count and, by reason, the number of those that are left out. */
export function countRolled(rows: readonly RolledInjuries[], rules: CountingRules) {
  const counted: RolledInjuries[] = [];
  const leftOut = new Map<LeftOutReason, number>();
  for (const row of rows) {
    if (isCountedKind(row.kind) && !kindsOf[rules.sessions].includes(row.kind)) continue;
    const reason = reasonRolledOut(row, rules);
    if (reason === null) counted.push(row);
    else leftOut.set(reason, (leftOut.get(reason) ?? 0) + row.injuries);
  }
  return { counted, leftOut };
}
