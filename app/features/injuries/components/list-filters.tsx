import { Form, useSearchParams, useSubmit } from "react-router";
import { bodyAreaWords } from "~/features/vocabulary";
import { severityBands } from "~/statistics";
import { Button } from "~/ui";
import type { ListFilter } from "../injuries.schema";
import { severityWords } from "../summary";

const word = "editable-word min-h-target max-w-[14rem] cursor-pointer bg-transparent font-medium text-ink";

function Word({
  name,
  label,
  value,
  options,
}: {
  name: string;
  label: string;
  value: string;
  options: [string, string][];
}) {
  return (
    <select aria-label={label} name={name} defaultValue={value} className={word}>
      {options.map(([code, text]) => (
        <option key={code} value={code}>
          {text}
        </option>
      ))}
    </select>
  );
}

/** The filters as a sentence with editable parts, kept in the address; season and team stand in the bar. */
export function ListFilters({ filter }: { filter: ListFilter }) {
  const [params] = useSearchParams();
  const submit = useSubmit();
  return (
    <Form
      method="get"
      role="search"
      aria-label="Filter the injuries"
      className="flex flex-wrap items-center gap-x-2 gap-y-2 print:hidden"
      onChange={(event) => {
        if (event.target instanceof HTMLSelectElement) submit(event.currentTarget, { replace: true });
      }}
    >
      {["season", "team", "athlete"].map((name) =>
        params.get(name) ? (
          <input key={name} type="hidden" name={name} value={params.get(name) ?? ""} />
        ) : null,
      )}
      <span>Show</span>
      <Word
        name="state"
        label="State"
        value={filter.state}
        options={[
          ["all", "all injuries"],
          ["open", "open injuries"],
          ["closed", "closed injuries"],
        ]}
      />
      <span>of</span>
      <Word
        name="area"
        label="Body area"
        value={filter.area}
        options={[["", "every body area"], ...Object.entries(bodyAreaWords)]}
      />
      <span>with</span>
      <Word
        name="severity"
        label="Severity"
        value={filter.severity}
        options={[
          ["", "any time loss"],
          ...severityBands.map((band): [string, string] => [band, severityWords[band] ?? band]),
        ]}
      />
      <label className="flex items-center gap-2">
        <span>and the words</span>
        <input
          type="search"
          name="q"
          defaultValue={filter.q}
          className="min-h-target w-44 rounded-md border border-edge bg-paper px-3"
        />
      </label>
      <Button>Show</Button>
    </Form>
  );
}
