import { skipReasonWords } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { joinClasses, StrokeTally } from "~/ui";
import { type SkipReason, warmUpBlocks } from "~db/schema/codes";
import type { TallySession } from "../compliance.server";
import { sessionAddress } from "./session-address";

function wordsOf({ day, warmUp }: TallySession) {
  const when = formatDay(day, "day-month");
  if (!warmUp) return `${when}: not recorded`;
  if (warmUp.outcome === "skipped")
    return `${when}: skipped${warmUp.skipReason ? `, ${skipReasonWords[warmUp.skipReason as SkipReason]}` : ""}`;
  return `${when}: ${warmUp.blocks} of ${warmUpBlocks.length} blocks`;
}

/** Skipped: the place of the tally struck through. Not recorded: an empty, dotted place. Told apart without colour. */
function Empty({ skipped }: { skipped: boolean }) {
  return (
    <svg aria-hidden="true" viewBox="0 0 44 24" className="inline-block h-[1.15em] align-[-0.2em]">
      {skipped ? (
        <path d="M10 4 34 20M34 4 10 20" stroke="currentColor" strokeWidth="2.4" strokeLinecap="round" />
      ) : (
        <path
          d="M5 19h34"
          stroke="currentColor"
          strokeWidth="2"
          strokeDasharray="1.5 5"
          strokeLinecap="round"
        />
      )}
    </svg>
  );
}

/** A season as a line of tallies: each session held, oldest first, a link to its warm-up. */
export function SeasonLine({
  sessions,
  slug,
  team,
}: {
  sessions: readonly TallySession[];
  slug: string;
  team: string;
}) {
  if (sessions.length === 0) return <p className="text-soft">No session held in this period.</p>;
  return (
    <ul aria-label={`Warm-ups of ${team}, oldest first`} className="flex flex-wrap items-center gap-x-1.5">
      {sessions.map((session) => (
        <li key={session.sessionId}>
          <a
            href={sessionAddress(slug, session.sessionId)}
            title={wordsOf(session)}
            className={joinClasses(
              "inline-flex min-h-target min-w-target items-center justify-center no-underline hover:bg-lagoon-wash",
              session.warmUp && session.warmUp.outcome !== "skipped" ? "text-ink" : "text-soft",
            )}
          >
            {session.warmUp && session.warmUp.outcome !== "skipped" ? (
              <StrokeTally done={session.done} label={wordsOf(session)} />
            ) : (
              <>
                <span className="sr-only">{wordsOf(session)}</span>
                <Empty skipped={session.warmUp !== null} />
              </>
            )}
          </a>
        </li>
      ))}
    </ul>
  );
}

/** The key of the line, in the same shapes. */
export function SeasonLineKey() {
  return (
    <p className="flex flex-wrap items-center gap-x-6 gap-y-1 text-sm text-soft">
      <span className="inline-flex items-center gap-2">
        <StrokeTally done={[true, true, true, true, true]} label="" /> all five blocks
      </span>
      <span className="inline-flex items-center gap-2">
        <StrokeTally done={[true, true, false, false, false]} label="" /> in part
      </span>
      <span className="inline-flex items-center gap-2">
        <Empty skipped /> skipped
      </span>
      <span className="inline-flex items-center gap-2">
        <Empty skipped={false} /> not recorded
      </span>
    </p>
  );
}
