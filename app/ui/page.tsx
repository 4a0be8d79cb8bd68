import type { ReactNode } from "react";
import { joinClasses } from "./classes";

const widths = { wide: "max-w-page", text: "max-w-[46rem]", form: "max-w-[40rem]" };

type Props = { children: ReactNode; width?: keyof typeof widths; bottomNav?: boolean };

/**
 * The page's `main`, target of the skip link. All widths start from the same left edge as the bar; `text` and
 * `form` only end earlier.
 */
export function Page({ children, width = "wide", bottomNav = true }: Props) {
  return (
    <main
      id="main"
      tabIndex={-1}
      className={joinClasses(
        "mx-auto max-w-page px-4 pt-5 sm:px-6 md:pt-8 xl:px-0",
        bottomNav ? "room-for-bottom-nav" : "pb-16",
      )}
    >
      <div className={widths[width]}>{children}</div>
    </main>
  );
}

/** A part of the page under a chalk line, with its heading. */
export function Region({ heading, children, id }: { heading?: ReactNode; children: ReactNode; id?: string }) {
  return (
    <section id={id} className="mt-8 border-0 border-t border-line pt-6">
      {heading ? <h2 className="mb-3">{heading}</h2> : null}
      {children}
    </section>
  );
}
