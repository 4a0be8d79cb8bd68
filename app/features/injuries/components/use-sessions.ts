import { useState } from "react";
import { useFetcher } from "react-router";
import type { SearchOption } from "~/ui/search-select";
import type { SessionChoice } from "./now-fields";

type Loaded = { athlete: { id: string } | null; sessions: SessionChoice[] };

/**
 * The chosen athlete and that athlete's sessions of the day, fetched from the page's own loader when another athlete
 * is chosen.
 */
export function useSessions(
  path: string,
  start: { athlete: SearchOption | null; sessions: SessionChoice[] },
) {
  const [athlete, setAthlete] = useState(start.athlete);
  const fetcher = useFetcher<Loaded>();
  const choose = (option: SearchOption | null) => {
    setAthlete(option);
    if (option && option.id !== start.athlete?.id) fetcher.load(`${path}?athlete=${option.id}`);
  };
  if (!athlete) return { athlete, choose, sessions: [] };
  if (athlete.id === start.athlete?.id) return { athlete, choose, sessions: start.sessions };
  const loaded = fetcher.data?.athlete?.id === athlete.id ? fetcher.data.sessions : [];
  return { athlete, choose, sessions: loaded };
}
