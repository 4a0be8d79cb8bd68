import { Link } from "react-router";
import { gradeWords, sentenceCase } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { StrokeTally } from "~/ui";
import { warmUpBlocks } from "~db/schema/codes";
import { sessionStatusWords } from "../session-state";
import { sessionTitle } from "../session-words";
import type { ListedSession } from "../sessions.server";

/** The warm-up of a session in a list: a tally, or in words what it was not. */
function WarmUpMark({ session }: { session: ListedSession }) {
  const { warmUpOutcome, warmUpBlocks: blocks, status } = session;
  if (warmUpOutcome === "skipped") return <span className="text-sm text-soft">warm-up skipped</span>;
  if (warmUpOutcome) {
    const done = warmUpBlocks.map((block) => blocks?.includes(block) ?? false);
    const count = done.filter(Boolean).length;
    return <StrokeTally done={done} label={`Warm-up: ${count} of ${warmUpBlocks.length} blocks`} />;
  }
  if (status === "held" || status === "abandoned")
    return <span className="text-sm text-soft">warm-up not recorded</span>;
  return null;
}

function stateLine(session: ListedSession) {
  const { status, exposureGrade, tookPart, headcount } = session;
  const words = [sessionStatusWords[status]];
  if (exposureGrade === "recorded") words.push(`${tookPart} took part`);
  else if (exposureGrade === "headcount") words.push(`headcount of ${headcount}`);
  else if (status === "held" || status === "abandoned")
    words.push(exposureGrade === "estimated" ? gradeWords.estimated : "attendance not recorded");
  return words.join(", ");
}

function SessionLine({ session, base, withDay }: { session: ListedSession; base: string; withDay: boolean }) {
  const quiet = session.status === "cancelled";
  return (
    <li className="border-0 border-b border-line">
      <Link
        to={`${base}/${session.id}`}
        className="grid min-h-target-large grid-cols-[4rem_1fr] items-baseline gap-x-3 py-3 text-ink no-underline hover:bg-lagoon-wash sm:grid-cols-[4rem_1fr_auto]"
      >
        <span className="text-soft tabular-nums">{session.startTime ?? "–"}</span>
        <span>
          <span
            className={
              quiet ? "text-soft line-through" : "font-medium text-lagoon underline underline-offset-4"
            }
          >
            {session.teamName}
          </span>
          <span className={quiet ? "text-soft" : undefined}>
            , {sentenceCase(sessionTitle(session)).toLowerCase()}
            {withDay ? `, ${formatDay(session.day, "short")}` : ""}
          </span>
          <span
            className={`block ${session.status === "unconfirmed" ? "font-medium text-ember" : "text-sm text-soft"}`}
          >
            {stateLine(session)}
          </span>
        </span>
        <span className="col-start-2 sm:col-start-3">
          <WarmUpMark session={session} />
        </span>
      </Link>
    </li>
  );
}

/** Sessions in the order given, each a link to its page. `base` is the address of the sessions. */
export function SessionList({
  sessions,
  base,
  withDay = false,
}: {
  sessions: readonly ListedSession[];
  base: string;
  withDay?: boolean;
}) {
  return (
    <ul>
      {sessions.map((session) => (
        <SessionLine key={session.id} session={session} base={base} withDay={withDay} />
      ))}
    </ul>
  );
}

/** The same under a heading per day. */
export function SessionsByDay({ sessions, base }: { sessions: readonly ListedSession[]; base: string }) {
  const days = [...new Set(sessions.map(({ day }) => day))];
  return days.map((day) => (
    <section key={day} className="mt-6">
      <h2 className="border-0 border-b border-line pb-1 text-base font-medium text-soft">
        {formatDay(day, "full")}
      </h2>
      <SessionList sessions={sessions.filter((session) => session.day === day)} base={base} />
    </section>
  ));
}
