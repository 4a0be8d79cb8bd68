import type { ComponentProps } from "react";
import type { TargetSize } from "./button";
import { joinClasses } from "./classes";
import { useControl } from "./form-context";
import { type InputWidth, inputClasses } from "./input-classes";

export type TextInputProps = Omit<ComponentProps<"input">, "size" | "width"> & {
  width?: InputWidth;
  size?: TargetSize;
};

/** A line of text. Inside a `Field` it takes its id, name and wiring from there. */
export function TextInput({ width, size, className, defaultValue, type = "text", ...rest }: TextInputProps) {
  const { attributes, sentText } = useControl(rest);
  const value = rest.value === undefined ? { defaultValue: sentText ?? defaultValue } : {};
  return (
    <input
      type={type}
      {...rest}
      {...attributes}
      {...value}
      className={joinClasses(inputClasses(width, size), className)}
    />
  );
}
