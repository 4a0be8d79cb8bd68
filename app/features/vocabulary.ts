import type {
  AvailabilityState,
  BodyArea,
  Contact,
  ExposureGrade,
  Movement,
  Onset,
  Presence,
  pathologies,
  Restriction,
  SessionKind,
  SessionState,
  Sex,
  Side,
  Sign,
  SkipReason,
  Sport,
  Surface,
  TeamSex,
  tissues,
  WarmUpBlock,
} from "~db/schema/codes";

/** The words of the codes, as they stand in a sentence (small first letter). One place, so that no page invents synonyms. */

export const sportWords: Record<Sport, string> = {
  soccer: "soccer",
  basketball: "basketball",
  handball: "handball",
  volleyball: "volleyball",
  rugby: "rugby",
  field_hockey: "field hockey",
  netball: "netball",
  other: "other sport",
};
export const teamSexWords: Record<TeamSex, string> = {
  girls: "girls",
  boys: "boys",
  women: "women",
  men: "men",
  mixed: "mixed",
};
export const sexWords: Record<Sex, string> = { female: "female", male: "male", not_stated: "not stated" };
export const sessionKindWords: Record<SessionKind, string> = {
  training: "training",
  match: "match",
  strength: "strength",
  other: "other",
};
export const sessionStateWords: Record<SessionState, string> = {
  planned: "planned",
  held: "held",
  abandoned: "abandoned",
  cancelled: "cancelled",
};
export const gradeWords: Record<ExposureGrade, string> = {
  recorded: "recorded",
  headcount: "headcount",
  estimated: "estimated",
  none: "not recorded",
};
export const presenceWords: Record<Presence, string> = {
  took_part: "took part",
  present_only: "present only",
  absent: "absent",
};
export const surfaceWords: Record<Surface, string> = {
  natural_grass: "natural grass",
  artificial_turf: "artificial turf",
  wood: "wood",
  synthetic_court: "synthetic court",
  sand: "sand",
  snow: "snow",
  other: "other surface",
};
export const bodyAreaWords: Record<BodyArea, string> = {
  head: "head",
  neck: "neck",
  shoulder: "shoulder",
  upper_arm: "upper arm",
  elbow: "elbow",
  forearm: "forearm",
  wrist: "wrist",
  hand: "hand",
  chest: "chest",
  thoracic_spine: "upper back",
  lumbosacral: "lower back",
  abdomen: "abdomen",
  hip_groin: "hip or groin",
  thigh: "thigh",
  knee: "knee",
  lower_leg: "lower leg",
  ankle: "ankle",
  foot: "foot",
  unspecified: "unspecified",
  multiple: "several areas",
};
export const sideWords: Record<Side, string> = {
  left: "left",
  right: "right",
  both: "both",
  none: "no side",
  unknown: "side not known",
};
export const onsetWords: Record<Onset, string> = {
  sudden: "sudden",
  sudden_repetitive: "sudden, from repetitive load",
  gradual: "gradual",
};
export const contactWords: Record<Contact, string> = {
  non_contact: "non-contact",
  indirect_athlete: "indirect contact, with an athlete",
  indirect_object: "indirect contact, with an object",
  direct_athlete: "direct contact, with an athlete",
  direct_object: "direct contact, with an object",
  unknown: "not known",
};
export const movementWords: Record<Movement, string> = {
  cutting: "cutting or change of direction",
  pivoting: "pivoting on a planted foot",
  landing: "landing",
  take_off: "take-off",
  decelerating: "decelerating",
  accelerating: "accelerating or sprinting",
  kicking: "kicking or striking",
  tackling: "tackling",
  being_tackled: "being tackled",
  falling: "falling",
  collision: "collision",
  throwing: "throwing",
  none: "none (gradual)",
  other: "other",
  unknown: "not known",
};
export const signWords: Record<Sign, string> = {
  pop: "pop heard or felt",
  swelling: "swelling",
  cannot_bear_weight: "cannot bear weight (four steps)",
  giving_way: "gives way",
  locked: "locked joint",
  deformity: "deformity",
  numb: "numb",
  cold_pale_foot: "cold or pale foot",
  open_wound: "open wound over a joint",
  loss_of_consciousness: "lost consciousness",
  seizure: "seizure",
  worsening_headache: "worsening headache",
  repeated_vomiting: "repeated vomiting",
  drowsiness: "drowsiness",
  double_vision: "double vision",
  limb_weakness: "weakness in a limb",
  agitation: "agitation",
  neck_pain: "neck pain",
};
export const firstCareWords: Record<string, string> = {
  stopped_play: "stopped play",
  ice: "ice",
  compression: "compression",
  immobilised: "immobilised",
  crutches: "crutches",
};
export const referralWords: Record<string, string> = {
  emergency_department: "emergency department",
  physician: "physician",
  orthopaedics: "orthopaedics",
  physiotherapy: "physiotherapy",
};
export const tissueWords: Record<(typeof tissues)[number], string> = {
  muscle_tendon: "muscle or tendon",
  nervous: "nervous system",
  bone: "bone",
  cartilage_synovium: "cartilage, synovium or bursa",
  ligament_capsule: "ligament or joint capsule",
  skin: "skin",
  vessels: "vessels",
  stump: "stump",
  organs: "internal organs",
  non_specific: "non-specific",
};
export const pathologyWords: Record<(typeof pathologies)[number], string> = {
  muscle_injury: "muscle injury",
  contusion: "muscle contusion",
  compartment: "compartment syndrome",
  tendinopathy: "tendinopathy",
  tendon_rupture: "tendon rupture",
  concussion: "concussion",
  brain_cord: "brain or spinal cord injury",
  peripheral_nerve: "peripheral nerve injury",
  fracture: "fracture",
  stress: "bone stress injury",
  bone_contusion: "bone contusion",
  avascular_necrosis: "avascular necrosis",
  physis: "growth plate injury",
  cartilage: "cartilage injury",
  arthritis: "arthritis",
  synovitis: "synovitis or capsulitis",
  bursitis: "bursitis",
  sprain: "sprain or ligament tear",
  chronic_instability: "chronic instability",
  skin_contusion: "skin contusion",
  laceration: "laceration",
  abrasion: "abrasion",
  vascular: "vascular injury",
  stump: "stump injury",
  organ: "organ injury",
  non_specific: "without a specific tissue diagnosis",
};
/** Which pathologies belong to which tissue (IOC consensus 2020, Bahr et al., BJSM 2020;54:372). */
export const pathologiesOf: Record<(typeof tissues)[number], readonly (typeof pathologies)[number][]> = {
  muscle_tendon: ["muscle_injury", "contusion", "compartment", "tendinopathy", "tendon_rupture"],
  nervous: ["concussion", "brain_cord", "peripheral_nerve"],
  bone: ["fracture", "stress", "bone_contusion", "avascular_necrosis", "physis"],
  cartilage_synovium: ["cartilage", "arthritis", "synovitis", "bursitis"],
  ligament_capsule: ["sprain", "chronic_instability"],
  skin: ["skin_contusion", "laceration", "abrasion"],
  vessels: ["vascular"],
  stump: ["stump"],
  organs: ["organ"],
  non_specific: ["non_specific"],
};
export const certaintyWords = {
  suspected: "suspected",
  clinical: "clinical",
  imaging: "confirmed by imaging",
} as const;
export const subsequenceWords = {
  index: "first injury of this kind",
  recurrent: "re-injury: same area, side and type",
  exacerbation: "exacerbation of an injury that had not closed",
  local: "same area, other type",
  other_site: "at another site",
} as const;
export const availabilityWords: Record<AvailabilityState, string> = {
  full: "full",
  modified: "modified",
  unavailable: "unavailable",
};
/** Restrictions in words a coach can act on. */
export const restrictionWords: Record<Restriction, string> = {
  no_cutting: "no cutting",
  no_contact: "no contact",
  no_jumping: "no jumping",
  no_sprinting: "no sprinting",
  straight_running_only: "straight running only",
  no_overhead: "no overhead work",
  no_kicking: "no kicking",
  no_heading: "no heading",
  non_weight_bearing: "no weight on the leg",
  minutes_limit: "limited minutes",
};
export const blockWords: Record<WarmUpBlock, string> = {
  running: "running preparation",
  strength: "strength",
  jumping_landing: "jumping and landing",
  balance: "balance",
  cutting_planting: "cutting and planting",
};
export const skipReasonWords: Record<SkipReason, string> = {
  no_time: "no time",
  weather: "weather",
  no_space: "no space",
  leader_absent: "leader absent",
  forgot: "forgot",
  other: "other",
};
export const relationWords: Record<string, string> = {
  mother: "mother",
  father: "father",
  parent: "parent",
  guardian: "guardian",
  carer: "carer",
  other: "other",
};
export const languageWords: Record<string, string> = {
  en: "English",
  es: "Spanish",
  pl: "Polish",
  cy: "Welsh",
};

/** First letter large, for the start of a line. */
export const sentenceCase = (words: string) => words.charAt(0).toUpperCase() + words.slice(1);

/** Code and label pairs for a choice, in the order of the codes. */
export const choicesOf = <T extends string>(words: Record<T, string>) =>
  (Object.entries(words) as [T, string][]).map(([value, label]) => ({ value, label: sentenceCase(label) }));
