import { presenceWords, sentenceCase } from "~/features/vocabulary";
import { DescriptionList, SpotMark, StrokeTally } from "~/ui";
import { warmUpBlocks } from "~db/schema/codes";
import { spotOf } from "../../availability/state-words";
import type { ShownAthlete } from "../attendance.server";
import type { Exposure } from "../exposure";
import { fullTimeOf, sessionStatusWords } from "../session-state";
import { countOf, gradeSentences } from "../session-words";
import type { ListedSession } from "../sessions.server";

type ShownExposure = Pick<Exposure, "aes" | "hours" | "grade" | "unknown">;

function stateWordsOf(session: ListedSession) {
  const words = sentenceCase(sessionStatusWords[session.status]);
  if (session.status === "unconfirmed")
    return `${words}: its time has passed and nobody said whether it was held`;
  if (session.status === "abandoned") return `${words} after ${session.abandonedAfter ?? "some"} minutes`;
  if (session.status === "cancelled" && session.cancelReason) return `${words}: ${session.cancelReason}`;
  return words;
}

function minutesWordsOf(session: ListedSession) {
  const full = fullTimeOf(session);
  if (full === null) return "not stated";
  if (session.actualMinutes !== null && session.plannedMinutes !== null)
    return `${session.actualMinutes} (planned ${session.plannedMinutes})`;
  return session.actualMinutes === null && session.state !== "abandoned" ? `${full} planned` : String(full);
}

function exposureWords({ aes, hours, grade, unknown }: ShownExposure) {
  if (grade === "none") return null;
  const amount = `${hours.toFixed(1)} hours`;
  if (grade === "estimated") return amount;
  const excess = unknown.aes > 0 ? `; ${unknown.aes} of them beyond the roster, counted as unknown` : "";
  return `${countOf(aes, "athlete-exposure")}, ${amount}${excess}`;
}

function WarmUpFact({ session }: { session: ListedSession }) {
  const { warmUpOutcome, warmUpBlocks: blocks } = session;
  if (!warmUpOutcome) return "not recorded";
  if (warmUpOutcome === "skipped") return "skipped";
  const done = warmUpBlocks.map((block) => blocks?.includes(block) ?? false);
  return (
    <>
      <StrokeTally done={done} /> {done.filter(Boolean).length} of {warmUpBlocks.length} blocks
    </>
  );
}

/** State, minutes, venue, exposure with its grade, warm-up. */
export function SessionFacts({ session, exposure }: { session: ListedSession; exposure: ShownExposure }) {
  const words = exposureWords(exposure);
  return (
    <DescriptionList
      items={[
        { term: "State", detail: stateWordsOf(session) },
        { term: "Minutes", detail: minutesWordsOf(session) },
        { term: "Venue", detail: session.venueName ?? "not stated" },
        {
          term: "Exposure",
          detail: (
            <>
              {words ? <strong className="block font-medium">{words}</strong> : null}
              <span className={words ? "text-soft" : undefined}>
                {sentenceCase(gradeSentences[session.exposureGrade])}
              </span>
            </>
          ),
        },
        { term: "Warm-up", detail: <WarmUpFact session={session} /> },
      ]}
    />
  );
}

function Part({ athlete }: { athlete: ShownAthlete }) {
  const { part } = athlete;
  if (!part) return <span className="text-soft">nothing entered</span>;
  if (part.presence !== "took_part") return <span className="text-soft">{presenceWords[part.presence]}</span>;
  return <span className="tabular-nums">{part.minutes} min</span>;
}

/** Each athlete's part, with the state of the day; why is not told. */
export function TookPart({
  session,
  athletes,
}: {
  session: ListedSession;
  athletes: readonly ShownAthlete[];
}) {
  if (session.exposureGrade === "headcount")
    return (
      <p>
        {countOf(session.headcount ?? 0, "athlete")} for {session.headcountMinutes} minutes; by athlete it is
        not known.
      </p>
    );
  if (session.exposureGrade !== "recorded")
    return <p className="text-soft">Attendance is not recorded yet.</p>;
  return (
    <ul>
      {athletes
        .filter(({ part }) => part !== null)
        .map((athlete) => (
          <li
            key={athlete.id}
            className="flex items-baseline justify-between gap-4 border-0 border-b border-line py-2.5"
          >
            <SpotMark spot={spotOf[athlete.state]} detail={athlete.words || undefined}>
              {athlete.givenName} {athlete.familyName}
              {athlete.guest ? <span className="text-soft"> (guest)</span> : null}
            </SpotMark>
            <Part athlete={athlete} />
          </li>
        ))}
    </ul>
  );
}
