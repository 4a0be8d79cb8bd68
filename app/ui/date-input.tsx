import { TextInput, type TextInputProps } from "./text-input";

/**
 * A day, typed as people write it: `27 3 2014`, `27 Mar 2014` or `2014-03-27`. It is a text field, since calendar
 * pickers are slow for a date of birth; read it with `parseDay(text, "day-month-year")` of `~/platform/days`.
 */
export function DateInput({ width = "short", ...rest }: TextInputProps) {
  return <TextInput width={width} autoComplete="off" spellCheck={false} {...rest} />;
}
