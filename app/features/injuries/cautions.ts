import type { BodyArea, Sign } from "~db/schema/codes";

/** What the person at the touchline has seen; enough for the cautions and the safe default. */
export type Seen = {
  bodyArea: BodyArea | null;
  signs: readonly Sign[];
  suspectedConcussion: boolean;
  /** Null while not answered. */
  couldContinue: boolean | null;
};

export type CautionKind = "emergency_head" | "emergency_limb" | "concussion" | "knee" | "knee_today";

export type Caution = {
  kind: CautionKind;
  title: string;
  /** One or two plain sentences: what to do now. */
  text: string;
  /** The emergency services are to be called. */
  emergency: boolean;
};

/** Signs after a blow for which the emergency services are called (product.md, Cautions). */
const headEmergencySigns: readonly Sign[] = [
  "loss_of_consciousness",
  "seizure",
  "worsening_headache",
  "repeated_vomiting",
  "drowsiness",
  "double_vision",
  "limb_weakness",
  "agitation",
  "neck_pain",
];
/** Signs of a limb in danger, for which the emergency services are called. */
const limbEmergencySigns: readonly Sign[] = ["deformity", "numb", "cold_pale_foot", "open_wound"];
/** Signs that make a knee injury a suspected serious one. */
const kneeSigns: readonly Sign[] = ["pop", "swelling", "cannot_bear_weight", "giving_way", "locked"];
/** Of these, the ones that want a physician on the same day. */
const sameDayKneeSigns: readonly Sign[] = ["cannot_bear_weight", "locked"];

export const signGroups = {
  joint: kneeSigns,
  limb: limbEmergencySigns,
  head: headEmergencySigns,
} as const;

const has = (seen: Seen, signs: readonly Sign[]) => seen.signs.some((sign) => signs.includes(sign));

export const suspectsConcussion = (seen: Seen) => seen.suspectedConcussion || has(seen, headEmergencySigns);
export const hasEmergencySign = (seen: Seen) =>
  has(seen, headEmergencySigns) || has(seen, limbEmergencySigns);
export const suspectsSeriousKnee = (seen: Seen) => seen.bodyArea === "knee" && has(seen, kneeSigns);

const stayWithHelp = "until help is there.";

const emergencyHead: Caution = {
  kind: "emergency_head",
  title: "Call the emergency services now",
  text: `These signs can mean a serious injury of the head or neck. Keep the athlete still and stay with them ${stayWithHelp}`,
  emergency: true,
};
const emergencyLimb: Caution = {
  kind: "emergency_limb",
  title: "Call the emergency services now",
  text: `Leave the limb as it lies: do not move or splint it yourself. Stay with the athlete ${stayWithHelp}`,
  emergency: true,
};
const concussion: Caution = {
  kind: "concussion",
  title: "Treat as a concussion",
  text: "Out for today, without exception, and never left alone. Call the emergency services if they pass out, have a seizure, vomit again and again, see double, become drowsy or agitated, have a weak limb or neck pain, or the headache grows worse.",
  emergency: false,
};
const knee = (kind: "knee" | "knee_today"): Caution => ({
  kind,
  title: "Treat as a serious knee injury",
  text: `Out for today. No weight on the leg; protect, compress and cool it. A physician should see them ${
    kind === "knee_today" ? "today" : "as soon as possible"
  }.`,
  emergency: false,
});

const allCautions = [emergencyHead, emergencyLimb, concussion, knee("knee_today"), knee("knee")];

/** The cautions of these kinds, the most pressing first; unknown kinds are left out. */
export const cautionsOfKinds = (kinds: readonly string[]): Caution[] =>
  allCautions.filter(({ kind }) => kinds.includes(kind));

/**
 * The cautions for what was seen, the most pressing first. They support whoever is there; they diagnose nothing.
 * Local law, the organisation's policy and the treating clinician come first.
 */
export function cautionsFor(seen: Seen): Caution[] {
  const kinds: CautionKind[] = [];
  if (has(seen, headEmergencySigns)) kinds.push("emergency_head");
  if (has(seen, limbEmergencySigns)) kinds.push("emergency_limb");
  if (suspectsConcussion(seen)) kinds.push("concussion");
  if (suspectsSeriousKnee(seen)) kinds.push(has(seen, sameDayKneeSigns) ? "knee_today" : "knee");
  return cautionsOfKinds(kinds);
}

export type SafeDefaultReason = "concussion" | "emergency" | "serious_knee" | "could_not_continue";

/**
 * The safe default: the reasons for which the athlete is unavailable at once, from the onset day on, until a clinical
 * role lifts it. Empty: nothing is set.
 */
export function safeDefaultReasons(seen: Seen): SafeDefaultReason[] {
  const reasons: SafeDefaultReason[] = [];
  if (suspectsConcussion(seen)) reasons.push("concussion");
  if (hasEmergencySign(seen)) reasons.push("emergency");
  if (suspectsSeriousKnee(seen)) reasons.push("serious_knee");
  if (seen.couldContinue === false) reasons.push("could_not_continue");
  return reasons;
}

export const safeDefaultWords: Record<SafeDefaultReason, string> = {
  concussion: "a concussion is suspected",
  emergency: "there is an emergency sign",
  serious_knee: "a serious knee injury is suspected",
  could_not_continue: "they could not continue",
};

/** Urgent: the guardian is phoned before the child leaves, and the notice only confirms. */
export function suggestUrgency(seen: Seen): "routine" | "urgent" {
  return cautionsFor(seen).length > 0 ? "urgent" : "routine";
}
