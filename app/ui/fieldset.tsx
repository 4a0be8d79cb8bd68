import type { ReactNode } from "react";

type Props = { legend: ReactNode; help?: ReactNode; children: ReactNode; id?: string };

/** A group of fields under one heading. For one question with several answers use `ChoiceButtons`. */
export function Fieldset({ legend, help, children, id }: Props) {
  return (
    <fieldset id={id} className="mb-8 min-w-0 border-0 border-t border-line pt-5">
      <legend className="float-left mb-3 w-full text-lg font-semibold">{legend}</legend>
      <div className="clear-both">
        {help ? <p className="mb-4 max-w-prose text-soft">{help}</p> : null}
        {children}
      </div>
    </fieldset>
  );
}
