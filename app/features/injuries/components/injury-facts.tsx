import {
  bodyAreaWords,
  certaintyWords,
  contactWords,
  firstCareWords,
  movementWords,
  onsetWords,
  pathologyWords,
  referralWords,
  sentenceCase,
  sessionKindWords,
  sideWords,
  signWords,
  subsequenceWords,
  surfaceWords,
  tissueWords,
} from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { type Description, DescriptionList } from "~/ui";
import type { readInjury } from "../read-injury.server";

export type InjuryPage = Awaited<ReturnType<typeof readInjury>>;

const yesNo = (answer: boolean | null) => (answer === null ? null : answer ? "yes" : "no");
const joined = (codes: readonly string[], words: Readonly<Record<string, string>>) =>
  codes.map((code) => words[code] ?? code).join(", ");

/** What is known of an injury, in the order of its form; what is not known stands in the list of gaps. */
export function InjuryFacts({ injury }: { injury: InjuryPage }) {
  const { revision, session, further } = injury;
  const where = revision.outsideSport
    ? "outside organised sport"
    : session && `${sessionKindWords[session.kind]} of ${session.teamName}`;
  const rows: [string, string | null | undefined | false][] = [
    ["When", [formatDay(revision.onsetDay, "full"), revision.onsetTime].filter(Boolean).join(", ")],
    ["Session", where],
    ["Body area", bodyAreaWords[revision.bodyArea]],
    ["Side", revision.side !== "none" && sideWords[revision.side]],
    // Only a suspicion is stated: the column cannot tell "no" from "not asked".
    ["Suspected concussion", revision.suspectedConcussion && "yes"],
    ["Could continue", yesNo(revision.couldContinue)],
    ["Onset", revision.onset && onsetWords[revision.onset]],
    ["Contact", revision.contact && contactWords[revision.contact]],
    ["Movement", revision.movement && movementWords[revision.movement]],
    ["Minute of play", revision.minuteOfPlay === null ? null : String(revision.minuteOfPlay)],
    ["Surface", revision.surface && surfaceWords[revision.surface]],
    ["Footwear", revision.footwear],
    ["Had warmed up", yesNo(revision.warmedUp)],
    ["Signs", joined(revision.signs, signWords)],
    ["Swelling noticed", revision.swellingNoticed],
    ["First care", joined(revision.firstCare, firstCareWords)],
    ["Referred to", joined(revision.referredTo, referralWords)],
    ["Who was phoned", revision.phoned],
    [
      "Tissue and pathology",
      revision.tissue &&
        revision.pathology &&
        `${tissueWords[revision.tissue]}: ${pathologyWords[revision.pathology]}`,
    ],
    ["Diagnosis", revision.diagnosis],
    ["Certainty", revision.certainty && certaintyWords[revision.certainty]],
    ["Further diagnoses", further.join("; ")],
    [
      "Surgery",
      revision.surgery === null
        ? null
        : `${yesNo(revision.surgery)}${revision.surgeryDay ? `, ${formatDay(revision.surgeryDay)}` : ""}`,
    ],
    ["Description", revision.description],
    ["Relation to earlier injuries", revision.subsequence && subsequenceWords[revision.subsequence]],
    ["Closed on", revision.closedOn && formatDay(revision.closedOn)],
  ];
  const items = rows.flatMap(([term, detail]): Description[] =>
    detail
      ? [{ term, detail: <span className="whitespace-pre-line">{sentenceCase(detail)}</span>, key: term }]
      : [],
  );
  return <DescriptionList items={items} />;
}
