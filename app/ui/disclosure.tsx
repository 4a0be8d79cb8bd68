import type { ReactNode } from "react";

type Props = { summary: ReactNode; children: ReactNode; open?: boolean; name?: string };

/** Something that can wait, opened by its own words. Built on `details`, so it needs no script. */
export function Disclosure({ summary, children, open, name }: Props) {
  return (
    <details className="group my-4 border-y border-line" open={open} name={name}>
      <summary className="flex min-h-target items-center gap-3 py-2 font-medium text-lagoon">
        <svg
          aria-hidden="true"
          viewBox="0 0 12 12"
          className="h-3 w-3 shrink-0 transition-transform group-open:rotate-90"
        >
          <path
            d="M3.5 1.5 8.5 6l-5 4.5"
            fill="none"
            stroke="currentColor"
            strokeWidth="2"
            strokeLinecap="round"
          />
        </svg>
        {summary}
      </summary>
      <div className="pb-4 pl-6">{children}</div>
    </details>
  );
}
