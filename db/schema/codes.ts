/**
 * The coded values the records use. Codes are stored as text with a check, never as database enums:
 * an enum comparison is not leakproof and loses its index under row-level security.
 * Body areas and tissue and pathology follow the IOC consensus of 2020 (Bahr et al., BJSM 2020;54:372).
 */
export const roles = ["admin", "lead", "trainer", "coach"] as const;
export const organisationKinds = ["club", "school"] as const;
export const sports = [
  "soccer",
  "basketball",
  "handball",
  "volleyball",
  "rugby",
  "field_hockey",
  "netball",
  "other",
] as const;
export const teamSexes = ["girls", "boys", "women", "men", "mixed"] as const;
export const sexes = ["female", "male", "not_stated"] as const;
export const legs = ["left", "right", "both", "unknown"] as const;
export const sessionKinds = ["training", "match", "strength", "other"] as const;
export const sessionStates = ["planned", "held", "abandoned", "cancelled"] as const;
export const exposureGrades = ["recorded", "headcount", "estimated", "none"] as const;
export const presences = ["took_part", "present_only", "absent"] as const;
export const surfaces = [
  "natural_grass",
  "artificial_turf",
  "wood",
  "synthetic_court",
  "sand",
  "snow",
  "other",
] as const;
export const bodyAreas = [
  "head",
  "neck",
  "shoulder",
  "upper_arm",
  "elbow",
  "forearm",
  "wrist",
  "hand",
  "chest",
  "thoracic_spine",
  "lumbosacral",
  "abdomen",
  "hip_groin",
  "thigh",
  "knee",
  "lower_leg",
  "ankle",
  "foot",
  "unspecified",
  "multiple",
] as const;
export const sides = ["left", "right", "both", "none", "unknown"] as const;
export const onsets = ["sudden", "sudden_repetitive", "gradual"] as const;
export const contacts = [
  "non_contact",
  "indirect_athlete",
  "indirect_object",
  "direct_athlete",
  "direct_object",
  "unknown",
] as const;
export const movements = [
  "cutting",
  "pivoting",
  "landing",
  "take_off",
  "decelerating",
  "accelerating",
  "kicking",
  "tackling",
  "being_tackled",
  "falling",
  "collision",
  "throwing",
  "none",
  "other",
  "unknown",
] as const;
export const signs = [
  "pop",
  "swelling",
  "cannot_bear_weight",
  "giving_way",
  "locked",
  "deformity",
  "numb",
  "cold_pale_foot",
  "open_wound",
  "loss_of_consciousness",
  "seizure",
  "worsening_headache",
  "repeated_vomiting",
  "drowsiness",
  "double_vision",
  "limb_weakness",
  "agitation",
  "neck_pain",
] as const;
export const firstCare = ["stopped_play", "ice", "compression", "immobilised", "crutches"] as const;
export const referrals = ["emergency_department", "physician", "orthopaedics", "physiotherapy"] as const;
export const tissues = [
  "muscle_tendon",
  "nervous",
  "bone",
  "cartilage_synovium",
  "ligament_capsule",
  "skin",
  "vessels",
  "stump",
  "organs",
  "non_specific",
] as const;
export const pathologies = [
  "muscle_injury",
  "contusion",
  "compartment",
  "tendinopathy",
  "tendon_rupture",
  "concussion",
  "brain_cord",
  "peripheral_nerve",
  "fracture",
  "stress",
  "bone_contusion",
  "avascular_necrosis",
  "physis",
  "cartilage",
  "arthritis",
  "synovitis",
  "bursitis",
  "sprain",
  "chronic_instability",
  "skin_contusion",
  "laceration",
  "abrasion",
  "vascular",
  "stump",
  "organ",
  "non_specific",
] as const;
export const certainties = ["suspected", "clinical", "imaging"] as const;
export const subsequences = ["index", "recurrent", "exacerbation", "local", "other_site"] as const;
export const availabilityStates = ["full", "modified", "unavailable"] as const;
export const restrictions = [
  "no_cutting",
  "no_contact",
  "no_jumping",
  "no_sprinting",
  "straight_running_only",
  "no_overhead",
  "no_kicking",
  "no_heading",
  "non_weight_bearing",
  "minutes_limit",
] as const;
export const availabilityCauses = ["injury", "illness", "coach_report", "other"] as const;
export const warmUpBlocks = [
  "running",
  "strength",
  "jumping_landing",
  "balance",
  "cutting_planting",
] as const;
export const warmUpOutcomes = ["full", "part", "skipped"] as const;
export const skipReasons = ["no_time", "weather", "no_space", "leader_absent", "forgot", "other"] as const;
export const languages = ["en", "es", "pl", "cy"] as const;
export const relations = ["mother", "father", "parent", "guardian", "carer", "other"] as const;
export const importKinds = ["roster", "exposure"] as const;
export const importStates = [
  "uploading",
  "uploaded",
  "reading",
  "needs_answers",
  "previewed",
  "committing",
  "committed",
  "failed",
  "cancelled",
  "undone",
] as const;
export const rowOutcomes = ["create", "update", "unchanged", "rejected"] as const;
export const urgencies = ["routine", "urgent"] as const;
export const deliveryStates = [
  "waiting",
  "sending",
  "sent",
  "delivered",
  "bounced",
  "complained",
  "failed",
  "stopped",
] as const;
export const encounterKinds = ["assessment", "taping", "rehabilitation", "other"] as const;

export type Role = (typeof roles)[number];
export type Sport = (typeof sports)[number];
export type TeamSex = (typeof teamSexes)[number];
export type Sex = (typeof sexes)[number];
export type SessionKind = (typeof sessionKinds)[number];
export type SessionState = (typeof sessionStates)[number];
export type ExposureGrade = (typeof exposureGrades)[number];
export type Presence = (typeof presences)[number];
export type Surface = (typeof surfaces)[number];
export type BodyArea = (typeof bodyAreas)[number];
export type Side = (typeof sides)[number];
export type Onset = (typeof onsets)[number];
export type Contact = (typeof contacts)[number];
export type Movement = (typeof movements)[number];
export type Sign = (typeof signs)[number];
export type AvailabilityState = (typeof availabilityStates)[number];
export type Restriction = (typeof restrictions)[number];
export type WarmUpBlock = (typeof warmUpBlocks)[number];
export type SkipReason = (typeof skipReasons)[number];
export type ImportKind = (typeof importKinds)[number];
export type ImportState = (typeof importStates)[number];
export type RowOutcome = (typeof rowOutcomes)[number];
export type Language = (typeof languages)[number];
