import { type ReactNode, useCallback, useEffect, useRef, useState, useSyncExternalStore } from "react";
import { ComboBox, Input, ListBox, ListBoxItem, Popover, Text } from "react-aria-components";
import { Button, type TargetSize } from "./button";
import { useControl } from "./form-context";
import { inputClasses } from "./input-classes";

/** One thing that can be found; `detail` tells two of the same name apart. */
export type SearchOption = { id: string; label: string; detail?: string };

type Props = {
  /** Overrides the name of the `Field` around it. The id is sent under it, the text under `<name>-text`. */
  name?: string;
  /** Finds options for what was typed. Give this or `source`. */
  load?: (query: string, signal: AbortSignal) => Promise<SearchOption[]>;
  /** Address that answers `?q=` with `SearchOption[]` as JSON. */
  source?: string;
  defaultOption?: SearchOption | null;
  /** Without script: what the action found after "Find" was pressed (it sends `find=<name>`). */
  matches?: SearchOption[];
  size?: TargetSize;
  /** Words when nothing is found. */
  nothingFound?: ReactNode;
  onSelect?: (option: SearchOption | null) => void;
};

const pauseBeforeSearch = 180;

/** False on the server and for the first drawing in the browser, then true. */
function useHasScript() {
  return useSyncExternalStore(
    () => () => {},
    () => true,
    () => false,
  );
}

async function loadFrom(source: string, query: string, signal: AbortSignal): Promise<SearchOption[]> {
  const separator = source.includes("?") ? "&" : "?";
  const response = await fetch(`${source}${separator}q=${encodeURIComponent(query)}`, {
    signal,
    headers: { accept: "application/json" },
  });
  if (!response.ok) throw new Error(`The search answered ${response.status}`);
  return response.json();
}

type Search = { state: "idle" | "searching" | "found" | "failed"; options: SearchOption[] };

/** Searches after a short pause in typing; an answer to an older question is dropped. */
function useSearch({ load, source }: Pick<Props, "load" | "source">) {
  const [search, setSearch] = useState<Search>({ state: "idle", options: [] });
  const running = useRef<{ abort: () => void } | null>(null);
  useEffect(() => () => running.current?.abort(), []);

  const ask = useCallback(
    (query: string) => {
      running.current?.abort();
      if (query.trim() === "") return setSearch({ state: "idle", options: [] });
      const controller = new AbortController();
      const timer = setTimeout(async () => {
        try {
          const options = load
            ? await load(query.trim(), controller.signal)
            : await loadFrom(source ?? "", query.trim(), controller.signal);
          if (!controller.signal.aborted) setSearch({ state: "found", options });
        } catch {
          if (!controller.signal.aborted) setSearch({ state: "failed", options: [] });
        }
      }, pauseBeforeSearch);
      running.current = {
        abort: () => {
          clearTimeout(timer);
          controller.abort();
        },
      };
      setSearch(({ options }) => ({ state: "searching", options }));
    },
    [load, source],
  );
  return [search, ask] as const;
}

/**
 * Search-as-you-type for one of many: type, arrow down, Enter. Without script it is a text field with a "Find"
 * button and the matches as radio buttons.
 */
export function SearchSelect({ defaultOption, size, ...props }: Props) {
  const { attributes, sentText } = useControl({ name: props.name });
  const { sentText: sentWords } = useControl({ name: `${attributes.name}-text` });
  const hasScript = useHasScript();
  // What came back with errors wins over what the page started with.
  const sent = sentText ? { id: sentText, label: sentWords ?? defaultOption?.label ?? sentText } : null;
  const initial = sentText === undefined ? (defaultOption ?? null) : sent;
  const text = sentWords ?? initial?.label ?? "";
  const shared = { attributes, size, initial, text };
  return hasScript ? (
    <SearchCombo {...props} {...shared} />
  ) : (
    <PlainSearch {...shared} matches={props.matches} />
  );
}

type Shared = {
  attributes: ReturnType<typeof useControl>["attributes"];
  size?: TargetSize;
  initial: SearchOption | null;
  text: string;
};

function PlainSearch({ attributes, size, initial, text, matches }: Shared & Pick<Props, "matches">) {
  const { name, id } = attributes;
  const options = matches ?? (initial ? [initial] : []);
  return (
    <div>
      <div className="flex gap-2">
        <input
          {...attributes}
          name={`${name}-text`}
          type="text"
          autoComplete="off"
          defaultValue={text}
          className={inputClasses("full", size)}
        />
        <Button name="find" value={name} size={size}>
          Find
        </Button>
      </div>
      {options.map((option) => (
        <label
          key={option.id}
          htmlFor={`${id}-${option.id}`}
          className="flex min-h-target items-center gap-3"
        >
          <input
            type="radio"
            id={`${id}-${option.id}`}
            name={name}
            value={option.id}
            defaultChecked={option.id === initial?.id || options.length === 1}
            className="h-6 w-6 accent-ink"
          />
          <span>
            {option.label}
            {option.detail ? <span className="text-soft"> {option.detail}</span> : null}
          </span>
        </label>
      ))}
    </div>
  );
}

function SearchCombo({
  attributes,
  size,
  initial,
  text: startText,
  onSelect,
  nothingFound,
  ...from
}: Shared & Props) {
  const [chosen, setChosen] = useState(initial);
  const [text, setText] = useState(startText);
  const [search, ask] = useSearch(from);
  // The chosen one stays in the list while its own name is in the field, or leaving the field would empty it.
  const settled = chosen !== null && text === chosen.label;
  const options = settled ? [chosen] : search.options;

  function choose(option: SearchOption | null) {
    setChosen(option);
    onSelect?.(option);
  }

  return (
    <ComboBox
      id={attributes.id}
      aria-labelledby={`${attributes.id}-label`}
      aria-describedby={attributes["aria-describedby"]}
      isInvalid={attributes["aria-invalid"] === true}
      items={options}
      inputValue={text}
      value={chosen?.id ?? null}
      allowsCustomValue
      allowsEmptyCollection
      onInputChange={(next) => {
        if (next === text) return;
        setText(next);
        if (chosen && next !== chosen.label) choose(null);
        if (next !== chosen?.label) ask(next);
      }}
      onChange={(key) => {
        const option = options.find(({ id }) => id === key);
        if (!option) return;
        choose(option);
        setText(option.label);
      }}
    >
      <Input
        name={`${attributes.name}-text`}
        autoComplete="off"
        spellCheck={false}
        className={inputClasses("full", size)}
      />
      <input type="hidden" name={attributes.name} value={chosen?.id ?? ""} />
      <Popover className="w-(--trigger-width) overflow-auto rounded-md border border-edge bg-paper shadow-float">
        <ListBox<SearchOption>
          className="max-h-80 overflow-auto p-1 outline-none"
          renderEmptyState={() => (
            <p className="px-3 py-2 text-soft">
              <SearchWords state={search.state} nothingFound={nothingFound} />
            </p>
          )}
        >
          {(option) => (
            <ListBoxItem
              textValue={option.label}
              className="flex min-h-target cursor-pointer flex-wrap items-center gap-x-3 rounded-sm px-3 py-1 outline-none data-focused:bg-ink data-focused:text-chalk"
            >
              <Text slot="label">{option.label}</Text>
              {option.detail ? (
                <Text slot="description" className="text-sm opacity-80">
                  {option.detail}
                </Text>
              ) : null}
            </ListBoxItem>
          )}
        </ListBox>
      </Popover>
    </ComboBox>
  );
}

function SearchWords({ state, nothingFound }: { state: Search["state"]; nothingFound?: ReactNode }) {
  if (state === "failed") return "The search does not answer. Check the connection, then type again.";
  if (state === "found") return nothingFound ?? "Nothing found. Try fewer letters.";
  return "Searching";
}
