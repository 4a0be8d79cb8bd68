import { type ReactNode, useContext } from "react";
import { FieldContext, FormContext, fieldId } from "./form-context";

type Props = {
  /** Name of the input; a summary's link and the returned errors and values go by it. */
  name: string;
  label: ReactNode;
  /** Shown before the field, read with it. */
  help?: ReactNode;
  /** Overrides the errors that `Form` holds under this name. */
  errors?: string[];
  /** Optional fields say so in words; a required one carries no star. */
  optional?: boolean;
  children: ReactNode;
};

/** The words of an error beside its field; the summary uses the same. */
export function FieldError({ id, messages }: { id: string; messages: string[] }) {
  if (messages.length === 0) return null;
  return (
    <p id={id} className="mb-1.5 font-medium text-berry">
      <span className="sr-only">To put right: </span>
      {messages.join(" ")}
    </p>
  );
}

/** One labelled input: label above, then help, then what is wrong, then the input. */
export function Field({ name, label, help, errors, optional = false, children }: Props) {
  const form = useContext(FormContext);
  const id = fieldId(name, form.idPrefix);
  const messages = errors ?? form.errors?.fields[name] ?? [];
  const invalid = messages.length > 0;
  const describedBy = [help ? `${id}-help` : "", invalid ? `${id}-error` : ""].filter(Boolean).join(" ");

  return (
    <div className={invalid ? "mb-6 border-0 border-l-[6px] border-berry pl-4" : "mb-6"}>
      <label id={`${id}-label`} htmlFor={id} className="mb-1 block font-medium">
        {label}
        {optional ? <span className="font-normal text-soft"> (optional)</span> : null}
      </label>
      {help ? (
        <p id={`${id}-help`} className="mb-1.5 max-w-prose text-soft">
          {help}
        </p>
      ) : null}
      <FieldError id={`${id}-error`} messages={messages} />
      <FieldContext value={{ id, name, describedBy: describedBy || undefined, invalid, required: !optional }}>
        {children}
      </FieldContext>
    </div>
  );
}
