import { useEffect } from "react";
import { useFetcher, useLocation, useRevalidator } from "react-router";
import { ButtonLink, Note } from "~/ui";

type Progress = { state: string; done: number; total: number };
type Props = { href: string; state: string; progress: { done: number; total: number } };

const pollMilliseconds = 1000;

/** Long work going on: how far it is, and that it may be left. With script the page goes on by itself. */
export function ImportProgress({ href, state, progress }: Props) {
  const fetcher = useFetcher<Progress>();
  const { revalidate } = useRevalidator();
  const { pathname } = useLocation();
  const latest = fetcher.data;

  useEffect(() => {
    if (fetcher.state !== "idle") return;
    if (latest && latest.state !== state) {
      revalidate();
      return;
    }
    const timer = setTimeout(() => fetcher.load(href), pollMilliseconds);
    return () => clearTimeout(timer);
  }, [fetcher.state, fetcher.load, latest, state, href, revalidate]);

  const { done, total } = latest && latest.state === state ? latest : progress;
  const words = state === "committing" ? "Importing" : "Reading";
  return (
    <div className="max-w-prose">
      <p role="status" className="mb-2 text-lg">
        {total > 0
          ? `${words}: ${done.toLocaleString("en-GB")} of ${total.toLocaleString("en-GB")} rows`
          : `${words} the file…`}
      </p>
      <progress
        className="h-3 w-full"
        aria-label={`${words} the file`}
        {...(total > 0 ? { value: done, max: total } : {})}
      />
      <Note>
        <p>You may leave this page and come back: the work goes on, and the history of imports leads here.</p>
      </Note>
      <noscript>
        <ButtonLink to={pathname} reloadDocument>
          Look again
        </ButtonLink>
      </noscript>
    </div>
  );
}
