import { type ReactNode, useContext } from "react";
import type { TargetSize } from "./button";
import { joinClasses } from "./classes";
import { FieldError } from "./field";
import { FormContext, fieldId } from "./form-context";

export type Choice = { value: string; label: ReactNode; detail?: ReactNode; disabled?: boolean };

type Props = {
  name: string;
  legend: ReactNode;
  choices: Choice[];
  /** One answer (radio buttons) or several (tick boxes). */
  mode?: "single" | "multiple";
  /** Joined in a row for two to four short answers; wrapping otherwise. */
  layout?: "segments" | "chips";
  help?: ReactNode;
  errors?: string[];
  optional?: boolean;
  size?: TargetSize;
  defaultValue?: string | string[];
  onChange?: (value: string, checked: boolean) => void;
};

const face =
  "choice-face flex h-full w-full cursor-pointer items-center border-edge bg-paper text-ink select-none " +
  "hover:bg-lagoon-wash peer-checked:hover:bg-ink peer-checked:border-ink peer-checked:bg-ink peer-checked:text-chalk " +
  "peer-focus-visible:outline-3 peer-focus-visible:outline-offset-2 peer-focus-visible:outline-focus " +
  "peer-disabled:cursor-not-allowed peer-disabled:text-soft";

const shapes = {
  segments:
    "justify-center px-2 text-center border-y border-l " +
    "group-first:rounded-l-md group-last:rounded-r-md group-last:border-r peer-focus-visible:relative peer-focus-visible:z-10",
  chips: "rounded-md border px-3.5",
};

const heights: Record<TargetSize, string> = {
  regular: "min-h-[48px] py-1.5",
  large: "min-h-target-large py-2",
};

function asList(value: string | string[] | undefined) {
  if (value === undefined) return [];
  return Array.isArray(value) ? value : [value];
}

/**
 * One question whose answers are buttons: real radio buttons or tick boxes under their labels, so the arrow keys,
 * the space bar, a screen reader and a form without script all work.
 */
export function ChoiceButtons({ mode = "single", layout = "chips", size = "regular", ...props }: Props) {
  const { name, legend, choices, help, optional = false, onChange } = props;
  const form = useContext(FormContext);
  const id = fieldId(name, form.idPrefix);
  const messages = props.errors ?? form.errors?.fields[name] ?? [];
  const invalid = messages.length > 0;
  const chosen = asList(form.values?.[name] ?? props.defaultValue);
  const describedBy = [help ? `${id}-help` : "", invalid ? `${id}-error` : ""].filter(Boolean).join(" ");

  return (
    // The bar stands on a box around the group: a legend would push it down from the group's own border.
    <div className={joinClasses("mb-6", invalid && "border-0 border-l-[6px] border-berry pl-4")}>
      <fieldset aria-describedby={describedBy || undefined} className="min-w-0 border-0">
        <legend className="mb-1 font-medium">
          {legend}
          {optional ? <span className="font-normal text-soft"> (optional)</span> : null}
        </legend>
        {help ? (
          <p id={`${id}-help`} className="mb-1.5 max-w-prose text-soft">
            {help}
          </p>
        ) : null}
        <FieldError id={`${id}-error`} messages={messages} />
        <div
          className={
            layout === "segments" ? "grid max-w-[36rem] auto-cols-fr grid-flow-col" : "flex flex-wrap gap-2.5"
          }
        >
          {choices.map(({ value, label, detail, disabled }, index) => {
            const inputId = index === 0 ? id : `${id}-${index + 1}`;
            return (
              <div key={value} className="group relative">
                <input
                  id={inputId}
                  type={mode === "single" ? "radio" : "checkbox"}
                  name={name}
                  value={value}
                  disabled={disabled}
                  defaultChecked={chosen.includes(value)}
                  aria-invalid={invalid || undefined}
                  onChange={onChange ? (event) => onChange(value, event.currentTarget.checked) : undefined}
                  className="peer sr-only"
                />
                <label htmlFor={inputId} className={joinClasses(face, shapes[layout], heights[size])}>
                  <span>
                    {label}
                    {detail ? <span className="block text-sm opacity-85">{detail}</span> : null}
                  </span>
                </label>
              </div>
            );
          })}
        </div>
      </fieldset>
    </div>
  );
}
