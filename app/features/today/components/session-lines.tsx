import { blockWords, sentenceCase, sessionKindWords } from "~/features/vocabulary";
import { StrokeTally, TextLink } from "~/ui";
import { type SessionKind, type WarmUpBlock, warmUpBlocks } from "~db/schema/codes";

export type SessionLine = {
  id: string;
  teamName: string;
  startTime: string | null;
  kind: SessionKind;
  status: string;
  venueName: string | null;
  tookPart: number;
  warmUpOutcome: string | null;
  warmUpBlocks: string[] | null;
};

function warmUpWords({ warmUpOutcome, warmUpBlocks: done }: SessionLine) {
  if (!warmUpOutcome) return "warm-up not recorded";
  if (warmUpOutcome === "skipped") return "warm-up skipped";
  return `warm-up: ${(done ?? []).map((block) => blockWords[block as WarmUpBlock]).join(", ")}`;
}

/** Today's sessions in the order of their start, with their state and the warm-up's tally. */
export function SessionLines({ sessions, base }: { sessions: SessionLine[]; base: string }) {
  return (
    <ul className="border-0">
      {sessions.map((session) => (
        <li
          key={session.id}
          className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1 border-0 border-b border-line py-2.5"
        >
          <span className="min-w-0 flex-1 basis-64">
            <TextLink to={`${base}/sessions/${session.id}`}>
              {session.startTime ? `${session.startTime}, ` : ""}
              {session.teamName}
            </TextLink>
            <span className="block text-soft">
              {sentenceCase(sessionKindWords[session.kind])}
              {session.venueName ? `, ${session.venueName}` : ""}; {session.status}
              {session.tookPart > 0 ? `, ${session.tookPart} took part` : ""}
            </span>
          </span>
          {session.status === "cancelled" ? null : (
            <TextLink
              to={`${base}/sessions/${session.id}/warm-up`}
              className="inline-flex min-h-target items-center gap-3"
            >
              <StrokeTally
                size="inline"
                done={warmUpBlocks.map((block) => session.warmUpBlocks?.includes(block) ?? false)}
                label={warmUpWords(session)}
              />
              <span>Warm-up</span>
            </TextLink>
          )}
        </li>
      ))}
    </ul>
  );
}
