import {
  bodyAreaWords,
  contactWords,
  movementWords,
  pathologyWords,
  sessionKindWords,
  sideWords,
} from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import type { TimeLoss } from "~/statistics";
import type {
  AvailabilityState,
  BodyArea,
  Contact,
  Movement,
  pathologies,
  SessionKind,
  Side,
} from "~db/schema/codes";

type Facts = {
  bodyArea: BodyArea;
  side: Side;
  onsetDay: string;
  onsetTime: string | null;
  outsideSport: boolean;
  session: { kind: SessionKind; teamName: string } | null;
  movement: Movement | null;
  contact: Contact | null;
  pathology: (typeof pathologies)[number] | null;
  timeLoss: TimeLoss;
  state: AvailabilityState;
};

/** "left knee", "both ankles", "head", "knee, side not known". */
export function siteWords(bodyArea: BodyArea, side: Side): string {
  const area = bodyAreaWords[bodyArea];
  if (side === "none") return area;
  if (side === "unknown") return `${area}, side not known`;
  return side === "both" ? `${area}, both sides` : `${sideWords[side]} ${area}`;
}

export const dayCount = (days: number) => (days === 1 ? "1 day" : `${days} days`);

/** "14 days, ongoing", "0 days", "9 days". */
export const timeLossWords = ({ days, ongoing }: TimeLoss) =>
  `${dayCount(days)}${ongoing ? ", ongoing" : ""}`;

export const severityWords: Record<string, string> = {
  "0": "no time loss",
  "1-7": "1 to 7 days",
  "8-28": "8 to 28 days",
  ">28": "more than 28 days",
};

const silentMovements: readonly (Movement | null)[] = [null, "none", "other", "unknown"];

/** The page's sentence: what, when, where, how, and what it has cost so far. */
export function summariseInjury(name: string, facts: Facts): string {
  const what =
    facts.pathology && facts.pathology !== "non_specific" ? `, ${pathologyWords[facts.pathology]}` : "";
  const where = facts.outsideSport
    ? ", outside organised sport"
    : facts.session
      ? ` in a ${sessionKindWords[facts.session.kind]} of ${facts.session.teamName}`
      : "";
  const how =
    facts.movement !== null && !silentMovements.includes(facts.movement)
      ? `, while ${movementWords[facts.movement]}`
      : "";
  const contact = facts.contact && facts.contact !== "unknown" ? `, ${contactWords[facts.contact]}` : "";
  const at = facts.onsetTime ? ` at ${facts.onsetTime}` : "";
  const first = `${name}: ${siteWords(facts.bodyArea, facts.side)}${what}, on ${formatDay(facts.onsetDay, "long")}${at}${where}${how}${contact}.`;
  const cost = facts.timeLoss.ongoing
    ? `${facts.timeLoss.days === 0 ? "Time loss begins tomorrow" : `${dayCount(facts.timeLoss.days)} lost so far`}, ${facts.state} today.`
    : facts.timeLoss.days === 0
      ? "No time loss so far."
      : `${dayCount(facts.timeLoss.days)} lost, fully available again.`;
  return `${first} ${cost}`;
}

/** Why a record was withdrawn, in words. */
export const withdrawWords: Record<string, string> = {
  wrong_athlete: "it was about another athlete",
  entered_twice: "it was entered twice",
  not_an_injury: "it was no injury",
  trial_entry: "it was a trial entry",
};
