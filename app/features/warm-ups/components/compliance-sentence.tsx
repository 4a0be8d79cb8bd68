import { Interval, Lede } from "~/ui";
import type { Compliance } from "../compliance";
import { percent } from "../compliance-words";

const limit = (value: number) => String(Math.round(value * 100));
const sessionsOf = (count: number) =>
  `${count.toLocaleString("en-GB")} ${count === 1 ? "session" : "sessions"}`;

/** The sentence of the warm-ups page: how much is done, both ways, and what is not known. */
export function ComplianceSentence({ compliance, whose }: { compliance: Compliance; whose: string }) {
  const { sessions, recorded, notRecorded, ofRecorded, ofHeld, weeklyDose } = compliance;
  if (sessions === 0)
    return <Lede>No session was held in this season yet, so there is no compliance to show.</Lede>;
  const unknown =
    notRecorded > 0
      ? `${sessionsOf(notRecorded)} of ${sessions.toLocaleString("en-GB")} held ${notRecorded === 1 ? "has" : "have"} no warm-up record, which is not the same as skipped. The first figure is right if those were done as often as the recorded ones, the second if none was done.`
      : "Every session held has a warm-up record.";
  if (!ofRecorded.estimate || !ofHeld.estimate)
    return (
      <Lede note={unknown}>
        {whose} held <strong>{sessionsOf(sessions)}</strong> and recorded no warm-up.
      </Lede>
    );
  return (
    <Lede note={unknown}>
      {whose} did the warm-up as targeted in{" "}
      <strong>
        {ofRecorded.successes} of {recorded} recorded sessions, {percent(ofRecorded.estimate.estimate)}
      </strong>{" "}
      <Interval lower={limit(ofRecorded.estimate.lower)} upper={limit(ofRecorded.estimate.upper)} />
      {notRecorded > 0 ? (
        <>
          ; counting the unrecorded as not done, <strong>{percent(ofHeld.estimate.estimate)}</strong>{" "}
          <Interval lower={limit(ofHeld.estimate.lower)} upper={limit(ofHeld.estimate.upper)} />
        </>
      ) : null}
      .
      {weeklyDose.estimate ? (
        <>
          {" "}
          That is <strong>{weeklyDose.estimate.estimate.toFixed(1)}</strong> warm-ups per team-week{" "}
          <Interval
            lower={weeklyDose.estimate.lower.toFixed(1)}
            upper={weeklyDose.estimate.upper.toFixed(1)}
          />
          .
        </>
      ) : null}
    </Lede>
  );
}
