import { addDays, ageOnDay, momentAfter } from "./days.ts";
import {
  ACL_PATTERN,
  GRADUAL_PATTERNS,
  type InjuryPattern,
  isPreventable,
  type SportGroup,
  SUDDEN_PATTERNS,
} from "./injury-patterns.ts";
import type { Random } from "./random.ts";
import { ACL_FACTS, ageBandOf, baselineRates, patternWeight, WARM_UP_RATE_RATIO } from "./true-rates.ts";
import type {
  Athlete,
  Availability,
  Contact,
  Day,
  Diagnosis,
  Injury,
  Restriction,
  SessionKind,
  Sign,
  Sport,
} from "./types.ts";

export type Drawn = { pattern: InjuryPattern; contact: Contact };

export function sportGroupOf(sport: Sport): SportGroup {
  return sport === "soccer" ? "soccer" : "court";
}

/**
 * Draws at most one injury for one athlete-exposure. Injuries come at the baseline rates; one that the warm-up is
 * meant to prevent is then kept with the probability of the true rate ratio, which gives exactly that ratio.
 */
export function drawInjury(
  random: Random,
  athlete: Athlete,
  exposure: { day: Day; kind: SessionKind; sport: Sport; warmedUp: boolean },
): Drawn | null {
  const age = ageOnDay(athlete.dateOfBirth, exposure.day);
  const base = baselineRates({ sex: athlete.sex, band: ageBandOf(age), kind: exposure.kind });
  const point = random.next() * 1000;
  if (point >= base.acl + base.sudden + base.gradual) return null;
  const group = sportGroupOf(exposure.sport);
  const pattern =
    point < base.acl
      ? ACL_PATTERN
      : pickPattern(
          random,
          point < base.acl + base.sudden ? SUDDEN_PATTERNS : GRADUAL_PATTERNS,
          athlete,
          group,
          age,
        );
  const contact = random.weighted(pattern.contacts);
  const isPrevented =
    exposure.warmedUp && isPreventable(pattern, contact) && !random.chance(WARM_UP_RATE_RATIO);
  return isPrevented ? null : { pattern, contact };
}

export function pickPattern(
  random: Random,
  patterns: readonly InjuryPattern[],
  athlete: Athlete,
  group: SportGroup,
  age: number,
): InjuryPattern {
  const possible = patterns.filter((each) => each.below === undefined || age < each.below);
  return random.weighted(possible.map((each) => [each, patternWeight(each, athlete.sex, group)] as const));
}

export type Circumstances = {
  athlete: Athlete;
  day: Day;
  start: string;
  /** Minutes from the start at which it happened. */
  minute: number;
  session: { key: string; isMatch: boolean; surface: Injury["surface"]; warmedUp: Injury["warmedUp"] } | null;
  /** Earlier injuries of the athlete, to which a weak side may return. */
  before: readonly Injury[];
  loggedBy: string;
};

/** The whole course of an injury, to be cut at today by `asInjuryKnownOn`. */
export function makeInjury(
  random: Random,
  drawn: Drawn,
  at: Circumstances,
): { injury: Injury; contributions: Availability[] } {
  const { pattern, contact } = drawn;
  const { athlete, day } = at;
  const days = drawTimeLoss(random, pattern);
  const isGradual = pattern.onset === "gradual";
  const isConcussion = pattern.key === "concussion";
  const stops = isConcussion || pattern === ACL_PATTERN ? 1 : days === 0 ? 0.25 : days <= 7 ? 0.65 : 0.9;
  const couldContinue = isGradual || !random.chance(stops);
  const fullOn = addDays(day, days + (days > 0 || !couldContinue ? 1 : 0));
  const isOutside = at.session === null && !isGradual;
  const direct = contact.startsWith("direct");
  const moves = direct
    ? (pattern.movements.contact ?? pattern.movements.free)
    : (pattern.movements.free ?? pattern.movements.contact);
  const key = `${athlete.key}/${day}/${pattern.key}`;
  const injury: Injury = {
    organisation: athlete.organisation,
    key,
    athlete: athlete.key,
    at: momentAfter(day, at.start, at.minute),
    session: isGradual ? null : (at.session?.key ?? null),
    outsideOrganisedSport: isOutside,
    area: pattern.area,
    side: drawSide(random, pattern, at.before),
    // A strained muscle now and then gives way after weeks of load.
    onset: pattern.pathology === "muscle_injury" && random.chance(0.12) ? "sudden_repetitive" : pattern.onset,
    contact,
    movement: moves ? random.weighted(moves) : "unknown",
    minuteOfPlay: at.session?.isMatch && !isGradual ? Math.max(1, at.minute) : null,
    surface: isGradual ? null : (at.session?.surface ?? null),
    warmedUp: isGradual ? "unknown" : (at.session?.warmedUp ?? "no"),
    suspectedConcussion: isConcussion,
    couldContinue,
    signs: drawSigns(random, pattern, couldContinue),
    diagnoses: drawDiagnoses(random, pattern, days),
    surgeryOn:
      pattern === ACL_PATTERN && random.chance(ACL_FACTS.surgery)
        ? addDays(day, random.int(...ACL_FACTS.surgeryDays))
        : null,
    fullOn,
    closedOn: addDays(fullOn, random.int(0, 3)),
    followUps: drawFollowUps(random, day, fullOn, at.loggedBy),
    loggedBy: at.loggedBy,
  };
  return { injury, contributions: drawCourse(random, injury, pattern, days) };
}

function drawTimeLoss(random: Random, pattern: InjuryPattern): number {
  if (random.chance(pattern.noTimeLoss)) return 0;
  const days = Math.max(1, Math.round(pattern.medianDays * Math.exp(pattern.spread * random.normal())));
  // A stepwise return after concussion takes a week at least; after a cruciate ligament tear nine months.
  if (pattern.key === "concussion") return Math.max(7, days);
  return pattern === ACL_PATTERN ? Math.min(430, Math.max(275, days)) : days;
}

/** The side of an earlier injury of the same area is the weak one, three times in four; the other knee after an ACL tear half the time. */
function drawSide(random: Random, pattern: InjuryPattern, before: readonly Injury[]): Injury["side"] {
  const either = random.pick(["left", "right"] as const);
  const again = random.chance(0.75);
  if (!pattern.sided) return "none";
  const earlier = before.findLast((each) => each.area === pattern.area);
  return earlier && again && pattern !== ACL_PATTERN ? earlier.side : either;
}

function drawSigns(random: Random, pattern: InjuryPattern, couldContinue: boolean): Sign[] {
  const signs = pattern.signs.filter(([, probability]) => random.chance(probability)).map(([sign]) => sign);
  return couldContinue ? signs.filter((sign) => sign === "swelling") : signs;
}

function drawDiagnoses(random: Random, pattern: InjuryPattern, days: number): Diagnosis[] {
  const imaged =
    pattern === ACL_PATTERN || pattern.pathology === "fracture" || pattern.pathology === "stress";
  const certainty =
    imaged || (days > 28 && random.chance(0.7)) ? "imaging" : random.chance(0.9) ? "clinical" : "suspected";
  const { tissue, pathology, words } = pattern;
  const diagnoses: Diagnosis[] = [{ tissue, pathology, words, certainty, principal: true }];
  if (pattern === ACL_PATTERN && random.chance(ACL_FACTS.withMeniscus)) {
    diagnoses.push({
      tissue: "cartilage_synovium",
      pathology: "cartilage",
      words: "Meniscus tear",
      certainty: "imaging",
      principal: false,
    });
  }
  return diagnoses;
}

const NOTES = [
  "Less pain; swelling going down.",
  "Full motion, strength still behind the other side.",
  "Exercises done at home; next step agreed.",
  "Trained on the side without symptoms.",
  "Sore the morning after; load kept as it is.",
  "Phoned the family; all going to plan.",
];

/** About one injury in eight is left untouched after the first look, which the athletic trainer is then asked about. */
function drawFollowUps(random: Random, day: Day, fullOn: Day, by: string): Injury["followUps"] {
  const followUps: Injury["followUps"] = [];
  const isForgotten = random.chance(0.12);
  for (let on = addDays(day, 2); on < fullOn; on = addDays(on, random.int(6, 11))) {
    followUps.push({ on, by, note: random.pick(NOTES) });
    if (isForgotten) break;
  }
  return followUps;
}

type Step = { until: number; state: Availability["state"]; restrictions: readonly Restriction[] };

/** Dated contributions from the onset (or the day after, if play went on) to the day before full availability. */
function drawCourse(random: Random, injury: Injury, pattern: InjuryPattern, days: number): Availability[] {
  const day = injury.at.slice(0, 10);
  const minutesLimit = random.pick([20, 30, 40]);
  const steps = pattern === ACL_PATTERN ? aclSteps(days) : plainSteps(pattern, days);
  const contributions: Availability[] = [];
  let next = injury.couldContinue ? 1 : 0;
  for (const { until, state, restrictions } of steps) {
    if (until < next) continue;
    contributions.push({
      organisation: injury.organisation,
      athlete: injury.athlete,
      reason: "injury",
      injury: injury.key,
      from: addDays(day, next),
      to: addDays(day, until),
      state,
      restrictions: [...restrictions],
      minutesLimit: restrictions.includes("minutes_limit") ? minutesLimit : null,
    });
    next = until + 1;
  }
  return contributions;
}

function plainSteps(pattern: InjuryPattern, days: number): Step[] {
  const out = days <= 2 ? days : Math.ceil(days * (pattern.onset === "gradual" ? 0.3 : 0.6));
  const plain = pattern.restrictions.filter((each) => each !== "minutes_limit");
  const steps: Step[] = [{ until: out, state: "unavailable", restrictions: [] }];
  if (days - out >= 5) {
    const early = out + Math.floor((days - out) / 2);
    steps.push({ until: early, state: "modified", restrictions: [...plain, "minutes_limit"] });
  }
  steps.push({ until: days, state: "modified", restrictions: plain });
  return steps;
}

function aclSteps(days: number): Step[] {
  return [
    { until: 13, state: "unavailable", restrictions: ["non_weight_bearing"] },
    { until: Math.round(days * 0.42), state: "unavailable", restrictions: [] },
    {
      until: Math.round(days * 0.65),
      state: "modified",
      restrictions: ["straight_running_only", "no_contact", "minutes_limit"],
    },
    {
      until: Math.round(days * 0.85),
      state: "modified",
      restrictions: ["no_contact", "no_cutting", "minutes_limit"],
    },
    { until: days, state: "modified", restrictions: ["no_contact"] },
  ];
}

/** What is known of an injury at the end of a day. */
export function asInjuryKnownOn(injury: Injury, today: Day): Injury {
  const upTo = (day: Day | null) => (day !== null && day <= today ? day : null);
  return {
    ...injury,
    fullOn: upTo(injury.fullOn),
    closedOn: upTo(injury.closedOn),
    surgeryOn: upTo(injury.surgeryOn),
    followUps: injury.followUps.filter((each) => each.on <= today),
  };
}
