import {
  type BodyArea,
  type Contact,
  firstCare as firstCareCodes,
  type Movement,
  type Onset,
  type SessionKind,
  type Side,
  type Sign,
} from "~db/schema/codes";
import { hasEmergencySign, type Seen, suspectsConcussion, suspectsSeriousKnee } from "../injuries/cautions";
import type { PlainWords } from "./notice-content";

/**
 * A first draft of a notice in words that an eleven-year-old can read, from the codes of the injury; the athletic
 * trainer rewrites it. It says what was seen, names no diagnosis and promises nothing. The warnings are those of the
 * cautions (concussion, serious knee, emergency signs); the ones for chest, tummy and back are common first-aid advice,
 * from memory.
 */
export type NoticeFacts = Seen & {
  givenName: string;
  bodyArea: BodyArea;
  side: Side;
  onset: Onset | null;
  contact: Contact | null;
  movement: Movement | null;
  /** Codes of first care and of referrals, as stored. */
  firstCare: readonly string[];
  referredTo: readonly string[];
};

/** Body areas as people say them at home; nothing where the record names no one place. */
const everydayAreas: Record<BodyArea, { one: string; both: string } | null> = {
  head: { one: "head", both: "head" },
  neck: { one: "neck", both: "neck" },
  shoulder: { one: "shoulder", both: "shoulders" },
  upper_arm: { one: "upper arm", both: "upper arms" },
  elbow: { one: "elbow", both: "elbows" },
  forearm: { one: "lower arm", both: "lower arms" },
  wrist: { one: "wrist", both: "wrists" },
  hand: { one: "hand", both: "hands" },
  chest: { one: "chest", both: "chest" },
  thoracic_spine: { one: "upper back", both: "upper back" },
  lumbosacral: { one: "lower back", both: "lower back" },
  abdomen: { one: "tummy", both: "tummy" },
  hip_groin: { one: "hip", both: "hips" },
  thigh: { one: "thigh", both: "thighs" },
  knee: { one: "knee", both: "knees" },
  lower_leg: { one: "lower leg", both: "lower legs" },
  ankle: { one: "ankle", both: "ankles" },
  foot: { one: "foot", both: "feet" },
  unspecified: null,
  multiple: null,
};

/** "the left knee", "both ankles", "the head"; null where the record names no one place. */
export function sayArea(area: BodyArea, side: Side): string | null {
  const words = everydayAreas[area];
  if (!words) return null;
  if (side === "both" && words.both !== words.one) return `both ${words.both}`;
  if (side === "left" || side === "right") return `the ${side} ${words.one}`;
  return `the ${words.one}`;
}

const whileMoving: Partial<Record<Movement, string>> = {
  cutting: "while turning fast",
  pivoting: "while turning on one foot",
  landing: "when landing from a jump",
  take_off: "when jumping up",
  decelerating: "while slowing down",
  accelerating: "while running fast",
  kicking: "while kicking",
  tackling: "in a tackle",
  being_tackled: "in a tackle by another player",
  falling: "in a fall",
  collision: "in a crash with someone or something",
  throwing: "while throwing",
};

const byContact: Partial<Record<Contact, string>> = {
  non_contact: "No one else was part of it.",
  direct_athlete: "Another player was part of it.",
  direct_object: "A ball or some other thing hit the sore place.",
};

const sawSign = (name: string): Record<Sign, string> => ({
  pop: `${name} heard or felt a pop.`,
  swelling: "It is swollen.",
  cannot_bear_weight: `${name} could not take four steps on it.`,
  giving_way: "It gave way.",
  locked: "It is stuck and does not bend as it should.",
  deformity: "It does not have its right shape.",
  numb: "It feels numb.",
  cold_pale_foot: "The foot was cold or pale.",
  open_wound: "There is an open cut over a joint.",
  loss_of_consciousness: `${name} passed out.`,
  seizure: `${name} had a fit.`,
  worsening_headache: "A headache got worse.",
  repeated_vomiting: `${name} was sick more than once.`,
  drowsiness: `${name} was very sleepy.`,
  double_vision: `${name} saw double.`,
  limb_weakness: "An arm or a leg felt weak.",
  agitation: `${name} was restless or upset.`,
  neck_pain: "The neck hurt.",
});

function sayWhatHappened(facts: NoticeFacts): string {
  const { givenName: name, onset, movement, contact } = facts;
  const area = sayArea(facts.bodyArea, facts.side);
  const place = area ?? (facts.bodyArea === "multiple" ? "more than one part of the body" : "themself");
  const moving = movement ? whileMoving[movement] : undefined;
  const begin =
    onset === "gradual"
      ? `${name} has pain${area ? ` in ${area}` : ""}. It came on bit by bit.`
      : `${name} hurt ${place}${moving ? ` ${moving}` : ""}.`;
  const said = sawSign(name);
  return [
    begin,
    contact && onset !== "gradual" ? byContact[contact] : undefined,
    ...facts.signs.map((sign) => said[sign]),
    suspectsConcussion(facts)
      ? `${name} may have a concussion. That means that a knock may have hurt the brain. We can not see on the spot how bad it is.`
      : undefined,
    facts.couldContinue === false ? `${name} had to stop.` : undefined,
    facts.couldContinue === true && !suspectsConcussion(facts) ? `${name} was able to go on.` : undefined,
  ]
    .filter(Boolean)
    .join(" ");
}

function sayWhatWasDone({ givenName: name, firstCare }: NoticeFacts): string {
  const said: Record<(typeof firstCareCodes)[number], string> = {
    stopped_play: `${name} stopped playing.`,
    ice: "We cooled it.",
    compression: "We put a firm wrap on it.",
    immobilised: "We kept it still.",
    crutches: `We gave ${name} crutches.`,
  };
  return firstCareCodes
    .filter((care) => firstCare.includes(care))
    .map((care) => said[care])
    .join(" ");
}

const sameDay: readonly Sign[] = ["cannot_bear_weight", "locked"];

function sayWhatToDo(facts: NoticeFacts): string {
  const { givenName: name, referredTo, signs } = facts;
  const lines: string[] = [];
  if (referredTo.includes("emergency_department"))
    lines.push(`${name} needs to go to the emergency department now.`);
  else if (hasEmergencySign(facts))
    lines.push(`${name} needs help from the emergency services now. Please call us at once.`);
  if (suspectsConcussion(facts))
    lines.push(
      `No more sport today. Stay with ${name}. Do not leave ${name} alone.`,
      `${name} goes back to school first and to sport last, step by step. We will tell you the steps. A doctor must say yes in writing before any contact in sport.`,
    );
  if (suspectsSeriousKnee(facts))
    lines.push(
      `Do not let ${name} put weight on the leg. Keep the knee safe, wrap it and cool it.`,
      signs.some((sign) => sameDay.includes(sign))
        ? `A doctor should see ${name} today.`
        : `A doctor should see ${name} as soon as you can.`,
    );
  else if (signs.includes("cannot_bear_weight"))
    lines.push(`Do not let ${name} put weight on the leg. A doctor should see ${name} today.`);
  else if (referredTo.includes("physician")) lines.push(`Please take ${name} to a doctor.`);
  if (referredTo.includes("orthopaedics"))
    lines.push(`Please take ${name} to a doctor for bones and joints.`);
  if (referredTo.includes("physiotherapy")) lines.push(`Please take ${name} to a physio.`);
  if (lines.length === 0) lines.push("Let it rest today. No sport until we have looked at it again.");
  return lines.join("\n");
}

const limbs: readonly BodyArea[] = [
  "shoulder",
  "upper_arm",
  "elbow",
  "forearm",
  "wrist",
  "hand",
  "hip_groin",
  "thigh",
  "knee",
  "lower_leg",
  "ankle",
  "foot",
];

const headOrNeck = (facts: NoticeFacts) =>
  suspectsConcussion(facts) || facts.bodyArea === "head" || facts.bodyArea === "neck";

function sayWhatToWatch(facts: NoticeFacts): string {
  const { givenName: name } = facts;
  if (headOrNeck(facts))
    return `Look in on ${name} often, and in the night too. Call us or a doctor if ${name} has a headache, feels dizzy or is not the same as usual.`;
  return `Call us or a doctor if the pain or the swelling gets worse, or if ${name} can not use it as usual by tomorrow.`;
}

function sayWhenToCallForHelp(facts: NoticeFacts): string {
  const { givenName: name } = facts;
  const items: string[] = [];
  if (headOrNeck(facts))
    items.push(
      "passes out",
      "has a fit",
      "has a headache that gets worse",
      "is sick again and again",
      "is very sleepy, or hard to wake",
      "sees double",
      "has a weak arm or leg",
      "is restless, or not able to think",
      "has pain in the neck",
    );
  if (limbs.includes(facts.bodyArea) || facts.bodyArea === "multiple" || facts.bodyArea === "unspecified")
    items.push(
      "has an arm or leg that looks out of shape",
      "has a hand or foot that is cold, pale or numb",
      "has an open cut over a joint",
    );
  if (items.length === 0) items.push("finds it hard to breathe", "passes out", "has very bad pain");
  const last = limbs.includes(facts.bodyArea) ? "\nDo not move or splint the arm or leg. Wait for help." : "";
  return `Call the emergency services at once if ${name}:\n${items.map((item) => `- ${item}`).join("\n")}${last}`;
}

/** The draft; `done` is empty where no first care is on record, since nobody may claim what nobody wrote down. */
export function draftPlainWords(facts: NoticeFacts): PlainWords {
  return {
    happened: sayWhatHappened(facts),
    done: sayWhatWasDone(facts),
    doNow: sayWhatToDo(facts),
    watchFor: sayWhatToWatch(facts),
    emergency: sayWhenToCallForHelp(facts),
  };
}

/** Where it happened, for a family: "At U16 Girls training, Harbour Field". */
export function sayWhere(place: {
  outsideSport: boolean;
  kind: SessionKind | null;
  team: string | null;
  venue: string | null;
}): string | null {
  if (place.outsideSport) return "Not at our training or a match";
  if (!place.kind) return place.venue;
  const activity: Record<SessionKind, string> = {
    training: "training",
    match: "match",
    strength: "strength training",
    other: "team time",
  };
  const what = [place.team, activity[place.kind]].filter(Boolean).join(" ");
  return [`At ${place.kind === "match" ? "the " : ""}${what}`, place.venue].filter(Boolean).join(", ");
}
