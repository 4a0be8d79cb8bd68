import type { ReactNode } from "react";
import { type FetcherWithComponents, type FormProps, Form as RouterForm } from "react-router";
import { ErrorSummary } from "./error-summary";
import { FormContext } from "./form-context";
import type { FormErrors, FormValues } from "./form-errors";

type Props = Omit<FormProps, "children"> & {
  children: ReactNode;
  errors?: FormErrors | null;
  /** What the person typed, sent back with the errors; it wins over each field's `defaultValue`. */
  values?: FormValues | null;
  /** Gives a fetcher's form, which stays on the page; otherwise the router's. */
  fetcher?: FetcherWithComponents<unknown>;
  /** Needed when a page has two forms with inputs of the same name. */
  idPrefix?: string;
  summaryTitle?: string;
};

/**
 * A form that works without script: it posts, the action answers with `errors` and `values`, and the page comes
 * back with everything typed and a summary that has the focus. The browser's own bubbles are off, since their
 * words are not ours and they vanish.
 */
export function Form({
  errors,
  values,
  fetcher,
  idPrefix = "field",
  summaryTitle,
  children,
  ...rest
}: Props) {
  const Element = fetcher ? fetcher.Form : RouterForm;
  return (
    <Element method="post" noValidate {...rest}>
      <ErrorSummary errors={errors} title={summaryTitle} idPrefix={idPrefix} />
      <FormContext value={{ errors: errors ?? undefined, values: values ?? undefined, idPrefix }}>
        {children}
      </FormContext>
    </Element>
  );
}

/** The row of buttons at a form's foot; on a phone they fill the width. */
export function FormActions({ children, note }: { children: ReactNode; note?: ReactNode }) {
  return (
    <div className="mt-8">
      <div className="flex flex-col gap-3 sm:flex-row sm:flex-wrap sm:items-center">{children}</div>
      {note ? <p className="mt-2 max-w-prose text-soft">{note}</p> : null}
    </div>
  );
}
