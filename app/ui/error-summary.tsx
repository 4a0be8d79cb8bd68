import { useEffect, useRef } from "react";
import { fieldId } from "./form-context";
import { type FormErrors, hasErrors } from "./form-errors";

type Props = { errors?: FormErrors | null; title?: string; idPrefix?: string };

function defaultTitle(count: number) {
  return count === 1
    ? "Not saved yet: one thing to put right"
    : `Not saved yet: ${count} things to put right`;
}

/**
 * What has to be put right, in the words used beside the fields, each a link to its field. It takes the focus when
 * it appears and again with each new answer; without script, through `autofocus`.
 */
export function ErrorSummary({ errors, title, idPrefix }: Props) {
  const box = useRef<HTMLElement>(null);
  useEffect(() => {
    if (hasErrors(errors)) box.current?.focus();
  }, [errors]);
  if (!hasErrors(errors)) return null;

  const whole = errors.form ?? [];
  const fields = Object.entries(errors.fields).filter(([, messages]) => messages.length > 0);
  const headingId = `${idPrefix ?? "field"}-summary`;

  return (
    <section
      ref={box}
      tabIndex={-1}
      // biome-ignore lint/a11y/noAutofocus: without script this is the only way to bring the person to the errors
      autoFocus
      aria-labelledby={headingId}
      className="mb-6 max-w-prose border-0 border-l-[6px] border-berry bg-berry-wash px-4 py-3"
    >
      <h2 id={headingId} className="text-base font-semibold text-berry">
        {title ?? defaultTitle(whole.length + fields.length)}
      </h2>
      <ul className="mt-1">
        {whole.map((message) => (
          <li key={message}>{message}</li>
        ))}
        {fields.map(([name, messages]) => (
          <li key={name}>
            <a
              href={`#${fieldId(name, idPrefix)}`}
              className="inline-flex min-h-target items-center text-berry underline underline-offset-4"
            >
              {messages.join(" ")}
            </a>
          </li>
        ))}
      </ul>
    </section>
  );
}
