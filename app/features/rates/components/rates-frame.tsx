import type { ReactNode } from "react";
import { NavLink, useLocation } from "react-router";
import { joinClasses, Page } from "~/ui";
import type { RatesFilters } from "../filters";
import { dayWords } from "../periods";
import { type RateViewPath, rateViews, searchWith } from "../views";
import { type FilterPart, FilterSentence } from "./filter-sentence";

/** What every page of the rates is given by its loader (`frameOf`). */
export type Frame = {
  slug: string;
  organisation: string;
  season: string;
  from: string;
  to: string;
  scopeName: string;
  filters: RatesFilters;
  bands: string[];
  sports: string[];
};

const word = ({ isActive }: { isActive: boolean }) =>
  joinClasses(
    "inline-flex min-h-target items-center no-underline hover:underline underline-offset-4",
    isActive ? "font-semibold text-ink" : "text-lagoon",
  );

/** The views of the rates as words: a row on a desk, behind the name of the present one on a phone. */
export function RatesNav({ slug, current }: { slug: string; current: RateViewPath }) {
  const { search } = useLocation();
  const links = rateViews.map(({ path, label }) => (
    <li key={path}>
      <NavLink
        end
        to={{ pathname: `/${slug}/${path}`, search: searchWith(search, { by: undefined }) }}
        className={word}
      >
        {label}
      </NavLink>
    </li>
  ));
  return (
    <nav aria-label="Views of the rates" className="mb-4 print:hidden">
      <ul className="hidden flex-wrap gap-x-5 md:flex">{links}</ul>
      <details key={current} className="border-y border-line md:hidden">
        <summary className="flex min-h-target cursor-pointer list-none items-center">
          <span className="editable-word font-semibold">
            {rateViews.find(({ path }) => path === current)?.label}
          </span>
          <span className="sr-only">: other views of the rates</span>
        </summary>
        <ul className="pb-2">{links}</ul>
      </details>
    </nav>
  );
}

type Props = {
  frame: Frame;
  current: RateViewPath;
  heading: string;
  /** Parts of the filter sentence beside the case definition and the sessions. */
  parts?: readonly FilterPart[];
  narrow?: boolean;
  /** What is shown where the case definition and the sessions do not apply: "athletes not fully available". */
  shows?: string;
  children: ReactNode;
};

/** The frame of a page of rates: its heading, the other views, the filters. */
export function RatesFrame({ frame, current, heading, parts = [], narrow = true, shows, children }: Props) {
  const { slug, filters, bands, sports } = frame;
  return (
    <Page>
      {/* On the screen the bar above says all this; a sheet of paper has to say it by itself. */}
      <h1 className="sr-only print:not-sr-only print:text-lg print:font-semibold">
        {heading}, {frame.season}
      </h1>
      <p className="hidden print:mb-1 print:block">
        {frame.scopeName === frame.organisation
          ? frame.organisation
          : `${frame.organisation}: ${frame.scopeName}`}
        , {dayWords(frame.from, true)} to {dayWords(frame.to, true)}
      </p>
      <RatesNav slug={slug} current={current} />
      <FilterSentence {...{ filters, bands, sports, parts, narrow, shows }} />
      {children}
    </Page>
  );
}
