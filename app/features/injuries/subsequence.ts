import { addMonths } from "~/platform/clock";
import type { BodyArea, Side, subsequences } from "~db/schema/codes";

export type Subsequence = (typeof subsequences)[number];
/** When a recurrent injury came, from the return to full availability: within 2 months, 2 to 12, over 12. */
export type RecurrenceTiming = "early" | "late" | "delayed";

/** What is compared: the place, and the type when it is known. */
export type Kind = { bodyArea: BodyArea; side: Side; pathology: string | null; acl: boolean };

export type EarlierInjury = Kind & {
  /** An injury in Haleside; null for one from before. */
  id: string | null;
  /** ISO day of the onset; null when only a year is known. */
  onsetDay: string | null;
  /** The first day of full availability again; null while open, or unknown for one from before. */
  returnDay: string | null;
  /** Year of an injury from before Haleside. */
  year: number | null;
};

export type SubsequenceSuggestion = {
  /** Null: the answer waits for what is missing. */
  subsequence: Subsequence | null;
  /** The earlier injury that decides, when it stands in Haleside. */
  to: string | null;
  timing: RecurrenceTiming | null;
  waitsFor: "pathology" | "side" | null;
  /** The opposite knee had an anterior cruciate ligament injury. */
  contralateralAcl: boolean;
};

/** Sides that name the same part of the body. "unknown" names nothing. */
function sameSide(a: Side, b: Side) {
  if (a === "unknown" || b === "unknown") return false;
  return a === b || (a === "both" && b !== "none") || (b === "both" && a !== "none");
}

const opposite: Partial<Record<Side, Side>> = { left: "right", right: "left" };

/** Early within 2 months of the return, late within 12, delayed after that (Bahr et al., BJSM 2020;54:372). */
export function recurrenceTiming(returnDay: string, onsetDay: string): RecurrenceTiming {
  if (onsetDay <= addMonths(returnDay, 2)) return "early";
  return onsetDay <= addMonths(returnDay, 12) ? "late" : "delayed";
}

/** With a year alone only a long gap is sure: the whole of the year between lies over 12 months back. */
function timingOf(earlier: EarlierInjury, onsetDay: string): RecurrenceTiming | null {
  if (earlier.returnDay !== null) return recurrenceTiming(earlier.returnDay, onsetDay);
  if (earlier.year !== null && Number(onsetDay.slice(0, 4)) - earlier.year >= 2) return "delayed";
  return null;
}

const wasOpen = (earlier: EarlierInjury, onsetDay: string) =>
  earlier.id !== null && (earlier.returnDay === null || earlier.returnDay > onsetDay);

const newestFirst = (a: EarlierInjury, b: EarlierInjury) => {
  const at = ({ onsetDay, year }: EarlierInjury) => onsetDay ?? (year === null ? "" : String(year));
  return at(a) < at(b) ? 1 : -1;
};

/**
 * What a new injury is to the earlier ones of the same athlete; a clinical role confirms it. Same area, side and type:
 * recurrent, or an exacerbation when the earlier one had not closed; same area and side, other type: local; else at
 * another site; without any earlier one: the first.
 * @param onsetDay ISO day of the new injury; pass only injuries from before it
 */
export function suggestSubsequence(
  injury: Kind & { onsetDay: string },
  earlier: readonly EarlierInjury[],
): SubsequenceSuggestion {
  const otherKnee = injury.bodyArea === "knee" ? opposite[injury.side] : undefined;
  const contralateralAcl =
    otherKnee !== undefined &&
    earlier.some(
      ({ bodyArea, side, acl }) => acl && bodyArea === "knee" && (side === otherKnee || side === "both"),
    );
  const answer = (
    subsequence: Subsequence | null,
    match?: EarlierInjury,
    rest: Partial<SubsequenceSuggestion> = {},
  ): SubsequenceSuggestion => ({
    subsequence,
    to: match?.id ?? null,
    timing: null,
    waitsFor: null,
    contralateralAcl,
    ...rest,
  });
  if (earlier.length === 0) return answer("index");

  const sameArea = earlier.filter(({ bodyArea }) => bodyArea === injury.bodyArea).sort(newestFirst);
  const sameSite = sameArea.filter(({ side }) => sameSide(side, injury.side));
  const sameKind = sameSite.filter(
    ({ pathology }) => pathology !== null && injury.pathology !== null && pathology === injury.pathology,
  );
  const open = sameKind.find((row) => wasOpen(row, injury.onsetDay));
  if (open) return answer("exacerbation", open);
  const [recurrent] = sameKind;
  if (recurrent) return answer("recurrent", recurrent, { timing: timingOf(recurrent, injury.onsetDay) });
  if (sameSite.some(({ pathology }) => pathology === null || injury.pathology === null))
    return answer(null, undefined, { waitsFor: "pathology" });
  if (sameArea.some(({ side }) => side === "unknown" || injury.side === "unknown"))
    return answer(null, undefined, { waitsFor: "side" });
  const [local] = sameSite;
  if (local) return answer("local", local);
  const [newest] = [...earlier].sort(newestFirst);
  return answer("other_site", newest?.id === null ? undefined : newest);
}

export const timingWords: Record<RecurrenceTiming, string> = {
  early: "early: within 2 months of return",
  late: "late: 2 to 12 months after return",
  delayed: "delayed: over 12 months after return",
};
