import { TextInput, type TextInputProps } from "./text-input";

/** A time of day; the value sent is `HH:MM` on a 24 h clock. */
export function TimeInput({ width = "short", ...rest }: TextInputProps) {
  return <TextInput type="time" width={width} {...rest} />;
}
