import type { ComponentProps } from "react";
import { joinClasses } from "./classes";
import { useControl } from "./form-context";
import { type InputWidth, inputClasses } from "./input-classes";

type Props = ComponentProps<"textarea"> & { width?: InputWidth };

/** Several lines of text. */
export function TextArea({ width, className, defaultValue, rows = 4, ...rest }: Props) {
  const { attributes, sentText } = useControl(rest);
  const value = rest.value === undefined ? { defaultValue: sentText ?? defaultValue } : {};
  return (
    <textarea
      rows={rows}
      {...rest}
      {...attributes}
      {...value}
      className={joinClasses(inputClasses(width), "leading-normal", className)}
    />
  );
}
