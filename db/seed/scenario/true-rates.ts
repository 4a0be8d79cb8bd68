import {
  ACL_PATTERN,
  type InjuryPattern,
  isPreventable,
  type SportGroup,
  SUDDEN_PATTERNS,
} from "./injury-patterns.ts";
import type { BodyArea, SessionKind, Sex } from "./types.ts";

/**
 * The truth the demo is drawn from, so that computed rates and intervals can be held against it. Every figure is
 * invented. They respect the trade's rules of thumb (common practice, no source): girls and women tear the
 * anterior cruciate ligament two to six times as often, most of those tears are non-contact and come between 15
 * and 25 years, up to half with a meniscus or cartilage injury, active people are operated within five months.
 * Injury is rarer in training than in matches. All rates are per 1000 athlete-exposures of sessions before which
 * the athlete did not do the full warm-up, and are higher than published ones so that a club of this size has
 * something to see.
 */
export const AGE_BANDS = [
  { label: "under 10", from: 0, to: 9 },
  { label: "10-12", from: 10, to: 12 },
  { label: "13-14", from: 13, to: 14 },
  { label: "15-16", from: 15, to: 16 },
  { label: "17-18", from: 17, to: 18 },
  { label: "19-25", from: 19, to: 25 },
  { label: "over 25", from: 26, to: 150 },
] as const;
export type AgeBand = (typeof AGE_BANDS)[number]["label"];

type RatedSex = "female" | "male";
/** Per 1000 athlete-exposures: in training, in matches. */
type BandRates = Record<AgeBand, readonly [training: number, match: number]>;

/** Every sudden injury but the anterior cruciate ligament. */
export const SUDDEN_RATES: Record<RatedSex, BandRates> = {
  female: {
    "under 10": [1.3, 4.5],
    "10-12": [2.3, 8],
    "13-14": [3.7, 12.5],
    "15-16": [5.3, 16.5],
    "17-18": [5.6, 18.5],
    "19-25": [5.5, 18.5],
    "over 25": [5.1, 16.5],
  },
  male: {
    "under 10": [1.3, 4.5],
    "10-12": [2.1, 7],
    "13-14": [3.5, 12.5],
    "15-16": [4.9, 16.5],
    "17-18": [5.6, 19.5],
    "19-25": [5.6, 20],
    "over 25": [5.3, 17.5],
  },
};

/** Tears of the anterior cruciate ligament. */
export const ACL_RATES: Record<RatedSex, BandRates> = {
  female: {
    "under 10": [0, 0],
    "10-12": [0.02, 0.1],
    "13-14": [0.08, 0.5],
    "15-16": [0.24, 1.6],
    "17-18": [0.28, 1.8],
    "19-25": [0.26, 1.6],
    "over 25": [0.1, 0.6],
  },
  male: {
    "under 10": [0, 0],
    "10-12": [0.008, 0.04],
    "13-14": [0.025, 0.15],
    "15-16": [0.07, 0.45],
    "17-18": [0.08, 0.5],
    "19-25": [0.09, 0.55],
    "over 25": [0.04, 0.25],
  },
};

/** Injuries of gradual onset, whatever the kind of session. */
export const GRADUAL_RATES: Record<RatedSex, Record<AgeBand, number>> = {
  female: {
    "under 10": 0.3,
    "10-12": 0.8,
    "13-14": 1.2,
    "15-16": 1.2,
    "17-18": 1.0,
    "19-25": 0.9,
    "over 25": 1.0,
  },
  male: {
    "under 10": 0.3,
    "10-12": 0.8,
    "13-14": 1.1,
    "15-16": 1.0,
    "17-18": 0.8,
    "19-25": 0.8,
    "over 25": 0.9,
  },
};

/** Strength and other sessions against training. */
export const KIND_FACTORS: Record<Exclude<SessionKind, "match">, number> = {
  training: 1,
  strength: 0.4,
  other: 0.6,
};

/**
 * A full warm-up multiplies sudden non-contact and indirect-contact knee and ankle injuries by this. Invented;
 * published figures for such programmes lie around it (odds ratio 0.51, 0.37-0.69, for the anterior cruciate
 * ligament: Petushek, PMC6592422; non-contact injuries 0.69, 0.49-0.97, with high adherence: Hilska 2021).
 */
export const WARM_UP_RATE_RATIO = 0.6;

export const ACL_FACTS = {
  /** Share with a meniscus injury besides. */
  withMeniscus: 0.4,
  surgery: 0.75,
  /** Days from injury to surgery, first to last. */
  surgeryDays: [25, 120],
} as const;

/** Age band of completed years. Throws RangeError below 0 or above 150. */
export function ageBandOf(age: number): AgeBand {
  const band = AGE_BANDS.find((each) => age >= each.from && age <= each.to);
  if (!band) throw new RangeError(`ageBandOf: no band for ${age}`);
  return band.label;
}

/** Sex not stated draws from the mean of both; nobody's sex is guessed. */
function ofSex(sex: Sex, rate: (rated: RatedSex) => number): number {
  return sex === "not_stated" ? (rate("female") + rate("male")) / 2 : rate(sex);
}

export type Stratum = { sex: Sex; band: AgeBand; kind: SessionKind };

function ofKind(rates: readonly [number, number], kind: SessionKind): number {
  return kind === "match" ? rates[1] : rates[0] * KIND_FACTORS[kind];
}

/** Baseline rates per 1000 athlete-exposures without a full warm-up. */
export function baselineRates({ sex, band, kind }: Stratum) {
  return {
    sudden: ofSex(sex, (rated) => ofKind(SUDDEN_RATES[rated][band], kind)),
    acl: ofSex(sex, (rated) => ofKind(ACL_RATES[rated][band], kind)),
    gradual: ofSex(sex, (rated) => GRADUAL_RATES[rated][band]),
  };
}

/** Weight of a pattern for a sex and sport group; not stated: the mean. */
export function patternWeight(pattern: InjuryPattern, sex: Sex, group: SportGroup): number {
  const offset = group === "soccer" ? 0 : 2;
  return ofSex(sex, (rated) => pattern.weights[rated === "female" ? offset : offset + 1] ?? 0);
}

/** Share of each body area among sudden injuries other than the anterior cruciate ligament. */
export function shareByArea(sex: Sex, group: SportGroup): Map<BodyArea, number> {
  const total = SUDDEN_PATTERNS.reduce((sum, each) => sum + patternWeight(each, sex, group), 0);
  const shares = new Map<BodyArea, number>();
  for (const pattern of SUDDEN_PATTERNS) {
    const share = patternWeight(pattern, sex, group) / total;
    shares.set(pattern.area, (shares.get(pattern.area) ?? 0) + share);
  }
  return shares;
}

/** Share of a pattern's injuries that a warm-up is meant to prevent. */
export function preventableShareOf(pattern: InjuryPattern): number {
  const total = pattern.contacts.reduce((sum, [, weight]) => sum + weight, 0);
  const free = pattern.contacts.filter(([contact]) => isPreventable(pattern, contact));
  return free.reduce((sum, [, weight]) => sum + weight, 0) / total;
}

/** The same for all sudden injuries other than the anterior cruciate ligament. */
export function preventableShare(sex: Sex, group: SportGroup): number {
  return PREVENTABLE_SHARES[group][sex];
}

function sharesOfGroup(group: SportGroup): Record<Sex, number> {
  const of = (sex: Sex) => {
    const weights = SUDDEN_PATTERNS.map((each) => [each, patternWeight(each, sex, group)] as const);
    const total = weights.reduce((sum, [, weight]) => sum + weight, 0);
    return weights.reduce((sum, [pattern, weight]) => sum + preventableShareOf(pattern) * weight, 0) / total;
  };
  return { female: of("female"), male: of("male"), not_stated: of("not_stated") };
}

const PREVENTABLE_SHARES = { soccer: sharesOfGroup("soccer"), court: sharesOfGroup("court") } as const;

export type TrueRate = {
  /** All sudden injuries, per 1000 athlete-exposures. */
  sudden: number;
  /** Of these, the sudden non-contact and indirect-contact ones of knee and ankle. */
  preventable: number;
  gradual: number;
};

/** The true rates of one athlete-exposure, after the effect of its warm-up. */
export function trueRate(stratum: Stratum, group: SportGroup, warmedUp: boolean): TrueRate {
  const base = baselineRates(stratum);
  const ratio = warmedUp ? WARM_UP_RATE_RATIO : 1;
  const atRisk =
    base.sudden * preventableShare(stratum.sex, group) + base.acl * preventableShareOf(ACL_PATTERN);
  return {
    sudden: base.sudden + base.acl - atRisk * (1 - ratio),
    preventable: atRisk * ratio,
    gradual: base.gradual,
  };
}
