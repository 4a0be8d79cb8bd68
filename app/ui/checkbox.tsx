import { type ComponentProps, type ReactNode, useContext } from "react";
import type { TargetSize } from "./button";
import { joinClasses } from "./classes";
import { FieldError } from "./field";
import { FormContext, fieldId } from "./form-context";

type Props = Omit<ComponentProps<"input">, "size" | "type"> & {
  name: string;
  label: ReactNode;
  help?: ReactNode;
  errors?: string[];
  size?: TargetSize;
};

/** One statement to agree with. It is sent as its `value` ("on" unless given) when ticked, and not at all when not. */
export function Checkbox({ name, label, help, errors, size = "regular", className, ...rest }: Props) {
  const form = useContext(FormContext);
  const value = String(rest.value ?? "on");
  const id = rest.id ?? fieldId(name, form.idPrefix);
  const messages = errors ?? form.errors?.fields[name] ?? [];
  const invalid = messages.length > 0;
  const describedBy = [help ? `${id}-help` : "", invalid ? `${id}-error` : ""].filter(Boolean).join(" ");
  const sent = form.values?.[name];
  const checkedBefore = form.values
    ? sent === value || (Array.isArray(sent) && sent.includes(value))
    : rest.defaultChecked;
  const state = rest.checked === undefined ? { defaultChecked: checkedBefore } : {};
  const box = size === "large" ? "h-9 w-9" : "h-6 w-6";

  return (
    <div
      className={joinClasses(
        "mb-4 max-w-prose",
        invalid && "border-0 border-l-[6px] border-berry pl-4",
        className,
      )}
    >
      <FieldError id={`${id}-error`} messages={messages} />
      <div
        className={joinClasses(
          "flex items-start gap-3",
          size === "large" ? "min-h-target-large py-2" : "min-h-target py-2",
        )}
      >
        <input
          {...rest}
          {...state}
          id={id}
          type="checkbox"
          name={name}
          aria-describedby={describedBy || undefined}
          aria-invalid={invalid || undefined}
          className={joinClasses("mt-0.5 shrink-0 accent-ink", box)}
        />
        <label htmlFor={id} className="cursor-pointer self-center">
          {label}
        </label>
      </div>
      {help ? (
        <p id={`${id}-help`} className="ml-9 text-soft">
          {help}
        </p>
      ) : null}
    </div>
  );
}
