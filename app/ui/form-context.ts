import { createContext, useContext } from "react";
import type { FormErrors, FormValues } from "./form-errors";

export type FormState = { errors?: FormErrors; values?: FormValues; idPrefix: string };

/** Given by `Form`; a field outside any form simply has no errors and no returned values. */
export const FormContext = createContext<FormState>({ idPrefix: "field" });

export type FieldState = {
  id: string;
  name: string;
  describedBy?: string;
  invalid: boolean;
  required: boolean;
};

/** Given by `Field` to the input inside it. */
export const FieldContext = createContext<FieldState | null>(null);

/** The id of an input, from its name; the error summary links to it. */
export function fieldId(name: string, prefix = "field") {
  return `${prefix}-${name.replace(/[^\w-]+/g, "-")}`;
}

type ControlProps = { id?: string; name?: string; "aria-describedby"?: string };

/**
 * The wiring of an input: id, name, `aria-describedby`, `aria-invalid`, and the value that came back with errors.
 * Throws when an input has neither a `Field` around it nor a name, since it could not be labelled or sent.
 */
export function useControl(props: ControlProps) {
  const form = useContext(FormContext);
  const field = useContext(FieldContext);
  const name = props.name ?? field?.name;
  if (!name) throw new Error("An input needs a name, or a Field around it.");
  const describedBy = [field?.describedBy, props["aria-describedby"]].filter(Boolean).join(" ");
  const sent = form.values?.[name];
  return {
    sent,
    sentText: typeof sent === "string" ? sent : sent?.[0],
    attributes: {
      id: props.id ?? field?.id ?? fieldId(name, form.idPrefix),
      name,
      "aria-describedby": describedBy || undefined,
      "aria-invalid": field?.invalid || undefined,
      "aria-required": field?.required || undefined,
    },
  };
}
