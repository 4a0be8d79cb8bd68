import { Link, useLocation } from "react-router";

type Props = {
  /** From 1. */
  page: number;
  pageSize: number;
  total: number;
  /** Name of the search parameter that carries the page. */
  param?: string;
  /** What is counted, in the plural: "athletes". */
  what: string;
};

const link = "inline-flex min-h-target items-center text-lagoon underline underline-offset-4";

/** "21 to 40 of 312 athletes", with the pages before and after. Keeps every other parameter of the address. */
export function Pager({ page, pageSize, total, param = "page", what }: Props) {
  const { search } = useLocation();
  if (total === 0) return null;
  const last = Math.max(1, Math.ceil(total / pageSize));
  const current = Math.min(Math.max(1, page), last);
  const first = (current - 1) * pageSize + 1;

  function searchFor(target: number) {
    const params = new URLSearchParams(search);
    if (target === 1) params.delete(param);
    else params.set(param, String(target));
    return { search: params.toString() };
  }

  return (
    <nav aria-label={`Pages of ${what}`} className="flex flex-wrap items-center gap-x-6 gap-y-1 py-2">
      <p className="text-soft">
        {first} to {Math.min(total, current * pageSize)} of {total.toLocaleString("en-GB")} {what}
      </p>
      {current > 1 ? (
        <Link rel="prev" className={link} to={searchFor(current - 1)}>
          Earlier {what}
        </Link>
      ) : null}
      {current < last ? (
        <Link rel="next" className={link} to={searchFor(current + 1)}>
          Further {what}
        </Link>
      ) : null}
    </nav>
  );
}
