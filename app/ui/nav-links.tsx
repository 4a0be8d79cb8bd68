import { NavLink } from "react-router";
import { joinClasses } from "./classes";

export type NavItem = { to: string; label: string; end?: boolean };

type Props = { items: NavItem[]; label?: string };

const phonePlaces = 5;

const wordClasses = ({ isActive }: { isActive: boolean }) =>
  joinClasses(
    "flex min-h-[56px] items-center justify-center border-t-[3px] px-1 text-center text-sm no-underline",
    "md:min-h-[50px] md:border-t-0 md:border-b-[3px] md:px-0 md:text-base",
    "hover:text-ink focus-visible:-outline-offset-2",
    isActive ? "border-ember font-medium text-ink" : "border-transparent text-soft",
  );

function Item({ to, label, end }: NavItem) {
  return (
    <NavLink to={to} end={end} className={wordClasses}>
      {label}
    </NavLink>
  );
}

/**
 * The few addresses of this role, as words: a row under the bar on a desk, the bottom edge on a phone. A phone has
 * room for five; with more, the first four stay and the rest open from the fifth place.
 */
export function NavLinks({ items, label = "Main" }: Props) {
  const crowded = items.length > phonePlaces;
  const rest = crowded ? items.slice(phonePlaces - 1) : [];
  return (
    <nav
      aria-label={label}
      data-furniture
      className="bottom-nav border-0 border-t border-line bg-paper md:border-t-0 md:border-b"
    >
      <ul className="mx-auto grid max-w-page auto-cols-fr grid-flow-col md:flex md:flex-wrap md:gap-x-7 md:px-6 xl:px-0">
        {items.map((item, index) => (
          <li
            key={item.to}
            className={joinClasses("min-w-0", crowded && index >= phonePlaces - 1 && "hidden md:block")}
          >
            <Item {...item} />
          </li>
        ))}
        {crowded ? (
          <li className="min-w-0 md:hidden">
            <details className="relative">
              <summary className={wordClasses({ isActive: false })}>More</summary>
              <ul className="absolute right-0 bottom-full w-56 rounded-t-md border border-b-0 border-line bg-paper px-4 shadow-float">
                {rest.map((item) => (
                  <li key={item.to} className="border-0 border-b border-line last:border-b-0">
                    <Item {...item} />
                  </li>
                ))}
              </ul>
            </details>
          </li>
        ) : null}
      </ul>
    </nav>
  );
}
