import type { ReactNode } from "react";

type Props = { children: ReactNode; above?: ReactNode; below?: ReactNode; actions?: ReactNode };

/** The page's one `h1`, with a quiet line above or below it and, on the right, its actions. */
export function PageHeading({ children, above, below, actions }: Props) {
  return (
    <div className="mb-6 flex flex-wrap items-end justify-between gap-x-8 gap-y-3">
      <div className="min-w-0">
        {above ? <p className="text-soft">{above}</p> : null}
        <h1 className="text-xl">{children}</h1>
        {below ? <p className="mt-0.5 max-w-prose text-soft">{below}</p> : null}
      </div>
      {actions ? <div className="flex flex-wrap gap-3 print:hidden">{actions}</div> : null}
    </div>
  );
}
