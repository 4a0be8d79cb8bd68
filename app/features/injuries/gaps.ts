import type { injuryRevisions } from "~db/schema";

type Revision = typeof injuryRevisions.$inferSelect;
/** The facts by which it is told what an injury's record still lacks. */
export type GapFacts = Pick<
  Revision,
  | "sessionId"
  | "outsideSport"
  | "bodyArea"
  | "side"
  | "couldContinue"
  | "onset"
  | "contact"
  | "movement"
  | "warmedUp"
  | "pathology"
  | "certainty"
  | "subsequence"
> & {
  /** It has a dated availability of its own. */
  hasAvailability: boolean;
  /** The athlete has earlier injuries, so that the relation to them must be confirmed. */
  hasEarlier: boolean;
};

export type Gap = {
  /** The input of the edit form that fills it, also its anchor. */
  field: string;
  label: string;
};

/** The edit form's input that fills a gap, as the anchor of its address. */
export const gapAnchor = (field: string) => `field-${field === "pathology" ? "diagnosisPair" : field}`;

const midline = [
  "head",
  "neck",
  "chest",
  "thoracic_spine",
  "lumbosacral",
  "abdomen",
  "unspecified",
  "multiple",
];

/** Areas that exist on two sides. */
export const hasSides = (bodyArea: string) => !midline.includes(bodyArea);

/** What is still missing, in the order of the form. An answer of "not known" is an answer. */
export function gapsOf(facts: GapFacts): Gap[] {
  const gaps: Gap[] = [];
  const missing = (when: boolean, field: string, label: string) => {
    if (when) gaps.push({ field, label });
  };
  // A gradual injury belongs to no one session; it is counted by its team's weeks.
  const needsSession = facts.onset !== "gradual" && !facts.outsideSport;
  missing(needsSession && !facts.sessionId, "session", "the session, or outside organised sport");
  missing(facts.side === "unknown" && hasSides(facts.bodyArea), "side", "the side");
  missing(
    facts.couldContinue === null && !facts.outsideSport,
    "couldContinue",
    "whether they could continue",
  );
  missing(facts.onset === null, "onset", "how it began");
  missing(facts.contact === null && facts.onset !== "gradual", "contact", "contact or not");
  missing(facts.movement === null, "movement", "the movement");
  missing(facts.warmedUp === null && facts.sessionId !== null, "warmedUp", "whether they had warmed up");
  missing(facts.pathology === null, "pathology", "tissue and pathology");
  missing(facts.certainty === null, "certainty", "how certain the diagnosis is");
  missing(facts.subsequence === null && facts.hasEarlier, "subsequence", "the relation to earlier injuries");
  missing(!facts.hasAvailability && facts.couldContinue !== true, "availability", "the availability");
  return gaps;
}
