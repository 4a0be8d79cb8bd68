import { formatDay } from "~/platform/days";
import type { ExposureGrade, SessionKind, Surface } from "~db/schema/codes";
import { sentenceCase, sessionKindWords, surfaceWords } from "../vocabulary";

/** "Training, artificial turf". */
export const sessionTitle = ({ kind, surface }: { kind: SessionKind; surface: Surface | null }) =>
  sentenceCase(sessionKindWords[kind]) + (surface ? `, ${surfaceWords[surface]}` : "");

/** "Tuesday 1 December, 17:30". */
export const sessionMoment = ({ day, startTime }: { day: string; startTime: string | null }) =>
  formatDay(day, "weekday") + (startTime ? `, ${startTime}` : "");

/** What a grade means, for the page of one session. */
export const gradeSentences: Record<ExposureGrade, string> = {
  recorded: "recorded: who took part and for how long is known.",
  headcount: "headcount: the number and the minutes are known, spread over the day's roster.",
  estimated: "estimated: players on the field times regulation minutes; hours only, no athlete-exposures.",
  none: "not recorded: this session counts in no rate.",
};

/** "1 athlete", "14 athletes". */
export const countOf = (count: number, one: string, many = `${one}s`) =>
  `${count.toLocaleString("en-GB")} ${count === 1 ? one : many}`;
