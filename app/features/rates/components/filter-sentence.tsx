import { Link, useLocation } from "react-router";
import {
  type CaseDefinition,
  defaultFilters,
  type Grouping,
  type RatesFilters,
  type RateUnit,
  type SessionChoice,
} from "../filters";

const words = {
  injuries: {
    "time-loss": "all injuries with time loss",
    "medical-attention": "all injuries that needed attention",
  } satisfies Record<CaseDefinition, string>,
  sessions: {
    "training-and-matches": "training and matches",
    training: "training",
    match: "matches",
  } satisfies Record<SessionChoice, string>,
  by: {
    "sex-age": "sex and age band",
    sex: "sex",
    age: "age band",
    sport: "sport",
    kind: "session kind",
    team: "team",
  } satisfies Record<Grouping, string>,
  per: { aes: "1000 athlete-exposures", hours: "1000 hours" } satisfies Record<RateUnit, string>,
};

type Name = keyof typeof words;

function useChanged() {
  const { pathname, search } = useLocation();
  return (name: Name, value: string) => {
    const params = new URLSearchParams(search);
    if (value === defaultFilters[name]) params.delete(name);
    else params.set(name, value);
    params.delete("sort");
    const text = params.toString();
    return text ? `${pathname}?${text}` : pathname;
  };
}

/** One editable part of the sentence: its value, and the others as links, so that it works without script. */
function Part({ name, filters, label }: { name: Name; filters: RatesFilters; label: string }) {
  const changed = useChanged();
  const options: Record<string, string> = words[name];
  const current: string = filters[name];
  return (
    <details key={current} name="rates-filter" className="relative inline-block">
      <summary className="inline-flex min-h-target cursor-pointer list-none items-center">
        <span className="sr-only">{label}: </span>
        <span className="editable-word font-semibold">{options[current]}</span>
      </summary>
      <ul className="absolute left-0 z-30 w-72 max-w-[calc(100vw-3rem)] rounded-md border border-line bg-paper p-1 font-normal text-ink shadow-float">
        {Object.entries(options).map(([value, text]) => (
          <li key={value}>
            <Link
              to={changed(name, value)}
              preventScrollReset
              aria-current={value === current ? "true" : undefined}
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

/** "Showing all injuries with time loss in training and matches, by sex and age band, per 1000 athlete-exposures". */
export function FilterSentence({ filters }: { filters: RatesFilters }) {
  return (
    <div className="mb-3 text-soft max-sm:leading-tight print:mb-1" data-filters>
      Showing <Part name="injuries" label="Case definition" filters={filters} /> in{" "}
      <Part name="sessions" label="Sessions" filters={filters} />, by{" "}
      <Part name="by" label="Groups" filters={filters} />, per{" "}
      <Part name="per" label="Unit" filters={filters} />
    </div>
  );
}
