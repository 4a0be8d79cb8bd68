import { Link, useLocation } from "react-router";
import type { Season, TeamChoice } from "../viewing.server";

type Props = {
  organisation: string;
  several: boolean;
  seasons: Season[];
  season: Season | null;
  teams: TeamChoice[];
  team: TeamChoice | null;
  coversAll: boolean;
};

/** The address of the same page with one part of the scope changed. */
function useChanged() {
  const { pathname, search } = useLocation();
  return (name: "season" | "team", value: string | null) => {
    const params = new URLSearchParams(search);
    if (value === null) params.delete(name);
    else params.set(name, value);
    params.delete("page");
    const text = params.toString();
    return text ? `${pathname}?${text}` : pathname;
  };
}

function Choice({
  label,
  options,
}: {
  label: string;
  options: { to: string; text: string; current: boolean }[];
}) {
  return (
    <details className="inline-block md:relative" name="scope">
      <summary className="inline-flex min-h-target cursor-pointer list-none items-center">
        <span className="editable-word">{label}</span>
      </summary>
      {/* On a phone it opens below the bar, so that no word of it lies beyond the screen. */}
      <ul className="on-light absolute top-full left-4 z-30 max-h-[60vh] w-64 overflow-y-auto rounded-md border border-line bg-paper p-1 text-ink shadow-float md:top-auto md:left-0">
        {options.map(({ to, text, current }) => (
          <li key={to}>
            <Link
              to={to}
              aria-current={current ? "true" : undefined}
              className="flex min-h-target items-center rounded-md px-3 text-ink no-underline hover:bg-lagoon-wash aria-[current=true]:font-semibold"
            >
              {text}
            </Link>
          </li>
        ))}
      </ul>
    </details>
  );
}

/** "Marram Bay Athletic, season 2026/27, all teams": the scope in words, each part a control. */
export function ScopeSentence({ organisation, several, seasons, season, teams, team, coversAll }: Props) {
  const changed = useChanged();
  const allWords = coversAll ? "all teams" : teams.length === 1 ? (teams[0]?.name ?? "") : "my teams";
  return (
    <div>
      {several ? (
        <Link to="/organisations" className="inline-flex min-h-target items-center text-on-bar no-underline">
          <span className="editable-word">{organisation}</span>
        </Link>
      ) : (
        <span>{organisation}</span>
      )}
      {season ? (
        <>
          {", season "}
          <Choice
            key={`season-${season.id}`}
            label={season.name}
            options={seasons.map(({ id, name }) => ({
              to: changed("season", id),
              text: name,
              current: id === season.id,
            }))}
          />
        </>
      ) : null}
      {teams.length > 0 ? (
        <>
          {", "}
          {teams.length === 1 ? (
            <span>{allWords}</span>
          ) : (
            <Choice
              key={`team-${team?.id ?? "all"}`}
              label={team?.name ?? allWords}
              options={[
                {
                  to: changed("team", null),
                  text: coversAll ? "All teams" : "All my teams",
                  current: team === null,
                },
                ...teams.map(({ id, name }) => ({
                  to: changed("team", id),
                  text: name,
                  current: id === team?.id,
                })),
              ]}
            />
          )}
        </>
      ) : null}
    </div>
  );
}
