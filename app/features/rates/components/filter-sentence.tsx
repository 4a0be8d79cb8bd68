import { Form, Link, useLocation } from "react-router";
import { Button } from "~/ui";
import { narrowingChoices, narrowingInWords, partWords } from "../filter-words";
import { defaultFilters, type Narrowing, narrowingNames, noNarrowing, type RatesFilters } from "../filters";
import { searchWith } from "../views";

export type FilterPart = keyof typeof partWords;

type Choices = { filters: RatesFilters; bands: readonly string[]; sports: readonly string[] };

const summaryClasses = "inline-flex min-h-target cursor-pointer list-none items-center";
/** On a narrow page the choices open at its left edge, below their line; on a wide one below their word. */
const anchor = "inline-block xl:relative";
const floating =
  "absolute left-0 z-30 w-72 max-w-[calc(100vw-3rem)] rounded-md border border-line bg-paper p-1 font-normal text-ink shadow-float";

/** One editable part of the sentence: its value, and the others as links, so that it works without script. */
function Part({ name, filters, label }: { name: FilterPart; filters: RatesFilters; label: string }) {
  const { pathname, search } = useLocation();
  const options: Record<string, string> = partWords[name];
  const current: string = filters[name];
  const to = (value: string) =>
    pathname + searchWith(search, { [name]: value === defaultFilters[name] ? undefined : value });
  return (
    <details key={current} name="rates-filter" className={anchor}>
      <summary className={summaryClasses}>
        <span className="sr-only">{label}: </span>
        <span className="editable-word font-semibold">{options[current]}</span>
      </summary>
      <ul className={`${floating} max-h-[70vh] overflow-y-auto`}>
        {Object.entries(options).map(([value, text]) => (
          <li key={value}>
            <Link
              to={to(value)}
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

function NarrowField({ name, choices, value }: { name: string; choices: ChoiceList; value: string }) {
  return (
    <label className="block">
      <span className="block text-sm text-soft">{choices.label}</span>
      <select
        name={name}
        defaultValue={value}
        className="min-h-target w-full rounded-md border border-edge bg-paper px-2 text-ink"
      >
        {choices.options.map((option) => (
          <option key={option.value} value={option.value}>
            {option.label}
          </option>
        ))}
      </select>
    </label>
  );
}
type ChoiceList = ReturnType<typeof narrowingChoices>[keyof Narrowing];

/** What narrows the view further, in one form; what is set stands in the sentence. */
function Narrow({ filters, bands, sports }: Choices) {
  const { search } = useLocation();
  const choices = narrowingChoices(bands, sports);
  const kept = [...new URLSearchParams(searchWith(search))].filter(([name]) => !(name in noNarrowing));
  const isNarrowed = narrowingNames.some((name) => filters[name] !== noNarrowing[name]);
  return (
    <details key={narrowingNames.map((name) => filters[name]).join()} name="rates-filter" className={anchor}>
      <summary className={summaryClasses}>
        <span className="editable-word font-semibold">{isNarrowed ? "narrowed" : "narrow further"}</span>
      </summary>
      <Form method="get" preventScrollReset className={`${floating} space-y-2 p-4`}>
        {kept.map(([name, value]) => (
          <input key={name} type="hidden" name={name} value={value} />
        ))}
        {narrowingNames.map((name) => (
          <NarrowField key={name} name={name} choices={choices[name]} value={filters[name]} />
        ))}
        <div className="flex items-center gap-4 pt-2">
          <Button type="submit">Show</Button>
          {isNarrowed ? (
            <Link
              to={
                searchWith(search, Object.fromEntries(narrowingNames.map((name) => [name, undefined]))) || "?"
              }
              preventScrollReset
              className="inline-flex min-h-target items-center"
            >
              Everything again
            </Link>
          ) : null}
        </div>
      </Form>
    </details>
  );
}

const labels: Record<FilterPart, string> = {
  injuries: "Case definition",
  sessions: "Sessions",
  by: "Groups",
  per: "Unit",
};

/** The narrowing in words, before the parts that every view has: "Only non-contact knee injuries, girls in soccer." */
function Narrowed({ filters }: { filters: RatesFilters }) {
  const words = narrowingInWords(filters);
  return words ? <span className="text-ink">Only {words}. </span> : null;
}

/**
 * "Showing injuries with time loss in training and matches, by sex and age band, per 1000 athlete-exposures".
 * @param parts those that the view can change; the case definition and the sessions stand in every one
 */
export function FilterSentence({
  parts,
  narrow = true,
  shows,
  ...choices
}: Choices & { parts: readonly FilterPart[]; narrow?: boolean; shows?: string | undefined }) {
  const { filters } = choices;
  const part = (name: FilterPart) => <Part name={name} filters={filters} label={labels[name]} />;
  return (
    <div className="relative mb-3 text-soft max-sm:leading-tight print:mb-1" data-filters>
      <Narrowed filters={filters} />
      Showing{" "}
      {shows ?? (
        <>
          {part("injuries")} in {part("sessions")}
        </>
      )}
      {parts.includes("by") ? <>, by {part("by")}</> : null}
      {parts.includes("per") ? <>, per {part("per")}</> : null}
      {narrow ? (
        <>
          ; <Narrow {...choices} />
        </>
      ) : null}
    </div>
  );
}
