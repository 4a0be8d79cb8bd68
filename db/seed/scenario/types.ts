/**
 * The demo's data as plain objects in the trade's words. Keys are stable strings, not database ids: the loader
 * that writes them through the application's own writes makes the ids.
 *
 * Days are ISO calendar dates of the organisation ("2026-10-03"); moments are its local wall time
 * ("2026-10-03T18:40"). Every `to` is the last day that counts; null means still in force.
 */
export type Day = string;
export type LocalMoment = string;
export type Key = string;

export type Sport = "soccer" | "basketball" | "handball" | "volleyball";
export type SexCategory = "girls" | "boys" | "women" | "men" | "mixed";
export type Sex = "female" | "male" | "not_stated";
export type Leg = "left" | "right" | "both" | "unknown";
export type Side = "left" | "right" | "both" | "none" | "unknown";
export type Role = "admin" | "lead" | "trainer" | "coach";
export type Language = "en" | "es" | "pl" | "cy";
export type SessionKind = "training" | "match" | "strength" | "other";
export type SessionStatus = "planned" | "held" | "abandoned" | "cancelled";
export type ExposureGrade = "recorded" | "headcount" | "estimated" | "none";
export type Presence = "took_part" | "present_only" | "absent";
export type Surface =
  | "natural_grass"
  | "artificial_turf"
  | "wood"
  | "synthetic_court"
  | "sand"
  | "snow"
  | "other";
export type Onset = "sudden" | "sudden_repetitive" | "gradual";
export type Contact =
  | "non_contact"
  | "indirect_athlete"
  | "indirect_object"
  | "direct_athlete"
  | "direct_object"
  | "unknown";
export type Movement =
  | "cutting"
  | "pivoting"
  | "landing"
  | "take_off"
  | "decelerating"
  | "accelerating"
  | "kicking"
  | "tackling"
  | "being_tackled"
  | "falling"
  | "collision"
  | "throwing"
  | "none"
  | "other"
  | "unknown";
export type Sign =
  | "pop"
  | "swelling"
  | "cannot_bear_weight"
  | "giving_way"
  | "locked"
  | "deformity"
  | "numb"
  | "cold_pale_foot"
  | "open_wound";
export type Certainty = "suspected" | "clinical" | "imaging";
export type AvailabilityState = "full" | "modified" | "unavailable";
export type Restriction =
  | "no_cutting"
  | "no_contact"
  | "no_jumping"
  | "no_sprinting"
  | "straight_running_only"
  | "no_overhead"
  | "no_kicking"
  | "no_heading"
  | "non_weight_bearing"
  | "minutes_limit";
export type WarmUpBlock = "running" | "strength" | "jumping_landing" | "balance" | "cutting_planting";
export type WarmUpOutcome = "full" | "part" | "skipped";
export type SkipReason = "no_time" | "weather" | "no_space" | "leader_absent" | "forgot" | "other";
export type BodyArea =
  | "head"
  | "neck"
  | "shoulder"
  | "upper_arm"
  | "elbow"
  | "forearm"
  | "wrist"
  | "hand"
  | "chest"
  | "thoracic_spine"
  | "lumbosacral"
  | "abdomen"
  | "hip_groin"
  | "thigh"
  | "knee"
  | "lower_leg"
  | "ankle"
  | "foot"
  | "unspecified"
  | "multiple";
export type Tissue =
  | "muscle_tendon"
  | "nervous"
  | "bone"
  | "cartilage_synovium"
  | "ligament_capsule"
  | "skin"
  | "vessels"
  | "stump"
  | "organs"
  | "non_specific";
export type Pathology =
  | "muscle_injury"
  | "contusion"
  | "compartment"
  | "tendinopathy"
  | "tendon_rupture"
  | "concussion"
  | "brain_cord"
  | "peripheral_nerve"
  | "fracture"
  | "stress"
  | "bone_contusion"
  | "avascular_necrosis"
  | "physis"
  | "cartilage"
  | "arthritis"
  | "synovitis"
  | "bursitis"
  | "sprain"
  | "chronic_instability"
  | "skin_contusion"
  | "laceration"
  | "abrasion"
  | "vascular"
  | "stump"
  | "organ"
  | "non_specific";

/** Players on the field and regulation minutes of one sport in one age group. */
export type SportRule = { sport: Sport; ageGroup: string; playersOnField: number; regulationMinutes: number };

export type Organisation = {
  key: Key;
  name: string;
  kind: "club" | "school";
  timeZone: string;
  sports: SportRule[];
};

export type Person = { key: Key; givenName: string; familyName: string; email: string; phone: string };
/** `teams: "all"` is every team of the organisation, now and later; a list is exactly those. */
export type Membership = { organisation: Key; person: Key; role: Role; teams: "all" | Key[] };

export type Season = { organisation: Key; key: Key; name: string; from: Day; to: Day };

/** Ages are those on 1 September of the season. */
export type AgeGroup = { label: string; minAge: number; maxAge: number };
export type Team = {
  organisation: Key;
  key: Key;
  name: string;
  sport: Sport;
  sexCategory: SexCategory;
  ageGroup: AgeGroup;
  /** Day on which the team began the warm-up programme. */
  programmeFrom: Day;
  /** Warm-ups a week the team is asked for. */
  weeklyTarget: number;
};

export type EmergencyCard = {
  address: string;
  access: string;
  defibrillator: string;
  emergencyNumber: string;
  sitePhone: string;
  nearestEmergencyDepartment: string;
};
export type Venue = { organisation: Key; key: Key; name: string; emergencyCard: EmergencyCard };

export type EarlierInjury = { area: BodyArea; side: Side; pathology: Pathology; words: string; year: number };
export type Athlete = {
  organisation: Key;
  key: Key;
  /** The organisation's own number; visitors have none. */
  number: string | null;
  givenName: string;
  familyName: string;
  dateOfBirth: Day;
  sex: Sex;
  dominantLeg: Leg;
  visitor: boolean;
  earlierInjuries: EarlierInjury[];
  /** What the family lets coaches see and do. */
  actionAlerts: string[];
  researchConsent: "given" | "refused" | "not_asked";
  /** Stops every notice until a clinical role lifts it. */
  safeguardingHold: { from: Day; by: Key; reason: string } | null;
};

export type Guardian = {
  organisation: Key;
  key: Key;
  givenName: string;
  familyName: string;
  email: string | null;
  phone: string;
  language: Language;
  wantsEmail: boolean;
};
export type Guardianship = {
  organisation: Key;
  athlete: Key;
  guardian: Key;
  relation: "mother" | "father" | "step_parent" | "grandparent" | "carer";
  mayBeTold: boolean;
  mayDecide: boolean;
  phoneOrder: number;
  legalLimit: { words: string; document: string; reviewOn: Day } | null;
};

export type RosterEntry = { organisation: Key; athlete: Key; team: Key; from: Day; to: Day | null };

export type Session = {
  organisation: Key;
  key: Key;
  team: Key;
  day: Day;
  start: string;
  kind: SessionKind;
  status: SessionStatus;
  plannedMinutes: number;
  actualMinutes: number | null;
  surface: Surface;
  /** Null for an away match at a ground the organisation does not know. */
  venue: Key | null;
  grade: ExposureGrade;
  headcount: number | null;
};

export type Participation = {
  organisation: Key;
  session: Key;
  athlete: Key;
  presence: Presence;
  minutes: number;
};

export type WarmUp = {
  organisation: Key;
  session: Key;
  outcome: WarmUpOutcome;
  blocks: WarmUpBlock[];
  skipReason: SkipReason | null;
  minutes: number;
  ledBy: Key | null;
  /** Took part in the session but not in the warm-up: late, or not allowed by a restriction. */
  notWarmedUp: Key[];
};

export type Diagnosis = {
  tissue: Tissue;
  pathology: Pathology;
  words: string;
  certainty: Certainty;
  principal: boolean;
};
export type Injury = {
  organisation: Key;
  key: Key;
  athlete: Key;
  at: LocalMoment;
  /** Null for gradual onset and outside organised sport. */
  session: Key | null;
  outsideOrganisedSport: boolean;
  area: BodyArea;
  side: Side;
  onset: Onset;
  contact: Contact;
  movement: Movement;
  minuteOfPlay: number | null;
  surface: Surface | null;
  warmedUp: "yes" | "no" | "unknown";
  suspectedConcussion: boolean;
  couldContinue: boolean;
  signs: Sign[];
  diagnoses: Diagnosis[];
  surgeryOn: Day | null;
  /** First day of full availability; null while open. */
  fullOn: Day | null;
  closedOn: Day | null;
  followUps: { on: Day; by: Key; note: string }[];
  loggedBy: Key;
};

/** One dated contribution of one reason; those of the same reason never overlap. */
export type Availability = {
  organisation: Key;
  athlete: Key;
  reason: "injury" | "illness" | "other";
  injury: Key | null;
  from: Day;
  to: Day | null;
  state: Exclude<AvailabilityState, "full">;
  restrictions: Restriction[];
  /** Set exactly when `minutes_limit` is among the restrictions. */
  minutesLimit: number | null;
};

export type CoachReport = {
  organisation: Key;
  key: Key;
  athlete: Key;
  session: Key;
  by: Key;
  at: LocalMoment;
  area: BodyArea;
  signs: Sign[];
  phoned: Key | null;
  /** The injury the athletic trainer made of it; null while it waits in the queue. */
  injury: Key | null;
};

export type Encounter = {
  organisation: Key;
  athlete: Key;
  by: Key;
  at: LocalMoment;
  kind: "assessment" | "taping" | "rehabilitation";
  area: BodyArea;
};

export type Notice = {
  organisation: Key;
  key: Key;
  injury: Key;
  athlete: Key;
  guardian: Key;
  urgent: boolean;
  sentAt: LocalMoment;
  deliveredAt: LocalMoment | null;
  openedAt: LocalMoment | null;
  acknowledgedAt: LocalMoment | null;
  callAskedAt: LocalMoment | null;
  bouncedAt: LocalMoment | null;
  /** The logged call that urgent injuries need before the child leaves. */
  call: { by: Key; at: LocalMoment; words: string } | null;
};

/** A week (its Monday) for which a team's staff confirmed that nobody was newly hurt. */
export type ConfirmedWeek = { organisation: Key; team: Key; monday: Day; by: Key };

/** What the records do not say, for tests alone; never loaded. */
export type Truth = {
  /** Sessions whose warm-up was done in full but not recorded. */
  warmedUpWithoutRecord: Key[];
  /** Weeks (team and Monday) in which a team reported nothing at all. */
  silentWeeks: { team: Key; monday: Day }[];
};

export type Scenario = {
  seed: string;
  today: Day;
  organisations: Organisation[];
  people: Person[];
  memberships: Membership[];
  seasons: Season[];
  teams: Team[];
  venues: Venue[];
  athletes: Athlete[];
  guardians: Guardian[];
  guardianships: Guardianship[];
  roster: RosterEntry[];
  sessions: Session[];
  participations: Participation[];
  warmUps: WarmUp[];
  injuries: Injury[];
  availability: Availability[];
  coachReports: CoachReport[];
  encounters: Encounter[];
  notices: Notice[];
  confirmedWeeks: ConfirmedWeek[];
  truth: Truth;
};
