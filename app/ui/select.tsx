import type { ComponentProps } from "react";
import type { TargetSize } from "./button";
import { joinClasses } from "./classes";
import { useControl } from "./form-context";
import { type InputWidth, inputClasses } from "./input-classes";

export type SelectOption = { value: string; label: string; disabled?: boolean };
export type SelectGroup = { label: string; options: SelectOption[] };

type Props = Omit<ComponentProps<"select">, "size" | "width" | "children"> & {
  options: (SelectOption | SelectGroup)[];
  /** Words of the empty first entry; leave out when there is always a value. */
  placeholder?: string;
  width?: InputWidth;
  size?: TargetSize;
};

function Option({ value, label, disabled }: SelectOption) {
  return (
    <option value={value} disabled={disabled}>
      {label}
    </option>
  );
}

/** The browser's own list, which every phone knows how to show. */
export function Select({ options, placeholder, width, size, className, defaultValue, ...rest }: Props) {
  const { attributes, sentText } = useControl(rest);
  const value = rest.value === undefined ? { defaultValue: sentText ?? defaultValue ?? "" } : {};
  return (
    <select
      {...rest}
      {...attributes}
      {...value}
      className={joinClasses(inputClasses(width, size), "pr-8", className)}
    >
      {placeholder === undefined ? null : <option value="">{placeholder}</option>}
      {options.map((entry) =>
        "options" in entry ? (
          <optgroup key={entry.label} label={entry.label}>
            {entry.options.map((option) => (
              <Option key={option.value} {...option} />
            ))}
          </optgroup>
        ) : (
          <Option key={entry.value} {...entry} />
        ),
      )}
    </select>
  );
}
