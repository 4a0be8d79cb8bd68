import type { ReactNode } from "react";
import { Link } from "react-router";
import { Mark } from "./mark";

type Props = {
  name: string;
  home: string;
  /** The sentence of scope; its editable parts are links or buttons with the class `editable-word`. */
  scope?: ReactNode;
  /** Who is signed in, and the way out. */
  person?: ReactNode;
};

/** A centre circle and a halfway line, faint, as seen from above the field. */
function FieldLines() {
  return (
    <svg
      aria-hidden="true"
      viewBox="0 0 390 64"
      preserveAspectRatio="xMaxYMid slice"
      className="pointer-events-none absolute inset-y-0 right-0 hidden h-full w-[390px] overflow-hidden text-bar-line md:block"
    >
      <g fill="none" stroke="currentColor" strokeWidth="2">
        <circle cx="210" cy="53" r="92" />
        <path d="M0 53H390M210 -60V140" />
      </g>
    </svg>
  );
}

/** The one bar at the top of every page. */
export function TopBar({ name, home, scope, person }: Props) {
  return (
    <header data-furniture className="on-dark relative bg-bar text-on-bar">
      {/* Clipped here and not by the bar, so that its menus can open below it. */}
      <div aria-hidden="true" className="pointer-events-none absolute inset-0 overflow-hidden">
        <FieldLines />
      </div>
      <div className="relative mx-auto flex min-h-14 max-w-page flex-wrap items-center gap-x-5 gap-y-0 px-4 sm:px-6 md:min-h-16 xl:px-0">
        <Link
          to={home}
          className="inline-flex min-h-target items-center gap-2.5 text-lg font-medium text-on-bar no-underline"
        >
          <Mark className="h-7 w-7 text-sand" />
          {name}
        </Link>
        {scope ? (
          <div className="order-last w-full pb-2.5 text-sm leading-relaxed md:order-none md:w-auto md:flex-1 md:pb-0 md:text-base">
            {scope}
          </div>
        ) : null}
        {person ? <div className="ml-auto text-sm md:text-base">{person}</div> : null}
      </div>
    </header>
  );
}
