import type { ReactNode } from "react";
import { Button, buttonClasses, type TargetSize } from "./button";

type Props = {
  /** Words of the first press: "End this membership". */
  label: ReactNode;
  /** What will happen, in one or two sentences. */
  question: ReactNode;
  /** Words of the press that does it; name the deed, not "OK". */
  confirmLabel: ReactNode;
  name?: string;
  value?: string;
  look?: "danger" | "primary";
  size?: TargetSize;
  busy?: boolean;
};

/**
 * A deed in two presses, inside a form: the first opens the question in place, the second submits. Built on
 * `details`: no script, no window on top of the page, and closing it is pressing the first words again.
 */
export function ConfirmButton({ label, question, confirmLabel, name, value, ...rest }: Props) {
  const { look = "danger", size = "regular", busy } = rest;
  return (
    <details className="max-w-prose print:hidden">
      <summary className={buttonClasses({ look: "secondary", size })}>{label}</summary>
      <div className="mt-3 border-0 border-l-[6px] border-berry bg-berry-wash px-4 py-3">
        <div className="mb-3">{question}</div>
        <Button look={look} size={size} name={name} value={value} busy={busy}>
          {confirmLabel}
        </Button>
      </div>
    </details>
  );
}
