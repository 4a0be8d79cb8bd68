import type { ReactNode } from "react";

type Props = {
  /** What belongs here. */
  title: ReactNode;
  /** Why it helps to have it. */
  children: ReactNode;
  /** The next step: usually a `ButtonLink`, and a link to a sample file. */
  actions?: ReactNode;
  as?: "h2" | "h3";
};

/** A page or region without content yet. The arc is a corner of the field waiting for its lines. */
export function EmptyState({ title, children, actions, as: Heading = "h2" }: Props) {
  return (
    <section className="relative my-6 max-w-prose overflow-hidden border-t border-line pt-6 pr-20 pb-4">
      <svg aria-hidden="true" className="absolute top-0 right-0 h-20 w-20 text-line" viewBox="0 0 80 80">
        <path d="M20 0 A60 60 0 0 0 80 60" fill="none" stroke="currentColor" strokeWidth="1.5" />
        <circle cx="62" cy="18" r="3" fill="currentColor" />
      </svg>
      <Heading className="text-lg">{title}</Heading>
      <div className="mt-1 space-y-2 text-soft">{children}</div>
      {actions ? <div className="mt-4 flex flex-wrap items-center gap-3">{actions}</div> : null}
    </section>
  );
}
