import { Form, Link, useLocation } from "react-router";
import { Button } from "~/ui";
import { searchWith } from "../views";
import { type Dimension, dimensions } from "./comparisons-strata";

const dimensionWords: Record<Dimension, string> = {
  sex: "sexes",
  sport: "sports",
  age: "age bands",
  team: "teams",
  kind: "training and matches",
  season: "seasons",
};

type Options = readonly { key: string; label: string }[];

function GroupField({
  name,
  label,
  value,
  options,
}: {
  name: "a" | "b";
  label: string;
  value: string | null;
  options: Options;
}) {
  return (
    <label className="block w-full sm:w-72">
      <span className="block text-soft">{label}</span>
      <select
        name={name}
        defaultValue={value ?? ""}
        className="min-h-target w-full rounded-md border border-edge bg-paper px-2 text-ink"
      >
        {options.map(({ key, label: words }) => (
          <option key={key} value={key}>
            {words}
          </option>
        ))}
      </select>
    </label>
  );
}

type Over = "season" | "all";
type Props = {
  dimension: Dimension;
  over: Over;
  /** Name of the season looked at. */
  season: string;
  choice: { options: Options; a: string | null; b: string | null };
};

const linkClasses =
  "inline-flex min-h-target items-center text-lagoon no-underline underline-offset-4 hover:underline aria-[current=true]:font-semibold aria-[current=true]:text-ink";

const own: readonly string[] = ["compare", "a", "b", "over"];
const none = { compare: undefined, a: undefined, b: undefined, over: undefined };

/** What is compared: the kind of groups as words, the two groups in a form of the address, both without script. */
export function ComparisonPicker({ dimension, over, season, choice: { options, a, b } }: Props) {
  const { search } = useLocation();
  const kept = [...new URLSearchParams(searchWith(search))].filter(([name]) => !own.includes(name));
  const set = new URLSearchParams(search).get("over") === "all" ? "all" : undefined;
  const ofDimension = (compare: Dimension) =>
    searchWith(search, { ...none, compare: compare === "sex" ? undefined : compare, over: set }) || "?";
  const ofOver = (value: Over) =>
    searchWith(search, {
      ...none,
      compare: dimension === "sex" ? undefined : dimension,
      over: value === "all" ? "all" : undefined,
    }) || "?";
  const overs: [Over, string][] = [
    ["season", `season ${season}`],
    ["all", "all seasons"],
  ];
  return (
    <div className="mb-6 print:hidden">
      <nav aria-label="What is compared" className="flex flex-wrap items-center gap-x-5">
        <span className="text-soft">Compare</span>
        {dimensions.map((each) => (
          <Link
            key={each}
            to={ofDimension(each)}
            preventScrollReset
            aria-current={each === dimension ? "true" : undefined}
            className={linkClasses}
          >
            {dimensionWords[each]}
          </Link>
        ))}
      </nav>
      {dimension === "season" ? null : (
        <nav aria-label="Over which days" className="flex flex-wrap items-center gap-x-5">
          <span className="text-soft">Over</span>
          {overs.map(([value, words]) => (
            <Link
              key={value}
              to={ofOver(value)}
              preventScrollReset
              aria-current={value === over ? "true" : undefined}
              className={linkClasses}
            >
              {words}
            </Link>
          ))}
        </nav>
      )}
      {options.length > 1 ? (
        // The choices are set anew whenever the address changes.
        <Form
          key={`${dimension} ${a} ${b}`}
          method="get"
          preventScrollReset
          className="flex flex-wrap items-end gap-3"
        >
          {kept.map(([name, value]) => (
            <input key={name} type="hidden" name={name} value={value} />
          ))}
          <input type="hidden" name="compare" value={dimension} />
          {set ? <input type="hidden" name="over" value={set} /> : null}
          <GroupField name="a" label="First" value={a} options={options} />
          <GroupField name="b" label="Against" value={b ?? options[1]?.key ?? null} options={options} />
          <Button type="submit" look="secondary">
            Compare
          </Button>
        </Form>
      ) : null}
    </div>
  );
}
