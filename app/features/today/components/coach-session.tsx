import { sentenceCase, sessionKindWords, surfaceWords } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { ButtonLink, EmptyState, StrokeTally } from "~/ui";
import { type SessionKind, type Surface, warmUpBlocks } from "~db/schema/codes";

type Props = {
  session: {
    id: string;
    teamName: string;
    day: string;
    startTime: string | null;
    kind: SessionKind;
    surface: Surface | null;
    venueName: string | null;
    status: string;
    warmUpOutcome: string | null;
    warmUpBlocks: string[] | null;
    tookPart: number;
  } | null;
  base: string;
  today: string;
};

/** One session at a time, with big targets. */
export function CoachSession({ session, base, today }: Props) {
  if (!session)
    return (
      <EmptyState
        title="No session is planned for your teams"
        actions={
          <ButtonLink to={`${base}/sessions/new`} look="primary" size="large">
            Add today&rsquo;s session
          </ButtonLink>
        }
      >
        Your session belongs here: the warm-up to tick off, who takes part and who must hold back.
      </EmptyState>
    );
  const { id, teamName, day, startTime, kind, surface, venueName, warmUpOutcome } = session;
  const later = day > today;
  const when = [day === today ? "Today" : formatDay(day, "weekday"), startTime].filter(Boolean).join(", ");
  const what = [sentenceCase(sessionKindWords[kind]), surface ? surfaceWords[surface] : null, venueName];
  return (
    <section className="mb-2 max-w-[36rem]">
      <p className="text-soft">{later ? `Nothing is planned today. Next: ${when}` : when}</p>
      <h2 className="text-xl">{teamName}</h2>
      <p className="mb-4">{what.filter(Boolean).join(", ")}</p>
      {session.status === "cancelled" ? (
        <p className="font-medium">Cancelled.</p>
      ) : (
        <>
          {warmUpOutcome && warmUpOutcome !== "skipped" ? (
            <div className="mb-4">
              <StrokeTally
                size="large"
                done={warmUpBlocks.map((block) => session.warmUpBlocks?.includes(block) ?? false)}
              />
            </div>
          ) : null}
          {warmUpOutcome === "skipped" ? <p className="mb-4 font-medium">No warm-up was done.</p> : null}
          <div className="flex flex-col gap-4 sm:flex-row">
            {later ? (
              <>
                <ButtonLink to={`${base}/sessions/${id}/warm-up`} size="large">
                  See its warm-up
                </ButtonLink>
                <ButtonLink to={`${base}/sessions/new`} size="large">
                  Add a session today
                </ButtonLink>
              </>
            ) : (
              <>
                <ButtonLink to={`${base}/sessions/${id}/warm-up`} look="primary" size="large">
                  {warmUpOutcome ? "Open the warm-up" : "Tick off the warm-up"}
                </ButtonLink>
                <ButtonLink to={`${base}/sessions/${id}/attendance`} size="large">
                  {session.tookPart > 0 ? `Who took part: ${session.tookPart}` : "Who took part"}
                </ButtonLink>
              </>
            )}
          </div>
        </>
      )}
    </section>
  );
}
