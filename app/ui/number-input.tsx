import { TextInput, type TextInputProps } from "./text-input";

type Props = Omit<TextInputProps, "type"> & { decimals?: boolean; unit?: string };

/**
 * A number, as text with a number keyboard: `type="number"` changes under a scrolling finger and throws away what
 * it cannot read, so that a wrong entry could not be shown back. `unit` is written after the field.
 */
export function NumberInput({ decimals = false, unit, width = "short", ...rest }: Props) {
  const input = (
    <TextInput inputMode={decimals ? "decimal" : "numeric"} autoComplete="off" width={width} {...rest} />
  );
  if (!unit) return input;
  return (
    <div className="flex items-center gap-2">
      {input}
      <span className="shrink-0 text-soft">{unit}</span>
    </div>
  );
}
